#pragma once

#include <cmath>
#include <string>

#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/report_units.hpp"
#include "rillclock/study/uncertain_inputs.hpp"

namespace rillclock {

/// A value of an uncertain input in the units of the report.
inline std::string value_text(const ReportScale& scale, const UncertainInput& input, double value) {
    if (input.unit == "m/s") return std::isfinite(value) ? significant(scale.speed(value)) : "unlimited";
    return significant(input.unit == "m" ? scale.length(value) : value);
}

inline std::string unit_text(const ReportScale& scale, const UncertainInput& input) {
    if (input.unit == "m") return scale.length_unit();
    if (input.unit == "m/s") return scale.speed_unit();
    return input.unit;
}

}  // namespace rillclock
