#include "rillclock/study/point_methods.hpp"

#include <catch2/catch.hpp>

#include <algorithm>

namespace rillclock {
namespace {

using Catch::Contains;

CoverBook book() {
    CoverClass grass{.code = 1, .name = "Grass", .n_typical = 0.2};
    grass.curve_numbers = {39, 61, 74, std::nullopt};
    grass.runoff_coefficient = 0.2;
    CoverClass street{.code = 2, .name = "Street", .n_typical = 0.01};
    street.curve_numbers = {98, 98, 98, 98};
    street.runoff_coefficient = 0.9;
    CoverClass pond{.code = 3, .name = "Pond", .water_depth = metres(1)};
    return {"test", {grass, street, pond}};
}

Segment segment(Regime regime, double length_m, double fall_m) {
    Segment made;
    made.regime = regime;
    made.length_m = length_m;
    made.fall_m = fall_m;
    return made;
}

/// A catchment of 20 000 m², three quarters grass and a quarter street, 300 m long with a fall of 15 m.
Outlet outlet(CellSoil soil = CellSoil::unknown) {
    Outlet made;
    made.area = to_fixed_area(20000);
    for (int i = 0; i < 3; ++i) made.ground.add(0, soil, to_fixed_area(5000), 0.06, 120);
    made.ground.add(1, soil, to_fixed_area(5000), 0.02, 110);
    made.elevation_m = 100;
    made.longest.summary.length = to_fixed(300);
    made.longest.summary.fall_m = 15;
    made.longest.summary.profile_area_m2 = 0.5 * 300 * 300 * 0.04;
    made.longest.segments = {segment(Regime::sheet, 30, 3), segment(Regime::shallow, 70, 5),
                             segment(Regime::channel, 200, 7)};
    made.governing.seconds = 600;
    return made;
}

const MethodTime& by(const PointMethods& methods, std::string_view id) {
    return *std::find_if(methods.times.begin(), methods.times.end(),
                         [&](const MethodTime& t) { return t.method->about.id == id; });
}

TEST_CASE("a catchment is measured for the lump formulas, each slope by its own definition") {
    const CoverBook known = book();
    const CatchmentMeasures m = measures_of(outlet(CellSoil::b), {.book = known, .has_soil = true});
    CHECK(in_square_metres(*m.area) == 20000);
    CHECK(in_metres(*m.longest_path) == 300);
    CHECK(*m.path_slope() == Approx(0.05));
    CHECK(*m.equal_area_slope == Approx(0.04));
    CHECK(*m.land_slope == Approx(0.05).epsilon(1e-5));
    CHECK(in_metres(*m.mean_height) == Approx(17.5));
    CHECK(*m.curve_number == Approx(0.75 * 61 + 0.25 * 98));
    CHECK(*m.runoff_coefficient == Approx(0.375));
    CHECK(*m.overland_n == Approx(0.1525));
    CHECK(in_metres(*m.overland_length) == 100);
    CHECK(*m.overland_slope == Approx(0.08));
}

TEST_CASE("every lump method has its row, with its time or what it lacks") {
    const CoverBook known = book();
    const PointMethods methods = point_methods(outlet(CellSoil::b), {.book = known, .has_soil = true}, {});
    REQUIRE(methods.times.size() == lump_methods().size());
    CHECK(by(methods, "lump-nrcs-lag").answer.is_applicable());
    CHECK(*by(methods, "lump-nrcs-lag").ratio == Approx(in_seconds(*by(methods, "lump-nrcs-lag").answer.time) / 600));
    CHECK(in_minutes(*by(methods, "lump-kirpich").answer.time) == Approx(in_minutes(kirpich(metres(300), 0.05))));
    CHECK_THAT(by(methods, "lump-kerby").answer.why_not, Contains("Kerby's retardance is not known"));
    CHECK_THAT(by(methods, "lump-papadakis-kazan").answer.why_not, Contains("no rain by duration"));
    CHECK_FALSE(by(methods, "lump-kerby").ratio);
}

TEST_CASE("a method says which number the study or the book does not give") {
    const CoverBook known = book();
    const auto why = [&](bool has_soil, CellSoil soil) {
        const MethodGround ground{.book = known, .has_soil = has_soil};
        return by(point_methods(outlet(soil), ground, {}), "lump-nrcs-lag").answer.why_not;
    };
    CHECK_THAT(why(false, CellSoil::unknown), Contains("the curve number is not known: the study states no soil_group"));
    CHECK_THAT(why(true, CellSoil::d), Contains("the curve number is not known: the cover book has no cn_d for Grass"));
    CHECK_THAT(why(true, CellSoil::unknown), Contains("4 cells of the catchment have no soil group"));
    Outlet with_pond = outlet();
    with_pond.ground.add(2, CellSoil::unknown, to_fixed_area(100), 0, 100);
    CHECK_THAT(by(point_methods(with_pond, {.book = known}, {}), "lump-faa").answer.why_not,
               Contains("the cover book has no c for Pond"));
    CHECK(*measures_of(with_pond, {.book = known}).overland_n == Approx(0.1525));
}

TEST_CASE("the spread is that of the applicable methods alone") {
    const CoverBook known = book();
    const PointMethods methods = point_methods(outlet(CellSoil::b), {.book = known, .has_soil = true}, {});
    std::vector<double> times;
    for (const MethodTime& time : methods.times)
        if (time.answer.is_applicable()) times.push_back(in_seconds(*time.answer.time));
    std::sort(times.begin(), times.end());
    REQUIRE(methods.spread);
    REQUIRE(times.size() >= 3);
    CHECK(methods.spread->methods == times.size());
    CHECK(in_seconds(methods.spread->lowest) == times.front());
    CHECK(in_seconds(methods.spread->highest) == times.back());
    CHECK(in_seconds(methods.spread->median) == Approx((times[(times.size() - 1) / 2] + times[times.size() / 2]) / 2));
}

TEST_CASE("methods that depend on the rain show their rounds") {
    const CoverBook known = book();
    const IntensityOfDuration rain = [](Duration) { return std::optional(inches_per_hour(3)); };
    const MethodTime time = by(point_methods(outlet(), {.book = known}, rain), "lump-papadakis-kazan");
    CHECK(time.answer.is_applicable());
    CHECK(time.answer.iterations.size() == 2);
}

TEST_CASE("what the study states for a point counts before the cover book, and a lack says where to state it") {
    CoverClass grass{.code = 1, .name = "Grass", .n_typical = 0.2, .kerby_n = 0.4, .impervious = 0.0};
    CoverClass street{.code = 2, .name = "Street", .n_typical = 0.01, .kerby_n = 0.02, .impervious = 1.0};
    const CoverBook town{"test", {grass, street}};
    const CatchmentMeasures from_book = measures_of(outlet(), {.book = town});
    CHECK(from_book.kerby_retardance == 0.4);
    CHECK(*from_book.impervious == Approx(0.25));
    CHECK(from_book.kirpich_adjustment == 1.0);
    PointLumpInputs stated;
    stated[LumpInput::kerby_n] = 0.8;
    stated[LumpInput::county_k] = 0.39;
    stated[LumpInput::kirpich_factor] = 0.4;
    const MethodGround ground{.book = town, .stated = stated};
    const PointMethods methods = point_methods(outlet(), ground, {});
    CHECK(methods.measures.kerby_retardance == 0.8);
    CHECK(in_minutes(*by(methods, "lump-kirpich").answer.time) == Approx(0.4 * in_minutes(kirpich(metres(300), 0.05))));
    CHECK(in_minutes(*by(methods, "lump-county-initial").answer.time) ==
          Approx(in_minutes(county_initial(metres(300), metres(15), 0.39))));
    CHECK_THAT(by(methods, "lump-izzard").answer.why_not,
               Contains("Izzard's retardance is not known: the cover book has no izzard_c for Grass; state it there or as "
                        "methods.izzard_c"));
    CHECK_THAT(by(methods, "lump-los-angeles").answer.why_not, Contains("state methods.undeveloped_coefficient"));
}

}  // namespace
}  // namespace rillclock
