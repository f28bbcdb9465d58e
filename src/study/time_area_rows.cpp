#include "rillclock/study/time_area_rows.hpp"

#include <algorithm>
#include <array>
#include <cmath>

namespace rillclock {
namespace {

constexpr double most_steps = 24.0;
constexpr std::array round_seconds{5.0, 10.0, 15.0, 30.0, 60.0, 120.0, 300.0, 600.0, 900.0, 1800.0, 3600.0, 7200.0, 21600.0, 86400.0};

std::vector<Duration> durations_of(const PartialAreaSearch& search, Duration governing, Duration bin) {
    const Duration longest = std::max(search.whole_time, search.least_time);
    const Duration step = time_area_step(longest, bin);
    std::vector<Duration> durations{governing, longest};
    const auto steps = static_cast<int>(std::ceil(longest / step));
    for (int i = 1; i < steps; ++i) durations.push_back(step * static_cast<double>(i));
    std::sort(durations.begin(), durations.end());
    durations.erase(std::unique(durations.begin(), durations.end()), durations.end());
    return durations;
}

}  // namespace

Duration time_area_step(Duration whole_time, Duration bin) {
    for (const double s : round_seconds) {
        if (seconds(s) >= bin && whole_time / seconds(s) <= most_steps) return seconds(s);
    }
    return seconds(round_seconds.back()) * std::ceil(whole_time / seconds(round_seconds.back()) / most_steps);
}

std::vector<TimeAreaRow> time_area_rows(const ArrivalCurve& curve, const PartialAreaSearch& search, Duration governing,
                                        FixedTime begins, RationalConversion conversion) {
    const auto place_s = [&](std::int64_t bin) { return static_cast<double>(bin) * in_seconds(curve.bin) - from_fixed(begins); };
    std::vector<TimeAreaRow> rows;
    std::size_t next = 0;
    FixedArea running = 0;
    for (const Duration duration : durations_of(search, governing, curve.bin)) {
        const std::optional<RainWindow> window = rain_window(curve, search, duration);
        if (!window) break;
        TimeAreaRow row;
        row.duration = duration;
        row.window = *window;
        const bool is_whole = duration >= search.whole_time;
        for (; next < curve.runoff.size() && (is_whole || place_s(curve.first_bin + static_cast<std::int64_t>(next)) < in_seconds(duration)); ++next) {
            row.in_band += curve.runoff[next];
        }
        running += row.in_band;
        row.running = running;
        row.window_begins = seconds(std::max(0.0, place_s(window->first_bin)));
        row.intensity = *search.rain(duration);
        row.flow = rational_peak(square_metres(from_fixed_area(window->runoff)), row.intensity, conversion);
        row.is_searched = duration >= search.least_time;
        rows.push_back(row);
    }
    return rows;
}

}  // namespace rillclock
