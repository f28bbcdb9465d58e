#pragma once

#include <algorithm>
#include <optional>
#include <span>
#include <string_view>
#include <vector>

#include "rillclock/hydraulics/methods.hpp"
#include "rillclock/surface/land.hpp"

namespace rillclock {

/// A printed coefficient, or the ends of a printed range.
struct PrintedRange {
    double least = 0.0;
    double greatest = 0.0;

    /// What counts where the book states no coefficient of its own: the middle.
    [[nodiscard]] double used() const { return (least + greatest) / 2; }
    [[nodiscard]] bool is_range() const { return least < greatest; }
};

/// A row of a printed table of runoff coefficients.
struct CoefficientRow {
    std::string_view name;               ///< as the column land_use of a cover book writes it: "asce roofs"
    std::vector<PrintedRange> by_slope;  ///< one for land of any slope, else one of each slope class of the table

    [[nodiscard]] bool is_by_slope() const { return by_slope.size() > 1; }
    /// Of all slope classes together.
    [[nodiscard]] PrintedRange all() const;
};

/// A published table of runoff coefficients that hold for storms of any return period, so that frequency factors act on them. Where a
/// range is printed, its middle counts.
struct CoefficientTable {
    std::string_view of;                  ///< what it is of: "urban land and surfaces"
    std::string_view source;
    Trust trust = Trust::from_memory;
    std::string_view remark;              ///< what to know of it; may be empty
    std::vector<SlopeBand> slope_ends = {};    ///< the last band of each slope class but the last; empty where it has none
    std::optional<SlopeBand> printed_to = {};  ///< the last band that its last slope class is printed for; none: it has no end
    std::vector<CoefficientRow> rows = {};
    bool is_of_addends = false;           ///< a coefficient is the sum of rows: none is a land use by itself

    /// Of the slope class that land of this band is in; beyond what is printed, of the last.
    [[nodiscard]] const PrintedRange& range(const CoefficientRow& row, SlopeBand slope) const {
        if (!row.is_by_slope()) return row.by_slope.front();
        const auto end = std::lower_bound(slope_ends.begin(), slope_ends.end(), slope);
        return row.by_slope[static_cast<std::size_t>(end - slope_ends.begin())];
    }
};

/// All tables.
[[nodiscard]] std::span<const CoefficientTable> coefficient_tables();

/// A row with its table.
struct FoundRow {
    const CoefficientTable* table = nullptr;
    const CoefficientRow* row = nullptr;
};
/// The row of that name; none where no table has one, and for rows that are addends.
[[nodiscard]] std::optional<FoundRow> find_printed_row(std::string_view name);

/// What is printed for a name that the column land_use may hold, over all soils, slopes and return periods; none for other names.
[[nodiscard]] std::optional<PrintedRange> printed_range(std::string_view land_use);

/// All names that the column land_use may hold.
[[nodiscard]] std::span<const std::string_view> land_use_names();

}  // namespace rillclock
