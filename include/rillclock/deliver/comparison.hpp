#pragma once

#include <optional>
#include <string>
#include <vector>

namespace rillclock {

/// A figure in two results; either may lack it.
struct TwoFigures {
    std::optional<double> before = {};
    std::optional<double> after = {};
    [[nodiscard]] bool are_both() const { return before.has_value() && after.has_value(); }
    /// After less before; none where either lacks.
    [[nodiscard]] std::optional<double> change() const;
    /// The change as a share of the figure before; none where either lacks or the figure before is not above 0.
    [[nodiscard]] std::optional<double> relative_change() const;
};

/// Peaks of a point for one return period.
struct ComparedPeriod {
    double return_period = 0.0;   ///< years
    TwoFigures coefficient;
    TwoFigures whole_area_peak;   ///< in the results' unit of flow
    TwoFigures peak;              ///< of the partial area

    /// The relative change of that of the two peaks that grows more; none where neither can be compared.
    [[nodiscard]] std::optional<double> peak_growth() const;
};

/// A point of two results.
struct ComparedPoint {
    std::string name;
    TwoFigures time_min;                  ///< with which peaks are made: in the network, where there are pipes or overrides
    TwoFigures ground_time_min;           ///< along the governing path
    TwoFigures length;                    ///< of the governing path, in the results' unit of length
    bool has_same_head = true;            ///< whether the governing path begins at the same place
    std::optional<bool> has_same_path = {};  ///< whether it runs through the same cells; none where a result does not say through which
    std::string last_before = {};         ///< the subarea that arrives last; empty where the results do not say
    std::string last_after = {};
    TwoFigures lead_min;
    std::vector<ComparedPeriod> periods = {};

    /// By how much the point gets worse, as a share: how much shorter its time or greater its peak becomes, of the whole or the partial area, whichever is most; 0 or less
    /// where neither.
    [[nodiscard]] double worsening() const;
};

/// Two results of the same points.
struct Comparison {
    std::string before;                   ///< folders as named by the user
    std::string after;
    std::string length_unit;              ///< "ft" or "m"
    std::string flow_unit;                ///< as column names spell it; empty where no peaks are compared
    double tolerance = 0.05;              ///< share
    std::vector<ComparedPoint> points;    ///< in the order of the result before

    /// Whether for every point it is known if the path is the same.
    [[nodiscard]] bool knows_paths() const;
    /// Places of the points that get worse by more than the tolerance, the worst first; of equal ones the earlier.
    [[nodiscard]] std::vector<std::size_t> worse() const;
};

/// How many points get worse, and which most.
[[nodiscard]] std::string comparison_sentence(const Comparison& comparison);
/// How many governing paths run through other cells, or that it is not known.
[[nodiscard]] std::string paths_sentence(const Comparison& comparison);
/// Places of all points: those that get worse, the worst first, then the others by how much their time changes.
[[nodiscard]] std::vector<std::size_t> places_by_change(const Comparison& comparison);
/// A sentence on the whole and a table for a terminal: points that get worse first, then those that change most; at most `most` rows.
[[nodiscard]] std::string comparison_text(const Comparison& comparison, std::size_t most);
/// `tables/comparison.csv`: a row a point.
[[nodiscard]] std::string comparison_table(const Comparison& comparison);
/// `tables/compared_peaks.csv`: a row a point and return period; those whose peak grows most come first, of equal ones the earlier.
[[nodiscard]] std::string compared_peaks_table(const Comparison& comparison);
/// All of it, with the points that get worse by name.
[[nodiscard]] std::string comparison_json(const Comparison& comparison);

}  // namespace rillclock
