#include "rillclock/study/study.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/manning.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

Study complete() {
    Study study;
    study.terrain.elevation = "dem.tif";
    study.surface = {.cover = "cover.tif", .book = "nlcd"};
    study.rain.two_year_24_hour = inches(3.6);
    return study;
}

TEST_CASE("a study of the command line alone is complete with four things") {
    CHECK_NOTHROW(check_study(complete()));
}

TEST_CASE("what a study lacks is asked for with its right form") {
    Study study = complete();
    study.rain.two_year_24_hour.reset();
    CHECK_THROWS_WITH(check_study(study), Contains("gives no rain") && Contains("two_year_24_hour = \"3.6 in\""));
    study.surface.book.clear();
    CHECK_THROWS_WITH(check_study(study), Contains("gives no cover book") && Contains("book = \"nlcd\""));
    study.surface.cover.clear();
    CHECK_THROWS_WITH(check_study(study), Contains("gives no land cover") && Contains("cover = \"cover.tif\""));
    study.terrain.elevation.clear();
    study.file = "town.toml";
    CHECK_THROWS_WITH(check_study(study),
                      Contains("town.toml gives no elevation") && Contains("elevation = \"dem.tif\""));
}

TEST_CASE("statements that exclude one another are refused") {
    const PowerLaw law{.coefficient = metres(1), .unit = hectares(1), .exponent = 0.3};
    Study study = complete();
    study.timing.channel = {.hydraulic_radius = metres(0.4), .width = law};
    CHECK_THROWS_WITH(check_study(study), Contains("both a hydraulic_radius and a width"));
    study.timing.channel = {.width = law};
    CHECK_THROWS_WITH(check_study(study), Contains("only one of width and depth"));
    study = complete();
    study.points = {.file = "p.gpkg", .auto_area = 0.01};
    CHECK_THROWS_WITH(check_study(study), Contains("both a file and an auto_area"));
    study.points = {.name = "label"};
    CHECK_THROWS_WITH(check_study(study), Contains("gives no file of them"));
}

TEST_CASE("statements about rain that act on nothing or contradict one another are refused") {
    Study study = complete();
    study.timing.sheet = "kinematic";
    CHECK_THROWS_WITH(check_study(study),
                      Contains("kinematic wave, which needs rain by duration") && Contains("--rain-file"));
    study.rain.file = "rain.csv";
    CHECK_NOTHROW(check_study(study));
    study.rain.two_year_24_hour.reset();
    CHECK_NOTHROW(check_study(study));
    study.rain.formulas.resize(1);
    CHECK_THROWS_WITH(check_study(study), Contains("both as a file and as a formula"));
    study = complete();
    study.timing.storm = StormDuration::sheet_part;
    CHECK_THROWS_WITH(check_study(study), Contains("act on kinematic sheet flow only"));
    study = complete();
    study.rain.return_periods = {2};
    CHECK_THROWS_WITH(check_study(study), Contains("act on rain by duration only"));
    study = complete();
    study.peaks.least_time = minutes(10);
    CHECK_THROWS_WITH(check_study(study), Contains("act on rain by duration only"));
    study = complete();
    study.rain.formula_to = hours(1);
    CHECK_THROWS_WITH(check_study(study), Contains("between which durations"));
}

TEST_CASE("defaults follow the cell where it is large") {
    const ResolvedStudy fine = resolve(complete(), {.cell_side = metres(1)});
    CHECK(fine.slope_window == metres(20));
    CHECK(fine.vertical_step == metres(0.2));
    CHECK(fine.pond_depth == metres(0.3));
    CHECK(fine.move_within == metres(5));
    CHECK(fine.shortest_segment == metres(50));
    CHECK(fine.auto_area == 0.01);
    const ResolvedStudy coarse = resolve(complete(), {.cell_side = metres(30)});
    CHECK(coarse.slope_window == metres(90));
    CHECK(coarse.vertical_step == metres(3));
    CHECK(coarse.pond_depth == metres(3));
    CHECK(coarse.move_within == metres(30));
    CHECK(coarse.shortest_segment == metres(150));
}

