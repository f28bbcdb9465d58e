#include "rillclock/study/point_methods.hpp"

#include <algorithm>

#include "rillclock/surface/composite.hpp"

namespace rillclock {
namespace {

void measure_cover(const Outlet& outlet, const MethodGround& ground, CatchmentMeasures& measures) {
    const std::vector<LandShare> land = outlet.ground.land().shares();
    measures.overland_n = composite_overland_n(land, ground.book).value;
    const Composite runoff = composite_runoff_coefficient(land, ground.book);
    measures.runoff_coefficient = runoff.value;
    measures.no_runoff_coefficient = runoff.lacking;
    if (!ground.has_soil) {
        measures.no_curve_number = "the study states no soil_group";
        return;
    }
    const Composite curve = composite_curve_number(land, ground.book);
    measures.curve_number = curve.value;
    measures.no_curve_number = curve.lacking;
}

std::string reason_of(LumpInput input, const std::string& lacking) {
    const std::string key = "methods." + std::string(name_of(input));
    return lacking.empty() ? "state " + key : lacking + "; state it there or as " + key;
}

/// What a lump method asks for: as stated for the point, else from the cover book.
struct LumpTarget {
    LumpInput input;
    std::optional<double> CatchmentMeasures::*value;
    std::string CatchmentMeasures::*reason;
};

void settle(const LumpTarget& target, const MethodGround& ground, const Composite& book, CatchmentMeasures& measures) {
    measures.*target.value = ground.stated[target.input] ? ground.stated[target.input] : book.value;
    if (!(measures.*target.value)) measures.*target.reason = reason_of(target.input, book.lacking);
}

void measure_lump_inputs(const Outlet& outlet, const MethodGround& ground, CatchmentMeasures& measures) {
    const std::vector<LandShare> land = outlet.ground.land().shares();
    using M = CatchmentMeasures;
    settle({LumpInput::kerby_n, &M::kerby_retardance, &M::no_kerby_retardance}, ground,
           prevailing(land, ground.book, &CoverClass::kerby_n, "kerby_n"), measures);
    settle({LumpInput::izzard_c, &M::izzard_retardance, &M::no_izzard_retardance}, ground,
           prevailing(land, ground.book, &CoverClass::izzard_c, "izzard_c"), measures);
    settle({LumpInput::county_k, &M::county_factor, &M::no_county_factor}, ground,
           prevailing(land, ground.book, &CoverClass::county_k, "county_k"), measures);
    settle({LumpInput::impervious, &M::impervious, &M::no_impervious}, ground,
           composite_impervious(land, ground.book), measures);
    settle({LumpInput::undeveloped_coefficient, &M::undeveloped_coefficient, &M::no_undeveloped_coefficient}, ground,
           {}, measures);
    measures.kirpich_adjustment = ground.stated[LumpInput::kirpich_factor].value_or(1.0);
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
    measure_lump_inputs(outlet, ground, measures);
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
