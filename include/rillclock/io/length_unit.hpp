#pragma once

#include <optional>
#include <string>
#include <string_view>

namespace rillclock {

/// A unit of length, as a file or a study names it.
struct LengthUnit {
    std::string name = "metre";    ///< "metre", "foot", "US survey foot", or as the file says
    double metres_per_unit = 1.0;  ///< exact for the three named

    [[nodiscard]] bool is_metre() const { return metres_per_unit == 1.0; }
    /// The international or the US survey foot.
    [[nodiscard]] bool is_foot() const;
    /// Whether two units cannot both be meant: they differ by more than a hundred-thousandth. The two feet, 2 parts in
    /// a million apart, do not contradict each other: many files say "ft" for either.
    [[nodiscard]] bool contradicts(const LengthUnit& other) const;
};

/// The unit a text names: "m", "metres", "ft", "feet", "us survey ft", "ftUS", "cm" and the like, in any case. None
/// where the text is not known.
[[nodiscard]] std::optional<LengthUnit> length_unit_named(std::string_view text);

/// The unit of so many metres, with its usual name. Factors within 1e-9 of a known unit are taken as that unit exactly.
[[nodiscard]] LengthUnit length_unit_of(double metres_per_unit, const std::string& name);

}  // namespace rillclock
