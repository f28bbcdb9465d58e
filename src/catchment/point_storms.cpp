#include "rillclock/catchment/point_storms.hpp"

#include <utility>

#include "heads_at.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

/// Reads the intensity of a storm whose time no intensity changes: it lasts as long as the whole path.
void read_at_its_time(const IntensityOfDuration& rain, PointStorm& storm) {
    const Duration time = storm.time.under(storm.storm_factor);
    const std::optional<Intensity> intensity = rain(time);
    storm.iteration.end = intensity ? StormEnd::settled : StormEnd::beyond_the_rain;
    storm.iteration.rows.clear();
    if (intensity) storm.iteration.rows.push_back({time, *intensity, time});
}

/// The zone whose rain a catchment has; of a share of 0 where none has a claim.
RainZone zone_of(const Arrivals& catchment, const OwnStorms& storms) {
    if (storms.zones.empty()) return {};
    return prevailing_zone(catchment.ground.area_by_zone(), storms.is_everywhere)
        .value_or(RainZone{.number = 0, .share = 0.0});
}

/// Looks for one point's storms.
class PointSolver {
public:
    PointSolver(const Arrivals& catchment, const StepTime& at_point, const OwnStorms& storms)
        : catchment_(catchment), at_point_(at_point), storms_(storms) {}

    [[nodiscard]] std::vector<PointStorm> storms_of(const ZoneStorms& zone) const {
        std::vector<PointStorm> found;
        for (const IntensityOfDuration& rain : zone.rain) {
            found.push_back(zone.storm_factor ? storm_of_factor(rain, *zone.storm_factor) : storm(rain));
        }
        return found;
    }

private:
    [[nodiscard]] PointStorm storm_of_factor(const IntensityOfDuration& rain, double factor) const {
        PointStorm found{.storm_factor = factor, .governing = governing(factor)};
        found.time = found.governing.time - at_point_;
        read_at_its_time(rain, found);
        return found;
    }

    [[nodiscard]] PointStorm storm(const IntensityOfDuration& rain) const {
        PointStorm found;
        found.iteration =
            solve_storm_time([this](Intensity i) { return duration(kinematic_storm_factor(i)); }, rain, storms_.search);
        if (found.iteration.end != StormEnd::settled) return found;
        found.storm_factor = kinematic_storm_factor(found.iteration.intensity());
        found.governing = governing(found.storm_factor);
        found.time = found.governing.time - at_point_;
        return found;
    }

    [[nodiscard]] Head governing(double storm_factor) const {
        if (storms_.ignore_tail > 0) return catchment_.storm_bins.under(storm_factor).last_without(storms_.ignore_tail);
        return catchment_.front.last_to_arrive(storm_factor);
    }

    [[nodiscard]] Duration duration(double storm_factor) const {
        StepTime time = governing(storm_factor).time - at_point_;
        if (storms_.duration == StormDuration::sheet_part) time.fixed = 0;
        return time.under(storm_factor);
    }

    const Arrivals& catchment_;
    StepTime at_point_;
    const OwnStorms& storms_;
};

}  // namespace

std::vector<PointHeads> heads_of(std::vector<Arrivals> subareas, const PointTree& tree,
                                 std::span<const StepTime> times_of_points, const OwnStorms& storms) {
    const ZoneStorms outside{.rain = storms.rain, .storm_factor = storms.storm_factor};
    return join_down(
        std::move(subareas), tree, storms.reference_factor, [&](const Arrivals& catchment, PointNumber number) {
            const PointSolver solver(catchment, times_of_points[number - 1], storms);
            const RainZone zone = zone_of(catchment, storms);
            std::vector<PointStorm> found = solver.storms_of(zone.number == 0 ? outside : storms.zones[zone.number - 1]);
            const double factor = found[storms.raster].storm_factor;
            PointHeads heads = heads_at(catchment, catchment.storm_bins.under(factor), factor, storms.ignore_tail);
            heads.storms = std::move(found);
            heads.rain_zone = zone;
            return heads;
        });
}

void add_storms(std::vector<PointHeads>& heads, std::span<const StepTime> times_of_points,
                std::span<const IntensityOfDuration> rain) {
    for (std::size_t i = 0; i < heads.size(); ++i) {
        PointStorm storm{.storm_factor = heads[i].storm_factor,
                         .governing = heads[i].governing,
                         .time = heads[i].governing.time - times_of_points[i]};
        for (const IntensityOfDuration& read : rain) {
            read_at_its_time(read, storm);
            heads[i].storms.push_back(storm);
        }
    }
}

}  // namespace rillclock
