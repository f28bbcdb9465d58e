#include "rillclock/study/point_methods.hpp"

#include <algorithm>
#include <functional>
#include <string>

namespace rillclock {
namespace {

/// An average over the classes of a catchment, by area; or the first class that has no value.
struct Average {
    std::optional<double> value = {};
    const CoverClass* lacking = nullptr;
};

using ValueOfClass = std::function<std::optional<double>(const CoverClass&)>;
using CountsClass = std::function<bool(const CoverClass&)>;

Average average_by_area(const Outlet& outlet, const CoverBook& book, const ValueOfClass& value,
                        const CountsClass& counts) {
    const std::vector<FixedArea>& areas = outlet.ground.area_by_class();
    double sum = 0.0;
    double whole = 0.0;
    for (std::size_t place = 0; place < areas.size(); ++place) {
        const CoverClass& cover = book.classes()[place];
        if (areas[place] == 0 || !counts(cover)) continue;
        const std::optional<double> of_class = value(cover);
        if (!of_class) return {.lacking = &cover};
        sum += from_fixed_area(areas[place]) * *of_class;
        whole += from_fixed_area(areas[place]);
    }
    if (!(whole > 0)) return {};
    return {.value = sum / whole};
}

bool any_class(const CoverClass&) {
    return true;
}
bool not_water(const CoverClass& cover) {
    return !cover.is_open_water();
}

std::string lacking_text(const Average& average, const std::string& column) {
    return average.lacking == nullptr ? "" : "the cover book has no " + column + " for " + average.lacking->name;
}

void measure_cover(const Outlet& outlet, const MethodGround& ground, CatchmentMeasures& measures) {
    measures.overland_n =
        average_by_area(
            outlet, ground.book, [](const CoverClass& c) { return std::optional(c.n_typical); }, not_water)
            .value;
    const Average runoff = average_by_area(
        outlet, ground.book, [](const CoverClass& c) { return c.runoff_coefficient; }, any_class);
    measures.runoff_coefficient = runoff.value;
    measures.no_runoff_coefficient = lacking_text(runoff, "c");
    if (!ground.soil_group) {
        measures.no_curve_number = "the study states no soil_group";
        return;
    }
    const SoilGroup group = *ground.soil_group;
    const Average curve = average_by_area(
        outlet, ground.book, [group](const CoverClass& c) { return c.curve_number(group); }, any_class);
    measures.curve_number = curve.value;
    measures.no_curve_number = lacking_text(curve, std::string("cn_") + "abcd"[static_cast<std::size_t>(group)]);
}

/// The part of the longest path before its first channel or open water.
void measure_overland(const PointPath& longest, CatchmentMeasures& measures) {
    double length_m = 0.0;
    double fall_m = 0.0;
    for (const Segment& segment : longest.segments) {
        if (segment.regime != Regime::sheet && segment.regime != Regime::shallow) break;
        length_m += segment.whole_length_m();
        fall_m += segment.fall_m;
    }
    if (!(length_m > 0)) return;
    measures.overland_length = metres(length_m);
    measures.overland_slope = fall_m / length_m;
}

std::optional<MethodSpread> spread_of(const std::vector<MethodTime>& times) {
    std::vector<Duration> applicable;
    for (const MethodTime& time : times) {
        if (time.answer.is_applicable()) applicable.push_back(*time.answer.time);
    }
    if (applicable.empty()) return std::nullopt;
    std::sort(applicable.begin(), applicable.end());
    const std::size_t count = applicable.size();
    return MethodSpread{.methods = count,
                        .lowest = applicable.front(),
                        .median = (applicable[(count - 1) / 2] + applicable[count / 2]) / 2.0,
                        .highest = applicable.back()};
}

}  // namespace

CatchmentMeasures measures_of(const Outlet& outlet, const MethodGround& ground) {
    const PathSummary& longest = outlet.longest.summary;
    CatchmentMeasures measures;
    measures.area = square_metres(from_fixed_area(outlet.area));
    measures.longest_path = metres(from_fixed(longest.length));
    measures.fall = metres(longest.fall_m);
    measures.equal_area_slope = longest.equal_area_slope();
    measures.land_slope = outlet.ground.land_slope();
    measures.mean_height = metres(outlet.ground.mean_elevation_m() - outlet.elevation_m);
    measure_cover(outlet, ground, measures);
    measure_overland(outlet.longest, measures);
    return measures;
}

PointMethods point_methods(const Outlet& outlet, const MethodGround& ground, const IntensityOfDuration& rain) {
    PointMethods made{.measures = measures_of(outlet, ground), .times = {}, .spread = {}};
    for (const LumpMethod& method : lump_methods()) {
        MethodTime time{.method = &method, .answer = method.time(made.measures, rain)};
        if (time.answer.time && outlet.time_of_concentration_s() > 0) {
            time.ratio = in_seconds(*time.answer.time) / outlet.time_of_concentration_s();
        }
        made.times.push_back(std::move(time));
    }
    made.spread = spread_of(made.times);
    return made;
}

}  // namespace rillclock
