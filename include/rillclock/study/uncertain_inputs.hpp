#pragma once

#include <cstdint>
#include <string>
#include <vector>

#include "rillclock/study/study.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "rillclock/travel/travel_setting.hpp"

namespace rillclock {

/// What of a study is known within a range only.
enum class UncertainKind {
    roughness,         ///< sheet-flow n of one cover class
    rain,              ///< factor
    sheet_limit,       ///< m
    shallow_speed,     ///< factor
    overland_floor,    ///< rise over run
    channel_floor,     ///< rise over run
    channel_n,
    channel_radius,    ///< factor
    pond_speed,        ///< m/s
};

/// An input with its range.
struct UncertainInput {
    UncertainKind kind = UncertainKind::roughness;
    std::uint8_t surface = 0;    ///< position of the class whose roughness it is
    std::string name;            ///< "n of Deciduous Forest", "ponded speed"
    std::string unit = {};       ///< "m/s", "m", "factor", "slope"; empty for n
    double low = 0.0;            ///< low ≤ typical ≤ high; high may be infinite
    double typical = 0.0;
    double high = 0.0;
    std::string source = {};     ///< "cover book nlcd", "study", "rillclock's own judgement"

    [[nodiscard]] bool is_roughness() const { return kind == UncertainKind::roughness; }
    /// The end of the range at which water is faster, and that at which it is slower.
    [[nodiscard]] double fast() const;
    [[nodiscard]] double slow() const;
    /// The value below which a share of all draws lies (0 to 1): triangular between low and high with its peak at typical; for
    /// speeds the time a metre takes is. Basic arithmetic and a square root, so that it is the same on every machine.
    [[nodiscard]] double at_share(double share) const;
};

/// The inputs of a study that have a range: the classes of its book that the data hold (`is_met`, by position; those without a range left out),
/// and the rules, with the study's ranges where stated and ours elsewhere.
[[nodiscard]] std::vector<UncertainInput> uncertain_inputs(const Study& study, const CoverBook& book, const std::vector<bool>& is_met);

/// Puts a value of an input into a setting. `base` is the study's own setting.
void put_value(const UncertainInput& input, double value, const TravelSetting& base, TravelSetting& setting);

/// The study's own setting with these values, one an input.
[[nodiscard]] TravelSetting setting_of(const std::vector<UncertainInput>& inputs, const std::vector<double>& values,
                                       const TravelSetting& base);

/// The bounds that hold all settings of these inputs.
[[nodiscard]] SettingBounds bounds_of(const std::vector<UncertainInput>& inputs, const TravelSetting& base);

/// The values of the draw of that number (from 0), one an input. Each input has a stream of its own, so one input more or less changes no
/// other's draws: std::mt19937_64 of the seed and the input's name, the upper 53 bits of each number as a share.
[[nodiscard]] std::vector<std::vector<double>> drawn_values(const std::vector<UncertainInput>& inputs, int draws, int seed);

/// Throws an input error where a stated range does not hold the study's own value, and where what is asked for excludes
/// uncertainty.
void check_uncertainty(const Study& study);

/// What the ranges say nothing of, in a sentence.
inline constexpr const char* uncertainty_leaves_out =
    "These ranges leave out the choice of method, the elevations and all that is read from them (flow paths, slopes, ponded ground), where "
    "channels begin, and the land cover itself.";

}  // namespace rillclock
