#pragma once

#include <string>

#include "rillclock/core/quantity.hpp"
#include "rillclock/hydraulics/rational.hpp"
#include "rillclock/study/study.hpp"

namespace rillclock {

/// The units results are reported in, and the endings that column names carry.
class ReportScale {
public:
    explicit ReportScale(ReportUnits units) : us_(units == ReportUnits::us) {}

    /// @name Endings of column names
    ///@{
    [[nodiscard]] std::string length_unit() const { return us_ ? "ft" : "m"; }
    [[nodiscard]] std::string area_unit() const { return us_ ? "ac" : "ha"; }
    [[nodiscard]] std::string speed_unit() const { return us_ ? "ft_per_s" : "m_per_s"; }
    [[nodiscard]] std::string rain_unit() const { return us_ ? "in" : "mm"; }
    [[nodiscard]] std::string flow_unit() const { return us_ ? "ft3_per_s" : "m3_per_s"; }
    [[nodiscard]] std::string intensity_unit() const { return us_ ? "in_per_h" : "mm_per_h"; }
    ///@}
    /// @name Numbers in the unit of the ending
    /// Bare ones are in SI.
    ///@{
    [[nodiscard]] double flow(Discharge q) const { return flow(in_cubic_metres_per_second(q)); }
    [[nodiscard]] double length(double m) const { return us_ ? in_feet(metres(m)) : m; }
    [[nodiscard]] double area(double m2) const { return us_ ? in_acres(square_metres(m2)) : m2 / 1e4; }
    [[nodiscard]] double speed(double m_per_s) const { return us_ ? in_feet(metres(m_per_s)) : m_per_s; }
    [[nodiscard]] double flow(double m3_per_s) const { return us_ ? m3_per_s / (metres_per_foot * metres_per_foot * metres_per_foot) : m3_per_s; }
    [[nodiscard]] double rain(Length depth) const { return us_ ? in_inches(depth) : in_millimetres(depth); }
    [[nodiscard]] double intensity(Intensity i) const { return us_ ? in_inches_per_hour(i) : in_millimetres_per_hour(i); }
    ///@}

private:
    bool us_;
};

}  // namespace rillclock
