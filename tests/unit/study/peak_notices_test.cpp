#include "rillclock/study/peaks.hpp"

#include <catch2/catch.hpp>

#include <algorithm>

namespace rillclock {
namespace {

using Catch::Contains;

CoverBook pasture_book(double c) {
    CoverClass pasture{.code = 1, .name = "Common", .n_typical = 0.2};
    pasture.land_use = "pasture";
    pasture.runoff_coefficient = c;
    return {"test", {pasture}};
}

/// Pasture with a coefficient of its own, drained by one point.
struct Town {
    explicit Town(double c) : Town(pasture_book(c)) {}
    explicit Town(CoverBook stated) : book(std::move(stated)) {
        study.rain.file = "rain.csv";
        study.rain.two_year_24_hour = inches(3.6);
    }
    /// Of a catchment whose last water arrives after a time.
    [[nodiscard]] Notices notices(Duration last, const std::string& rain_table) {
        rain = study_rain(study, rain_table);
        const FixedTime time = to_fixed(in_seconds(last));
        Outlet outlet;
        outlet.number = 1;
        outlet.point.name = "Weir";
        outlet.own_front.add({.cell = 1, .time = {.fixed = time}});
        outlet.own_area = to_fixed_area(10'000);
        outlet.own_land.add({.cover = 0, .soil = CellSoil::unknown, .slope = slope}, outlet.own_area);
        PointStorm storm;
        storm.time = {.fixed = time};
        storm.iteration.rows.push_back({.assumed = last, .intensity = {}, .computed = last});
        outlet.storms.assign(rain.storms.size(), storm);
        const std::vector<Outlet> outlets{outlet};
        const StatedEdits nothing;
        const StudyNetwork network = study_network({.study = study, .rain = rain, .book = book, .outlets = outlets, .stated = nothing});
        const HistogramRules rules = histogram_rules(study, book, 1.0);
        const auto bin = static_cast<std::int32_t>(bin_of(time, rules.bin));
        return study_peaks({.study = study, .rain = rain, .book = book, .outlets = outlets, .network = network, .binned = rules},
                           {ArrivalHistogram({{.fixed_bin = bin, .kind = {}, .area = outlet.own_area}})}).notices;
    }

    SlopeBand slope = SlopeBand::to_2;
    Study study{.file = "town.toml"};
    CoverBook book;
    StudyRain rain;
};

constexpr const char* to_100_years = "duration_min,intensity_2yr_in_h,intensity_100yr_in_h\n5,4.8,9\n60,1.5,2.5\n";
constexpr const char* to_500_years = "duration_min,intensity_2yr_in_h,intensity_500yr_in_h\n5,4.8,12\n60,1.5,3.5\n";

const Notice* noticed(const Notices& notices, const std::string& code) {
    const auto found = std::find_if(notices.begin(), notices.end(), [&](const Notice& n) { return n.code == code; });
    return found == notices.end() ? nullptr : &*found;
}

TEST_CASE("a time below the least is told with the least, and one that is not below is not") {
    Town town(0.3);
    const Notices brief = town.notices(seconds(150), to_100_years);
    const Notice* told = noticed(brief, "time-below-least");
    REQUIRE(told != nullptr);
    CHECK(told->point == "Weir");
    CHECK(told->value == 2.5);
    CHECK(told->threshold == 5.0);
    CHECK(told->effect_s == 150);
    CHECK(noticed(town.notices(minutes(5), to_100_years), "time-below-least") == nullptr);
    town.study.peaks.least_time = minutes(2);
    CHECK(noticed(town.notices(seconds(150), to_100_years), "time-below-least") == nullptr);
}

TEST_CASE("a coefficient outside what is printed for its land use is told, with the end that it passes") {
    const double least = find_land_use("pasture")->least();
    const double greatest = find_land_use("pasture")->greatest();
    Town above(greatest + 0.01);
    const Notices of_above = above.notices(minutes(20), to_100_years);
    REQUIRE(noticed(of_above, "coefficient-outside-range") != nullptr);
    CHECK(noticed(of_above, "coefficient-outside-range")->threshold == greatest);
    CHECK_THAT(noticed(of_above, "coefficient-outside-range")->text, Contains("Common") && Contains("pasture"));
    Town below(least - 0.01);
    const Notices of_below = below.notices(minutes(20), to_100_years);
    REQUIRE(noticed(of_below, "coefficient-outside-range") != nullptr);
    CHECK(noticed(of_below, "coefficient-outside-range")->threshold == least);
    for (const double within : {least, greatest}) CHECK(noticed(Town(within).notices(minutes(20), to_100_years), "coefficient-outside-range") == nullptr);
}

CoverBook tight_clay_book(std::optional<double> c) {
    CoverClass wood{.code = 1, .name = "Grove", .n_typical = 0.4};
    wood.land_use = "schwab woodland on tight clay";
    wood.runoff_coefficient = c;
    return {"test", {wood}};
}

TEST_CASE("land steeper than its table is printed for is told with its area, unless its coefficient is stated") {
    Town town(tight_clay_book(std::nullopt));
    CHECK(noticed(town.notices(minutes(20), to_100_years), "steeper-than-printed") == nullptr);
    town.slope = SlopeBand::to_30;
    CHECK(noticed(town.notices(minutes(20), to_100_years), "steeper-than-printed") == nullptr);
    town.slope = SlopeBand::steeper;
    const Notices told = town.notices(minutes(20), to_100_years);
    REQUIRE(noticed(told, "steeper-than-printed") != nullptr);
    CHECK(noticed(told, "steeper-than-printed")->value == Approx(2.471).epsilon(0.001));  // one hectare
    CHECK_THAT(noticed(told, "steeper-than-printed")->text, Contains("Grove") && Contains("schwab woodland on tight clay") && Contains("10 to 30 %"));
    Town stated(tight_clay_book(0.7));
    stated.slope = SlopeBand::steeper;
    const Notices own = stated.notices(minutes(20), to_100_years);
    CHECK(noticed(own, "steeper-than-printed") == nullptr);
    REQUIRE(noticed(own, "coefficient-outside-range") != nullptr);
    CHECK(noticed(own, "coefficient-outside-range")->threshold == 0.60);
}

TEST_CASE("a return period beyond the printed frequency factors is told") {
    Town town(0.3);
    town.study.rain.return_periods = {100, 500};
    const Notices rare = town.notices(minutes(20), to_500_years);
    CHECK(std::count_if(rare.begin(), rare.end(), [](const Notice& n) { return n.code == "frequency-factor-not-printed"; }) == 1);
    REQUIRE(noticed(rare, "frequency-factor-not-printed") != nullptr);
    CHECK(noticed(rare, "frequency-factor-not-printed")->value == 500);
    town.study.rain.return_periods = {2, 100};
    CHECK(noticed(town.notices(minutes(20), to_500_years), "frequency-factor-not-printed") == nullptr);
}

}  // namespace
}  // namespace rillclock
