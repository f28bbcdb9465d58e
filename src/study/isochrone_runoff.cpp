#include "rillclock/study/isochrone_runoff.hpp"

#include <algorithm>
#include <map>
#include <utility>

namespace rillclock {
namespace {

using Whose = std::pair<IsochroneScope, PointNumber>;

class BandWork {
public:
    explicit BandWork(const BandRunoffInputs& in)
        : in_(in), conversion_(in.study.peaks.conversion.value_or(RationalConversion::exact)) {}

    [[nodiscard]] std::vector<std::optional<BandRunoff>> work(std::span<const IsochroneBand> bands) const {
        std::map<Whose, Area> running;
        std::map<Whose, bool> lacking;
        std::map<Whose, Duration> greatest;
        for (const IsochroneBand& band : bands) {
            const Whose whose{band.scope, band.point};
            greatest[whose] = std::max(greatest[whose], greatest_time(band));
            bool& lacks = lacking[whose];
            lacks = lacks || std::any_of(band.parts.begin(), band.parts.end(), [&](const IsochronePart& part) { return coefficient(part) == nullptr; });
        }
        std::vector<std::optional<BandRunoff>> made;
        for (const IsochroneBand& band : bands) {
            const Whose whose{band.scope, band.point};
            made.push_back(lacking[whose] ? std::nullopt : std::optional(of(band, greatest[whose], running[whose])));
        }
        return made;
    }

private:
    [[nodiscard]] const CompositeCoefficient* coefficient(const IsochronePart& part) const {
        const auto& coefficients = in_.peaks.subareas[part.subarea - 1].coefficients;
        return coefficients.empty() ? nullptr : &coefficients[in_.rain.raster];
    }

    [[nodiscard]] BandRunoff of(const IsochroneBand& band, Duration greatest, Area& running) const {
        BandRunoff made;
        for (const IsochronePart& part : band.parts) {
            made.runoff = made.runoff + coefficient(part)->value * square_metres(from_fixed_area(part.area));
        }
        running = running + made.runoff;
        made.running = running;
        made.time = std::min((band.number + 1) * in_.step, greatest);
        const std::size_t zone = in_.outlets[band.point - 1].rain_zone.number;
        made.intensity = in_.rain.storms_of(zone)[in_.rain.raster].rain.within(made.time);
        if (made.intensity) made.flow = rational_peak(running, *made.intensity, conversion_);
        return made;
    }

    /// Until when water arrives from the subareas within a band, under the storm of the last point on the way down.
    [[nodiscard]] Duration greatest_time(const IsochroneBand& band) const {
        const Outlet& outlet = in_.outlets[band.point - 1];
        if (band.scope == IsochroneScope::catchment && outlet.next == 0) return seconds(outlet.greatest_s);
        const double factor = last_below(outlet).storm_factor;
        double greatest_s = 0.0;
        for (const IsochronePart& part : band.parts) {
            for (const Head& head : in_.outlets[part.subarea - 1].own_front.heads()) {
                greatest_s = std::max(greatest_s, in_seconds((head.time - outlet.time_to_root).under(factor)));
            }
        }
        return seconds(greatest_s);
    }

    [[nodiscard]] const Outlet& last_below(const Outlet& outlet) const {
        const Outlet* at = &outlet;
        while (at->next != 0) at = &in_.outlets[at->next - 1];
        return *at;
    }

    const BandRunoffInputs& in_;
    RationalConversion conversion_;
};

}  // namespace

std::vector<std::optional<BandRunoff>> band_runoffs(std::span<const IsochroneBand> bands, const BandRunoffInputs& in) {
    if (!in.peaks.are_there()) return std::vector<std::optional<BandRunoff>>(bands.size());
    return BandWork(in).work(bands);
}

}  // namespace rillclock
