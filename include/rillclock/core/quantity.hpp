#pragma once

#include <compare>

namespace rillclock {

/// A physical quantity kept in SI, of dimension length^L · time^T; `Kind` tells apart quantities of one dimension.
///
/// Made by a named unit (`metres(30)`) and left by a named unit (`in_feet(x)`); there is no constructor from a bare
/// number, so a wrong dimension does not compile. The machine code is that of a double.
template <int L, int T, class Kind = void>
class Quantity {
public:
    constexpr Quantity() = default;

    /// From a number in SI: metres, seconds, and what is made of them.
    [[nodiscard]] static constexpr Quantity from_si(double value) { return Quantity(value); }
    [[nodiscard]] constexpr double si() const { return si_; }

    constexpr auto operator<=>(const Quantity&) const = default;

    constexpr Quantity& operator+=(Quantity other) { return *this = *this + other; }
    friend constexpr Quantity operator+(Quantity a, Quantity b) { return Quantity(a.si_ + b.si_); }
    friend constexpr Quantity operator-(Quantity a, Quantity b) { return Quantity(a.si_ - b.si_); }
    friend constexpr Quantity operator-(Quantity a) { return Quantity(-a.si_); }
    friend constexpr Quantity operator*(Quantity a, double factor) { return Quantity(a.si_ * factor); }
    friend constexpr Quantity operator*(double factor, Quantity a) { return Quantity(factor * a.si_); }
    friend constexpr Quantity operator/(Quantity a, double divisor) { return Quantity(a.si_ / divisor); }
    friend constexpr double operator/(Quantity a, Quantity b) { return a.si_ / b.si_; }

private:
    explicit constexpr Quantity(double value) : si_(value) {}
    double si_ = 0.0;
};

struct RainfallKind;

/// @name Quantities
/// Kept in SI: metres, square metres, seconds, m/s and m³/s.
///@{
using Length = Quantity<1, 0>;
using Area = Quantity<2, 0>;
using Duration = Quantity<0, 1>;
using Speed = Quantity<1, -1>;
using Discharge = Quantity<3, -1>;
///@}
/// Depth of rain per time; a kind of its own, so that it cannot be mistaken for a speed of flow.
using Intensity = Quantity<1, -1, RainfallKind>;

/// @name Products and quotients that have another dimension
///@{
[[nodiscard]] constexpr Area operator*(Length a, Length b) { return Area::from_si(a.si() * b.si()); }
[[nodiscard]] constexpr Speed operator/(Length a, Duration b) { return Speed::from_si(a.si() / b.si()); }
[[nodiscard]] constexpr Duration operator/(Length a, Speed b) { return Duration::from_si(a.si() / b.si()); }
///@}

/// Metres in one international foot, exact by definition (1959).
inline constexpr double metres_per_foot = 0.3048;
/// Metres in one US survey foot, exact by definition: 1200/3937.
inline constexpr double metres_per_us_survey_foot = 1200.0 / 3937.0;
inline constexpr double metres_per_inch = 0.0254;
inline constexpr double metres_per_mile = 1609.344;
inline constexpr double square_metres_per_acre = 43560.0 * metres_per_foot * metres_per_foot;

/// @name Lengths by a unit, and as a number of it
/// The unit is that of the function's name; feet are international.
///@{
[[nodiscard]] constexpr Length metres(double v) { return Length::from_si(v); }
[[nodiscard]] constexpr Length kilometres(double v) { return Length::from_si(v * 1000.0); }
[[nodiscard]] constexpr Length millimetres(double v) { return Length::from_si(v / 1000.0); }
[[nodiscard]] constexpr Length centimetres(double v) { return Length::from_si(v / 100.0); }
[[nodiscard]] constexpr Length feet(double v) { return Length::from_si(v * metres_per_foot); }
[[nodiscard]] constexpr Length us_survey_feet(double v) { return Length::from_si(v * metres_per_us_survey_foot); }
[[nodiscard]] constexpr Length inches(double v) { return Length::from_si(v * metres_per_inch); }
[[nodiscard]] constexpr Length miles(double v) { return Length::from_si(v * metres_per_mile); }
[[nodiscard]] constexpr double in_metres(Length v) { return v.si(); }
[[nodiscard]] constexpr double in_millimetres(Length v) { return v.si() * 1000.0; }
[[nodiscard]] constexpr double in_kilometres(Length v) { return v.si() / 1000.0; }
[[nodiscard]] constexpr double in_feet(Length v) { return v.si() / metres_per_foot; }
[[nodiscard]] constexpr double in_inches(Length v) { return v.si() / metres_per_inch; }
///@}

/// @name Areas by a unit, and as a number of it
/// The unit is that of the function's name; feet are international.
///@{
[[nodiscard]] constexpr Area square_metres(double v) { return Area::from_si(v); }
[[nodiscard]] constexpr Area hectares(double v) { return Area::from_si(v * 1e4); }
[[nodiscard]] constexpr Area square_kilometres(double v) { return Area::from_si(v * 1e6); }
[[nodiscard]] constexpr Area acres(double v) { return Area::from_si(v * square_metres_per_acre); }
[[nodiscard]] constexpr Area square_miles(double v) { return Area::from_si(v * metres_per_mile * metres_per_mile); }
[[nodiscard]] constexpr Area square_feet(double v) { return Area::from_si(v * metres_per_foot * metres_per_foot); }
[[nodiscard]] constexpr double in_square_metres(Area v) { return v.si(); }
[[nodiscard]] constexpr double in_hectares(Area v) { return v.si() / 1e4; }
[[nodiscard]] constexpr double in_square_kilometres(Area v) { return v.si() / 1e6; }
[[nodiscard]] constexpr double in_acres(Area v) { return v.si() / square_metres_per_acre; }
///@}

/// @name Durations by a unit, and as a number of it
/// The unit is that of the function's name; feet are international.
///@{
[[nodiscard]] constexpr Duration seconds(double v) { return Duration::from_si(v); }
[[nodiscard]] constexpr Duration minutes(double v) { return Duration::from_si(v * 60.0); }
[[nodiscard]] constexpr Duration hours(double v) { return Duration::from_si(v * 3600.0); }
[[nodiscard]] constexpr double in_seconds(Duration v) { return v.si(); }
[[nodiscard]] constexpr double in_minutes(Duration v) { return v.si() / 60.0; }
[[nodiscard]] constexpr double in_hours(Duration v) { return v.si() / 3600.0; }
///@}

/// @name Speeds by a unit, and as a number of it
/// The unit is that of the function's name; feet are international.
///@{
[[nodiscard]] constexpr Speed metres_per_second(double v) { return Speed::from_si(v); }
[[nodiscard]] constexpr Speed feet_per_second(double v) { return Speed::from_si(v * metres_per_foot); }
[[nodiscard]] constexpr double in_metres_per_second(Speed v) { return v.si(); }
[[nodiscard]] constexpr double in_feet_per_second(Speed v) { return v.si() / metres_per_foot; }
///@}

/// @name Intensities by a unit, and as a number of it
/// The unit is that of the function's name; feet are international.
///@{
[[nodiscard]] constexpr Intensity millimetres_per_hour(double v) { return Intensity::from_si(v / 3.6e6); }
[[nodiscard]] constexpr Intensity inches_per_hour(double v) { return Intensity::from_si(v * metres_per_inch / 3600.0); }
[[nodiscard]] constexpr double in_millimetres_per_hour(Intensity v) { return v.si() * 3.6e6; }
[[nodiscard]] constexpr double in_inches_per_hour(Intensity v) { return v.si() * 3600.0 / metres_per_inch; }
///@}

}  // namespace rillclock
