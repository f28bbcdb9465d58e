#include "rillclock/hydraulics/lump_methods.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <set>
#include <string>

namespace rillclock {
namespace {

using Catch::Contains;

std::optional<Intensity> rain(Duration duration) {
    return inches_per_hour(60 / std::pow(in_minutes(duration) + 10, 0.8));
}

LumpTime time_of(const char* id, const CatchmentMeasures& catchment, const IntensityOfDuration& storm = rain) {
    const LumpMethod* method = find_lump_method(id);
    REQUIRE(method != nullptr);
    return method->time(catchment, storm);
}

/// A small steep rural catchment, all of which is known.
CatchmentMeasures small_catchment() {
    return {.area = acres(8),
            .longest_path = feet(480),
            .fall = feet(24),
            .land_slope = 0.06,
            .equal_area_slope = 0.04,
            .mean_height = feet(12),
            .curve_number = 75,
            .runoff_coefficient = 0.4,
            .overland_n = 0.1,
            .overland_length = feet(200),
            .overland_slope = 0.05,
            .kerby_retardance = 0.4,
            .izzard_retardance = 0.046,
            .impervious = 0.3,
            .undeveloped_coefficient = 0.2,
            .county_factor = 0.706};
}

/// Four square miles with a gentle channel.
CatchmentMeasures valley() {
    CatchmentMeasures catchment = small_catchment();
    catchment.area = square_miles(4);
    catchment.longest_path = miles(3);
    catchment.fall = feet(3 * 5280 * 0.01);
    return catchment;
}

TEST_CASE("every lump method says all that a reviewer asks") {
    for (const LumpMethod& method : lump_methods()) {
        INFO(method.about.id);
        CHECK_FALSE(method.about.name.empty());
        CHECK_FALSE(method.about.range.empty());
        CHECK_FALSE(method.about.source.empty());
        CHECK(method.time != nullptr);
        for (const MethodInput& input : method.about.inputs) {
            INFO(input.symbol);
            CHECK(method.about.formula.find(input.symbol) != std::string_view::npos);
            CHECK_FALSE(input.meaning.empty());
            CHECK_FALSE(input.unit.empty());
        }
    }
}

TEST_CASE("lump methods are found by an id that no other method has") {
    std::set<std::string_view> ids;
    for (const Method& method : methods()) ids.insert(method.id);
    for (const LumpMethod& method : lump_methods()) {
        CHECK(ids.insert(method.about.id).second);
        CHECK(find_lump_method(method.about.id) == &method);
    }
    CHECK(find_lump_method("lump-by-feel") == nullptr);
}

TEST_CASE("inside their ranges the methods are applicable and give the formula's time") {
    const CatchmentMeasures small = small_catchment();
    const auto gives = [&](const char* id, Duration expected) {
        const LumpTime answer = time_of(id, small);
        INFO(id << ": " << answer.why_not);
        CHECK(answer.is_applicable());
        REQUIRE(answer.time);
        CHECK(answer.time->si() == Approx(expected.si()).epsilon(1e-12));
    };
    gives("lump-nrcs-lag", nrcs_lag_concentration(feet(480), 75, 0.06));
    gives("lump-kirpich", kirpich(feet(480), 0.05));
    gives("lump-california", california_culvert_practice(feet(480), feet(24)));
    gives("lump-kerby", kerby(feet(480), 0.4, 0.05));
    gives("lump-faa", faa(feet(480), 0.4, 0.05));
    gives("lump-bransby-williams", bransby_williams(feet(480), acres(8), 0.05, BransbyWilliams::us));
    gives("lump-bransby-williams-equal-area", bransby_williams(feet(480), acres(8), 0.04, BransbyWilliams::australian));
    gives("lump-county-initial", county_initial(feet(480), feet(24), 0.706));
}

TEST_CASE("Kerby and Kirpich add up in a valley") {
    const KerbyKirpich measures{.main_channel = miles(3),
                                .channel_slope = 0.01,
                                .overland = feet(200),
                                .overland_slope = 0.05,
                                .retardance = 0.4};
    const LumpTime answer = time_of("lump-kerby-kirpich", valley());
    CHECK(answer.is_applicable());
    CHECK(answer.time->si() == Approx(kerby_kirpich(measures).si()).epsilon(1e-12));
    CHECK(kerby_kirpich(measures) == kerby(feet(200), 0.4, 0.05) + kirpich(miles(3) - feet(200), 0.01));
}

TEST_CASE("low slopes are raised by the adjusted method alone") {
    CatchmentMeasures flat = valley();
    flat.fall = feet(3 * 5280 * 0.001);
    const LumpTime plain = time_of("lump-kerby-kirpich", flat);
    const LumpTime adjusted = time_of("lump-kerby-kirpich-low-slope", flat);
    CHECK_THAT(plain.why_not, Contains("slope of the main channel is 0.001, below 0.002"));
    CHECK(adjusted.is_applicable());
    CHECK(*adjusted.time < *plain.time);
    CHECK_THAT(time_of("lump-kerby-kirpich-low-slope", valley()).why_not, Contains("above 0.003"));
}

TEST_CASE("the adjusted method raises the slope of the overland part too") {
    CatchmentMeasures flat = valley();
    flat.fall = feet(3 * 5280 * 0.001);
    flat.overland_slope = 0.0015;
    const double expected = (kerby(feet(200), 0.4, 0.002) + kirpich(miles(3) - feet(200), 0.0015)).si();
    CHECK(time_of("lump-kerby-kirpich-low-slope", flat).time->si() == Approx(expected).epsilon(1e-12));
}

TEST_CASE("Giandotti is for great basins") {
    CatchmentMeasures basin;
    basin.area = square_kilometres(400);
    basin.longest_path = kilometres(40);
    basin.mean_height = metres(625);
    const LumpTime answer = time_of("lump-giandotti", basin);
    CHECK(answer.is_applicable());
    CHECK(in_hours(*answer.time) == Approx((4 * 20 + 1.5 * 40) / (0.8 * 25)).epsilon(1e-12));
    CHECK_THAT(time_of("lump-giandotti", small_catchment()).why_not, Contains("below 170"));
}

TEST_CASE("outside its range a method still gives its time and says why it is not applicable") {
    const auto refuses = [](const char* id, const CatchmentMeasures& catchment, const char* because) {
        const LumpTime answer = time_of(id, catchment);
        INFO(id << ": " << answer.why_not);
        CHECK(answer.time);
        CHECK_FALSE(answer.is_applicable());
        CHECK_THAT(answer.why_not, Contains(because));
    };
    CatchmentMeasures wet = small_catchment();
    wet.curve_number = 96;
    refuses("lump-nrcs-lag", wet, "curve number is 96, above 95");
    wet.curve_number = 49;
    refuses("lump-nrcs-lag", wet, "curve number is 49, below 50");
    refuses("lump-kirpich", valley(), "the area in acres is 2560, above 112");
    refuses("lump-kerby", valley(), "above 1200");
    refuses("lump-faa", valley(), "above 500");
    refuses("lump-kerby-kirpich", small_catchment(), "below 0.25");
    refuses("lump-county-initial", valley(), "above 10; the longest path in feet is");
    refuses("lump-los-angeles", valley(), "above 40");
}

TEST_CASE("a measure that is missing is named and no time is given") {
    for (const LumpMethod& method : lump_methods()) {
        const LumpTime answer = method.time({}, rain);
        INFO(method.about.id);
        CHECK_FALSE(answer.time);
        CHECK_FALSE(answer.is_applicable());
        CHECK_THAT(answer.why_not, Contains("is not known"));
    }
}

TEST_CASE("every measure has its range, and outside it no method that needs it gives a time") {
    struct Spoiled {
        const char* id;
        void (*spoil)(CatchmentMeasures&, double);
        const char* what;
    };
    const Spoiled all[] = {
        {"lump-nrcs-lag", [](CatchmentMeasures& c, double v) { c.curve_number = v; }, "the curve number"},
        {"lump-nrcs-lag", [](CatchmentMeasures& c, double v) { c.land_slope = v; }, "the slope of the land"},
        {"lump-nrcs-lag", [](CatchmentMeasures& c, double v) { c.longest_path = feet(v); }, "the longest path"},
        {"lump-kirpich", [](CatchmentMeasures& c, double v) { c.fall = feet(v); }, "the slope of the longest path"},
        {"lump-kirpich", [](CatchmentMeasures& c, double v) { c.area = acres(v); }, "the area"},
        {"lump-kirpich", [](CatchmentMeasures& c, double v) { c.kirpich_adjustment = v; }, "adjustment"},
        {"lump-california", [](CatchmentMeasures& c, double v) { c.fall = feet(v); }, "the fall"},
        {"lump-kerby", [](CatchmentMeasures& c, double v) { c.kerby_retardance = v; }, "Kerby's retardance"},
        {"lump-kerby-kirpich", [](CatchmentMeasures& c, double v) { c.overland_length = feet(v); }, "overland length"},
        {"lump-kerby-kirpich", [](CatchmentMeasures& c, double v) { c.overland_slope = v; }, "overland slope"},
        {"lump-izzard", [](CatchmentMeasures& c, double v) { c.izzard_retardance = v; }, "Izzard's retardance"},
        {"lump-papadakis-kazan", [](CatchmentMeasures& c, double v) { c.overland_n = v; }, "the overland n"},
        {"lump-bransby-williams-equal-area", [](CatchmentMeasures& c, double v) { c.equal_area_slope = v; },
         "the equal-area slope"},
        {"lump-giandotti", [](CatchmentMeasures& c, double v) { c.mean_height = metres(v); }, "the mean height"},
        {"lump-county-initial", [](CatchmentMeasures& c, double v) { c.county_factor = v; }, "the county's K"},
    };
    for (const Spoiled& each : all)
        for (const double bad : {0.0, -1.0, std::nan(""), std::numeric_limits<double>::infinity()}) {
            CatchmentMeasures catchment = small_catchment();
            each.spoil(catchment, bad);
            const LumpTime answer = time_of(each.id, catchment);
            INFO(each.id << " " << bad << ": " << answer.why_not);
            CHECK_FALSE(answer.time);
            CHECK_THAT(answer.why_not, Contains(each.what));
        }
}

TEST_CASE("shares lie from 0 to 1") {
    for (const double bad : {-0.1, 1.1, std::nan("")}) {
        CatchmentMeasures catchment = small_catchment();
        catchment.runoff_coefficient = bad;
        catchment.impervious = bad;
        CHECK_THAT(time_of("lump-faa", catchment).why_not, Contains("the runoff coefficient is") && Contains("0 to 1"));
        CHECK_THAT(time_of("lump-los-angeles", catchment).why_not, Contains("the impervious share is"));
    }
    CatchmentMeasures bare = small_catchment();
    bare.impervious = 0;
    bare.undeveloped_coefficient = 0;
    CHECK_FALSE(time_of("lump-los-angeles", bare).time);
}

TEST_CASE("a curve number above 100 is no curve number") {
    CatchmentMeasures catchment = small_catchment();
    catchment.curve_number = 101;
    CHECK_FALSE(time_of("lump-nrcs-lag", catchment).time);
}

TEST_CASE("an overland part as long as the path leaves no channel") {
    CatchmentMeasures catchment = valley();
    catchment.overland_length = catchment.longest_path;
    CHECK_FALSE(time_of("lump-kerby-kirpich", catchment).is_applicable());
    CHECK_THAT(time_of("lump-kerby-kirpich", catchment).why_not, Contains("no shorter than the path"));
}

TEST_CASE("methods with rain give the time of a storm as long as it, and their rounds") {
    for (const char* id : {"lump-izzard", "lump-papadakis-kazan", "lump-los-angeles"}) {
        const LumpTime answer = time_of(id, small_catchment());
        INFO(id << ": " << answer.why_not);
        REQUIRE(answer.time);
        REQUIRE_FALSE(answer.iterations.empty());
        const StormIteration& last = answer.iterations.back();
        CHECK(last.computed == *answer.time);
        CHECK(in_seconds(last.assumed) == Approx(in_seconds(last.computed)).margin(0.1));
        CHECK(last.intensity == *rain(last.assumed));
    }
}

TEST_CASE("each method with rain is its formula at the intensity of its last round") {
    const CatchmentMeasures small = small_catchment();
    const auto last_intensity = [&](const char* id) { return time_of(id, small).iterations.back().intensity; };
    CHECK(*time_of("lump-izzard", small).time ==
          izzard(feet(480), small.path_slope().value(), 0.046, last_intensity("lump-izzard")));
    CHECK(*time_of("lump-papadakis-kazan", small).time ==
          papadakis_kazan(feet(480), small.path_slope().value(), 0.1, last_intensity("lump-papadakis-kazan")));
    CHECK(*time_of("lump-los-angeles", small).time == los_angeles(feet(480), small.path_slope().value(),
                                                                  los_angeles_coefficient(0.3, 0.2),
                                                                  last_intensity("lump-los-angeles")));
}

TEST_CASE("Izzard is applicable up to intensity times length of 500") {
    CatchmentMeasures plot = small_catchment();
    CHECK_THAT(time_of("lump-izzard", plot).why_not, Contains("above 500"));
    plot.longest_path = feet(60);
    plot.fall = feet(1);
    CHECK(time_of("lump-izzard", plot).is_applicable());
}

TEST_CASE("Los Angeles County's regression is for times from 5 to 30 minutes") {
    CHECK(time_of("lump-los-angeles", small_catchment()).is_applicable());
    CatchmentMeasures plot = small_catchment();
    plot.longest_path = feet(30);
    plot.fall = feet(3);
    CHECK_THAT(time_of("lump-los-angeles", plot).why_not, Contains("time in minutes") && Contains("below 5"));
}

TEST_CASE("without rain, and with rain that is too short, methods with rain say so") {
    const IntensityOfDuration two_minutes = [](Duration d) { return d <= minutes(5) ? rain(d) : std::nullopt; };
    for (const char* id : {"lump-izzard", "lump-papadakis-kazan", "lump-los-angeles"}) {
        CHECK_THAT(time_of(id, small_catchment(), {}).why_not, Contains("no rain by duration"));
        CHECK_FALSE(time_of(id, small_catchment(), {}).time);
        const LumpTime answer = time_of(id, small_catchment(), two_minutes);
        CHECK_FALSE(answer.time);
        CHECK_THAT(answer.why_not, Contains("longer than the rain's last duration"));
        CHECK(answer.iterations.size() == 1);
    }
}

}  // namespace
}  // namespace rillclock
