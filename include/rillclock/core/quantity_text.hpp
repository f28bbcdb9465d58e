#pragma once

#include <string>
#include <string_view>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

/// Which numbers a quantity may have.
enum class Sign { positive, not_negative, any };

/// What is asked for, so that an error can say where the text stood and what its right form is.
struct QuantityAsked {
    std::string subject;       ///< begins the sentence: "slope_window (study.toml, line 3, column 16)"
    std::string example = {};  ///< a right form, "20 m"; a usual one of the dimension where empty
    Sign sign = Sign::positive;
};

/// @name Quantities from texts
///
/// Texts of a number and a unit: "100 ft", "3.4 in", "4 ha", "5 min", "2 m/s", "1.2 in/h", "0.5 %".
///
/// Numbers have a decimal point whatever the locale. Units are spelled exactly: m km cm mm ft in mi yd "us survey ft";
/// m2 ha km2 ac ft2 mi2 (also with ²); s min h; m/s ft/s; mm/h in/h; %. "ft" is the international foot.
/// Each throws an input error for a number that is missing, not finite or of the wrong sign, and for a unit that is
/// missing, unknown or of another dimension; the sentence shows the right form and lists the units.
///@{
[[nodiscard]] Length length_from_text(std::string_view text, const QuantityAsked& asked);
[[nodiscard]] Area area_from_text(std::string_view text, const QuantityAsked& asked);
[[nodiscard]] Duration duration_from_text(std::string_view text, const QuantityAsked& asked);
[[nodiscard]] Speed speed_from_text(std::string_view text, const QuantityAsked& asked);
[[nodiscard]] Intensity intensity_from_text(std::string_view text, const QuantityAsked& asked);
///@}
/// "0.5 %" is 0.005.
[[nodiscard]] double fraction_from_text(std::string_view text, const QuantityAsked& asked);
/// A bare number, as in a column whose header names the unit; the errors are those above.
[[nodiscard]] double number_from_text(std::string_view text, const QuantityAsked& asked);

/// A length that grows with an area: coefficient · (area / unit)^exponent.
struct PowerLaw {
    Length coefficient;     ///< the length at one unit of area
    Area unit;              ///< what the area is counted in
    double exponent = 0.0;  ///< 0 to 2; 0 is a constant length

    [[nodiscard]] Length operator()(Area area) const;
    bool operator==(const PowerLaw&) const = default;
};

/// "2.70 m * km2^0.352" (a length, times a unit of area to a power), or a plain length, "3 m", for a constant.
/// Throws an input error that shows that form.
[[nodiscard]] PowerLaw power_law_from_text(std::string_view text, const QuantityAsked& asked);

}  // namespace rillclock
