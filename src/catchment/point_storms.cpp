#include "rillclock/catchment/point_storms.hpp"

#include <utility>

#include "heads_at.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

/// Looks for one point's storms.
class PointSolver {
public:
    PointSolver(const Arrivals& catchment, const StepTime& at_point, const OwnStorms& storms)
        : catchment_(catchment), at_point_(at_point), storms_(storms) {}

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

private:
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
    return join_down(
        std::move(subareas), tree, storms.reference_factor, [&](const Arrivals& catchment, PointNumber number) {
            const PointSolver solver(catchment, times_of_points[number - 1], storms);
            std::vector<PointStorm> found;
            for (const IntensityOfDuration& rain : storms.rain) found.push_back(solver.storm(rain));
            const double factor = found[storms.raster].storm_factor;
            PointHeads heads = heads_at(catchment, catchment.storm_bins.under(factor), factor, storms.ignore_tail);
            heads.storms = std::move(found);
            return heads;
        });
}

void add_storms(std::vector<PointHeads>& heads, std::span<const StepTime> times_of_points,
                std::span<const IntensityOfDuration> rain) {
    for (std::size_t i = 0; i < heads.size(); ++i) {
        PointStorm storm{.storm_factor = heads[i].storm_factor,
                         .governing = heads[i].governing,
                         .time = heads[i].governing.time - times_of_points[i]};
        const Duration time = storm.time.under(storm.storm_factor);
        for (const IntensityOfDuration& read : rain) {
            const std::optional<Intensity> intensity = read(time);
            storm.iteration.end = intensity ? StormEnd::settled : StormEnd::beyond_the_rain;
            storm.iteration.rows.clear();
            if (intensity) storm.iteration.rows.push_back({time, *intensity, time});
            heads[i].storms.push_back(storm);
        }
    }
}

}  // namespace rillclock
