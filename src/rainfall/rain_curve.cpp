#include "rillclock/rainfall/rain_curve.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {

Intensity TabulatedRain::operator()(Duration duration) const {
    const auto next =
        std::partition_point(points.begin(), points.end(), [&](const RainPoint& p) { return p.duration < duration; });
    if (next == points.end()) throw bug("rain was read beyond its table");
    if (next->duration == duration) return next->intensity;
    if (next == points.begin()) throw bug("rain was read before its table");
    const RainPoint& before = *(next - 1);
    const double exponent = std::log(next->intensity / before.intensity) / std::log(next->duration / before.duration);
    return before.intensity * std::pow(duration / before.duration, exponent);
}

Intensity FormulatedRain::operator()(Duration duration) const {
    Intensity sum;
    for (const Part& part : parts) sum += part.weight * part.formula(duration, part.return_period);
    return sum;
}

RainCurve::RainCurve(Law law, RainRange range, Duration least_time, std::string source)
    : law_(std::move(law)), range_(range), shortest_(std::max(range.first, least_time)), source_(std::move(source)) {}

Duration RainCurve::read_at(Duration duration) const {
    return std::max(duration, shortest_);
}

std::optional<Intensity> RainCurve::within(Duration duration) const {
    const Duration read = read_at(duration);
    const bool known = read >= shortest_ && (!range_.last || read <= *range_.last);
    if (!known) return std::nullopt;
    const Intensity intensity = std::visit([&](const auto& law) { return law(read); }, law_);
    if (!std::isfinite(intensity.si())) return std::nullopt;
    return intensity;
}

Intensity RainCurve::at(Duration duration) const {
    if (const auto intensity = within(duration)) return *intensity;
    const std::string asked = source_ + " holds no rain of " + significant(in_minutes(duration), 4) + " min: ";
    if (range_.last && duration > *range_.last)
        throw input_error(asked + "its longest duration is " + significant(in_minutes(*range_.last), 6) +
                          " min; give rain for longer durations");
    throw input_error(asked + "no finite intensity comes of that duration; state a least time such as \"5 min\"");
}

}  // namespace rillclock
