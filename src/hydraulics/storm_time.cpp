#include "rillclock/hydraulics/storm_time.hpp"

#include <cmath>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

bool is_time(Duration time) {
    return time >= seconds(0) && std::isfinite(time.si());
}

bool has_settled(const StormIteration& row, Duration tolerance) {
    const Duration difference = row.computed - row.assumed;
    return difference <= tolerance && -difference <= tolerance;
}

void require_search(const StormSearch& search) {
    const bool good = is_time(search.start) && search.start > seconds(0) && search.tolerance > seconds(0);
    if (!good) throw input_error("the iteration with the rain needs a first time and a tolerance above zero");
}

}  // namespace

std::string_view words(StormDuration duration) {
    switch (duration) {
        case StormDuration::whole_path:
            return "whole path";
        case StormDuration::sheet_part:
            return "sheet part";
    }
    return "";
}

std::string_view words(StormEnd end) {
    switch (end) {
        case StormEnd::settled:
            return "settled";
        case StormEnd::beyond_the_rain:
            return "beyond the rain";
        case StormEnd::not_settling:
            return "not settling";
    }
    return "";
}

Duration StormTime::time() const {
    return rows.empty() ? seconds(std::nan("")) : rows.back().computed;
}

Intensity StormTime::intensity() const {
    return rows.empty() ? Intensity::from_si(std::nan("")) : rows.back().intensity;
}

StormTime solve_storm_time(const TimeOfIntensity& time, const IntensityOfDuration& intensity,
                           const StormSearch& search) {
    require_search(search);
    StormTime solution;
    Duration assumed = search.start;
    for (int row = 0; row < search.most_rows; ++row) {
        const auto read = intensity(assumed);
        if (!read) {
            solution.end = StormEnd::beyond_the_rain;
            return solution;
        }
        solution.rows.push_back({assumed, *read, time(*read)});
        if (!is_time(solution.time())) return solution;
        if (has_settled(solution.rows.back(), search.tolerance)) {
            solution.end = StormEnd::settled;
            return solution;
        }
        assumed = solution.time();
    }
    return solution;
}

}  // namespace rillclock
