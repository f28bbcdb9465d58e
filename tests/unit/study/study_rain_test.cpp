#include "rillclock/study/study_rain.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

using Catch::Contains;

constexpr const char* table =
    "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,4.8,6.9\n60,1.5,2.3\n1440,0.125,0.2\n";

Study with_file() {
    Study study{.file = "town.toml"};
    study.rain.file = "rain.csv";
    return study;
}

TEST_CASE("the 2-year 24-hour depth comes from the rain file where the study states none") {
    const StudyRain rain = study_rain(with_file(), table);
    CHECK(in_inches(*rain.two_year_24_hour) == Approx(3.0).epsilon(1e-12));
    CHECK(rain.notices.empty());
}

TEST_CASE("a stated 2-year 24-hour depth counts, and is told where it differs from the file's") {
    Study study = with_file();
    study.rain.two_year_24_hour = inches(3.6);
    const StudyRain rain = study_rain(study, table);
    CHECK(rain.two_year_24_hour == inches(3.6));
    REQUIRE(rain.notices.size() == 1);
    CHECK(rain.notices.front().code == "rain-depths-differ");
    CHECK_THAT(rain.notices.front().text, Contains("3.6 in") && Contains("3 in") && Contains("rain.csv"));
    study.rain.two_year_24_hour = inches(3.02);
    CHECK(study_rain(study, table).notices.empty());
}

TEST_CASE("the raster's return period is 10 where it is listed, else the first, unless one is stated") {
    Study study = with_file();
    CHECK(study_rain(study, table).raster_storm().return_period == 10);
    study.rain.return_periods = {2, 10};
    CHECK(study_rain(study, table).raster == 1);
    study.rain.return_periods = {2, 5};
    CHECK(study_rain(study, table).raster == 0);
    study.timing.raster_return_period = 5;
    CHECK(study_rain(study, table).raster == 1);
    study.timing.raster_return_period = 10;
    CHECK_THROWS_WITH(study_rain(study, table), Contains("raster_return_period = 10") && Contains("2, 5"));
}

TEST_CASE("no intensity is read below the least time") {
    Study study = with_file();
    study.timing.sheet = "kinematic";
    const auto at_one_minute = [&] {
        return in_inches_per_hour(study_rain(study, table).raster_storm().rain.at(minutes(1)));
    };
    CHECK(at_one_minute() == Approx(6.9).epsilon(1e-12));
    study.peaks.least_time = minutes(60);
    CHECK(at_one_minute() == Approx(2.3).epsilon(1e-12));
}

TEST_CASE("a return period outside the file, and a depth that is nowhere, are refused by name") {
    Study study = with_file();
    study.rain.return_periods = {25};
    CHECK_THROWS_WITH(study_rain(study, table), Contains("rain.csv") && Contains("25 years"));
    study = with_file();
    const std::string short_table = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,4.8,6.9\n60,1.5,2.3\n";
    CHECK_THROWS_WITH(study_rain(study, short_table), Contains("rain.csv") && Contains("two_year_24_hour"));
    study.timing.sheet = "kinematic";
    CHECK_FALSE(study_rain(study, short_table).two_year_24_hour);
}

TEST_CASE("a fault in the rain file is told with its line") {
    CHECK_THROWS_WITH(study_rain(with_file(), "duration_min,intensity_2yr_in_h\n5,4.8\n60,-1\n"),
                      Contains("rain.csv, line 3"));
}

TEST_CASE("formulas are read with the durations they hold for") {
    Study study;
    study.rain.formulas = {
        {.formula = {.formula = intensity_formula_from_text("i[in/h] = 40 T^0.2 / (t[min] + 10)^0.8", "f")},
         .subject = "rain.formula"}};
    study.rain.formula_to = hours(24);
    const StudyRain rain = study_rain(study, {});
    CHECK(in_inches_per_hour(rain.raster_storm().rain.at(minutes(20))) ==
          Approx(40 * 1.584893 / 15.194870).epsilon(1e-6));
    CHECK_FALSE(rain.raster_storm().rain.within(hours(25)));
    CHECK(rain.two_year_24_hour);
}

constexpr const char* wetter =
    "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,6.0,9.0\n60,2.0,3.0\n1440,0.25,0.4\n";

Study with_zones() {
    Study study{.file = "town.toml"};
    study.rain.zones.file = "zones.gpkg";
    return study;
}

TEST_CASE("each zone has its own depth and storms, and the first stands for land outside where nothing else does") {
    const std::vector<ZoneText> zones{{"hill.csv", wetter}, {"valley.csv", table}};
    const StudyRain rain = study_rain(with_zones(), "", zones);
    CHECK_FALSE(rain.is_everywhere);
    CHECK(in_inches(*rain.depth_of(1)) == Approx(6));
    CHECK(in_inches(*rain.depth_of(2)) == Approx(3));
    CHECK(in_inches(*rain.depth_of(0)) == Approx(6));
    CHECK(in_inches_per_hour(rain.storms_of(1)[0].rain.at(hours(1))) == Approx(3));
    CHECK(in_inches_per_hour(rain.storms_of(2)[0].rain.at(hours(1))) == Approx(2.3));
    CHECK(rain.zone_name(2) == "valley.csv");
}

TEST_CASE("a rain file beside zones is for what lies outside of them") {
    Study study = with_zones();
    study.rain.file = "rain.csv";
    const std::vector<ZoneText> zones{{"hill.csv", wetter}};
    const StudyRain rain = study_rain(study, table, zones);
    CHECK(rain.is_everywhere);
    CHECK(in_inches(*rain.depth_of(0)) == Approx(3));
    CHECK(in_inches(*rain.depth_of(1)) == Approx(6));
    CHECK(rain.zone_name(0) == "rain.csv");
}

TEST_CASE("a zone without a 2-year 24-hour depth is named where NRCS sheet flow needs it") {
    const std::vector<ZoneText> zones{{"hill.csv", wetter},
                                      {"short.csv", "duration_min,intensity_10yr_in_h\n5,6\n60,2\n"}};
    CHECK_THROWS_WITH(study_rain(with_zones(), "", zones), Contains("short.csv") && Contains("two_year_24_hour"));
}

}  // namespace
}  // namespace rillclock