TEST_CASE("whole-number elevations are trusted with one of their unit at best") {
    const ResolvedStudy resolved = resolve(complete(), {.cell_side = metres(1), .vertical_quantum = metres(1)});
    CHECK(resolved.vertical_step == metres(1));
    CHECK(resolved.pond_depth == metres(1));
}

TEST_CASE("what is stated wins over the default, and the pond depth follows the stated step") {
    Study study = complete();
    study.terrain.slope_window = metres(2);
    study.terrain.vertical_step = metres(2);
    study.points.move_within = metres(0);
    const ResolvedStudy resolved = resolve(study, {.cell_side = metres(30)});
    CHECK(resolved.slope_window == metres(2));
    CHECK(resolved.vertical_step == metres(2));
    CHECK(resolved.pond_depth == metres(2));
    CHECK(resolved.move_within == metres(0));
}

TEST_CASE("a channel is as large as its area says unless its radius is stated") {
    Study study = complete();
    const ResolvedStudy by_area = resolve(study, {.cell_side = metres(1)});
    CHECK(channel_radius(by_area, square_kilometres(1)) == hydraulic_radius_of(metres(2.70), metres(0.30)));
    study.timing.channel.hydraulic_radius = feet(0.957);
    const ResolvedStudy stated = resolve(study, {.cell_side = metres(1)});
    CHECK(channel_radius(stated, square_kilometres(1)) == feet(0.957));
    CHECK(channel_radius(stated, square_kilometres(100)) == feet(0.957));
}

TEST_CASE("a channel's published size is that of its region, of the whole country where none is named, and none where its own is stated") {
    ChannelStudy channel;
    CHECK(channel.published_size()->region == "United States");
    channel.region = "Atlantic Plain";
    CHECK(channel.published_size()->region == "Atlantic Plain");
    channel.hydraulic_radius = metres(1);
    CHECK(channel.published_size() == nullptr);
    channel.hydraulic_radius.reset();
    channel.width = PowerLaw{.coefficient = metres(1), .unit = square_metres(1), .exponent = 0.5};
    CHECK(channel.published_size() == nullptr);
}

TEST_CASE("choices of how steps are timed that exclude one another are told") {
    const auto told = [](auto change, const std::string& says) {
        Study study = complete();
        change(study.timing);
        CHECK_THROWS_WITH(check_study(study), Contains(says));
    };
    told([](TimingStudy& t) { t.sheet_takes_runoff = true; }, "act on kinematic sheet flow only");
    told([](TimingStudy& t) { t.shallow = ShallowRule::chart; }, "names none");
    told([](TimingStudy& t) { t.velocity_chart = "c.csv"; }, "acts on shallow = \"chart\" only");
    told([](TimingStudy& t) { t.channel.side_slope = 1.0; }, "acts on flow = \"design storm\" only");
    told([](TimingStudy& t) { t.channel.design_storm = true; }, "needs rain by duration");
    told([](TimingStudy& t) { t.channel.region = "Interior Plains"; t.channel.hydraulic_radius = metres(1); }, "both a region and a size");
    told([](TimingStudy& t) { t.channel.design_storm = true; t.channel.hydraulic_radius = metres(1); }, "states one hydraulic_radius");
}

TEST_CASE("paths are relative to the study file, and other names stay as they are") {
    Study study;
    study.file = "studies/town.toml";
    CHECK(located(study, "dem.tif") == "studies/dem.tif");
    CHECK(located(study, "../dem.tif") == "studies/../dem.tif");
    for (const auto* name : {"/data/dem.tif", "/vsizip/a.zip/dem.tif", "NETCDF:a.nc:z", "https://example.org/dem.tif"})
        CHECK(located(study, name) == name);
    study.file = "town.toml";
    CHECK(located(study, "dem.tif") == "dem.tif");
    study.file.clear();
    CHECK(located(study, "dem.tif") == "dem.tif");
}

}  // namespace
}  // namespace rillclock
