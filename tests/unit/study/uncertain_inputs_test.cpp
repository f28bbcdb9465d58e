#include "rillclock/study/uncertain_inputs.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <memory>

#include "rillclock/core/error.hpp"
#include "rillclock/study/study_file.hpp"

namespace rillclock {
namespace {

constexpr double unlimited = std::numeric_limits<double>::infinity();

UncertainInput input_of(UncertainKind kind, double low, double typical, double high) {
    return {.kind = kind, .name = "input", .low = low, .typical = typical, .high = high};
}

CoverBook book_of(double low, double typical, double high) {
    return {"town.csv", {{.code = 1, .name = "Grass", .n_low = low, .n_typical = typical, .n_high = high, .shallow_k = metres_per_second(2)},
                         {.code = 2, .name = "Pond", .water_depth = metres(1)}}};
}

Study asking(const std::string& block) { return read_study("[uncertainty]\n" + block, "study.toml"); }

const UncertainInput& named(const std::vector<UncertainInput>& inputs, const std::string& name) {
    for (const UncertainInput& input : inputs) {
        if (input.name == name) return input;
    }
    throw bug("no input " + name);
}

TEST_CASE("draws lie in a triangle whose peak is the typical value") {
    const UncertainInput n = input_of(UncertainKind::roughness, 0.1, 0.2, 0.5);
    // A share of (peak − low) / (high − low) = 1/4 lies below the peak; left of it the share grows with the square.
    CHECK(n.at_share(0.0) == 0.1);
    CHECK(n.at_share(0.25) == Approx(0.2).epsilon(1e-12));
    CHECK(n.at_share(0.25 / 4) == Approx(0.15).epsilon(1e-12));
    CHECK(n.at_share(1.0) == 0.5);
    CHECK(n.at_share(1.0 - 0.75 / 4) == Approx(0.35).epsilon(1e-12));
}

TEST_CASE("ponded speed is drawn by the time a metre takes, so that unlimited is an end like another") {
    const UncertainInput pond = input_of(UncertainKind::pond_speed, 1.0, 2.0, unlimited);
    CHECK(pond.at_share(0.0) == 1.0);
    // Half of the range of 1/v, 1 to 0, lies on either side of 1/2.
    CHECK(pond.at_share(0.5) == Approx(2.0).epsilon(1e-12));
    CHECK(std::isinf(pond.at_share(1.0)));
}

TEST_CASE("rough, long sheet flow is the slow end; fast water, rain and floors the fast one") {
    CHECK(input_of(UncertainKind::roughness, 1, 2, 3).fast() == 1);
    CHECK(input_of(UncertainKind::sheet_limit, 1, 2, 3).slow() == 3);
    CHECK(input_of(UncertainKind::channel_n, 1, 2, 3).slow() == 3);
    CHECK(input_of(UncertainKind::rain, 1, 2, 3).fast() == 3);
    CHECK(input_of(UncertainKind::overland_floor, 1, 2, 3).fast() == 3);
    CHECK(input_of(UncertainKind::pond_speed, 1, 2, unlimited).fast() == unlimited);
}

TEST_CASE("inputs are the classes of the data that have a range, and the rules") {
    const auto met = uncertain_inputs(asking(""), book_of(0.1, 0.2, 0.4), {true, true});
    CHECK(met.size() == 9);  // the pond has no roughness
    CHECK(named(met, "n of Grass").high == 0.4);
    CHECK(named(met, "n of Grass").source == "cover book town.csv");
    CHECK(uncertain_inputs(asking(""), book_of(0.1, 0.2, 0.4), {false, true}).size() == 8);
    CHECK(uncertain_inputs(asking(""), book_of(0.2, 0.2, 0.2), {true, true}).size() == 8);
}

TEST_CASE("a range that the study states counts before ours") {
    const auto inputs = uncertain_inputs(asking("channel_n = \"0.03 to 0.07\""), book_of(0.1, 0.2, 0.4), {true, true});
    CHECK(named(inputs, "n of channels").low == 0.03);
    CHECK(named(inputs, "n of channels").source == "study");
    CHECK(named(inputs, "ponded speed").high == unlimited);
    CHECK(named(inputs, "ponded speed").source == "rillclock's own judgement");
}

TEST_CASE("each input keeps its draws when another is added") {
    const std::vector<UncertainInput> one{input_of(UncertainKind::rain, 0.8, 1.0, 1.2)};
    std::vector<UncertainInput> two{input_of(UncertainKind::roughness, 0.1, 0.2, 0.4), one.front()};
    two.front().name = "another";
    const auto alone = drawn_values(one, 20, 7);
    const auto beside = drawn_values(two, 20, 7);
    for (std::size_t i = 0; i < alone.size(); ++i) CHECK(beside[i][1] == alone[i][0]);
    CHECK(drawn_values(one, 20, 8)[0][0] != alone[0][0]);
}

TEST_CASE("the mean of many draws is that of the triangle") {
    const std::vector<UncertainInput> inputs{input_of(UncertainKind::rain, 0.7, 1.0, 1.6)};
    double sum = 0.0;
    for (const auto& draw : drawn_values(inputs, 10000, 1)) sum += draw[0];
    // (0.7 + 1 + 1.6) / 3; standard deviation 0.187, of the mean 0.0019; four of those.
    CHECK(sum / 10000 == Approx(1.1).margin(0.0075));
}

TEST_CASE("a value changes what it stands for and nothing else") {
    const TravelSetting base{.rules = {}, .classes = {{.sheet_n = 0.2, .shallow_k = metres_per_second(2)}}};
    TravelSetting setting = base;
    put_value(input_of(UncertainKind::channel_radius, 0.7, 1.0, 1.4), 1.3, base, setting);
    const Area area = hectares(50);
    CHECK(setting.rules.channel.radius_at(area) / base.rules.channel.radius_at(area) == Approx(1.3).epsilon(1e-12));
    CHECK(setting.classes.front().sheet_n == 0.2);
    put_value(input_of(UncertainKind::rain, 0.7, 1.0, 1.6), 1.44, base, setting);
    // NRCS: P2^-0.5.
    CHECK(setting.rules.sheet.storm_factor == Approx(base.rules.sheet.storm_factor / 1.2).epsilon(1e-12));
    CHECK(setting.intensity_factor == 1.44);
}

TEST_CASE("a factor on the speed of shallow flow acts on a chart as it does on k") {
    const VelocityLine line{.surface = "grass", .points = {{0.01, metres_per_second(0.2)}, {0.1, metres_per_second(0.8)}}};
    const TravelSetting base{.rules = {}, .classes = {{.sheet_n = 0.2, .shallow_k = metres_per_second(2),
                                                       .shallow_line = std::make_shared<const VelocityLine>(line)}}};
    TravelSetting setting = base;
    put_value(input_of(UncertainKind::shallow_speed, 0.75, 1.0, 1.33), 0.75, base, setting);
    CHECK(setting.classes.front().shallow_k == metres_per_second(1.5));
    for (const double slope : {0.002, 0.01, 0.03, 0.5}) {
        CHECK(setting.classes.front().shallow_line->at(slope) / line.at(slope) == Approx(0.75).epsilon(1e-12));
    }
    CHECK(base.classes.front().shallow_line->points.front().velocity == metres_per_second(0.2));
}

TEST_CASE("what the draws cannot follow is refused with the reason and the way out") {
    Study tail = asking("");
    tail.timing.ignore_tail = 0.01;
    CHECK_THROWS_WITH(check_uncertainty(tail), Catch::Contains("when which share of the area has arrived") && Catch::Contains("Remove ignore_tail"));
    Study storm = asking("");
    storm.timing.channel.design_storm = true;
    CHECK_THROWS_WITH(check_uncertainty(storm), Catch::Contains("all water that arrives above it") && Catch::Contains("run the study once with each"));
    Study chart = asking("");
    chart.timing.shallow = ShallowRule::chart;
    CHECK_NOTHROW(check_uncertainty(chart));
}

}  // namespace
}  // namespace rillclock
