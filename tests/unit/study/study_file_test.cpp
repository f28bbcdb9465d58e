#include "rillclock/study/study_file.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

const std::string smallest = R"([terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
book = "nlcd"
[rain]
two_year_24_hour = "3.6 in"
)";

Study read(const std::string& text) {
    return read_study(text, "studies/town.toml");
}

TEST_CASE("the smallest study is elevation, cover, book and rain") {
    const Study study = parse_study(smallest, "town.toml");
    CHECK(study.terrain.elevation == "dem.tif");
    CHECK(study.surface.cover == "cover.tif");
    CHECK(study.surface.book == "nlcd");
    CHECK(study.rain.two_year_24_hour == inches(3.6));
    CHECK(study.timing.sheet_limit == feet(100));
    CHECK(study.timing.channel_from == hectares(5));
    CHECK(study.output.folder == "result");
}

TEST_CASE("every key sets what it names") {
    const Study study = read(R"(
title = "Lower town"
report_units = "si"
[terrain]
elevation = "dem.tif"
band = 2
elevation_unit = "us survey ft"
slope_window = "30 m"
vertical_step = "1 mm"
pond_depth = "1 ft"
pond_speed = "1 m/s"
[surface]
cover = "cover.tif"
band = 3
book = "town.csv"
fallback_class = 71
path_length = "grid"
[points]
file = "points.gpkg"
name = "label"
layer = "inlets"
move_within = "0 m"
[timing]
sheet = "nrcs"
sheet_limit = "30 m"
sheet_limit_rule = "stated"
shallow = "paved and unpaved"
slope_floor = { overland = 0.002, channel = 0 }
channel_from = "mapped only"
channel = { n = 0.05, width = "3 m * km2^0.4", depth = "0.5 m" }
ignore_tail = "0.5 %"
shortest_segment = "20 m"
[output]
folder = "answer"
rasters = "geotiff"
)");
    CHECK(study.title == "Lower town");
    CHECK(study.report_units == ReportUnits::si);
    CHECK(study.terrain.band == 2);
    CHECK(study.terrain.elevation_unit == us_survey_feet(1));
    CHECK(study.terrain.slope_window == metres(30));
    CHECK(study.terrain.vertical_step == millimetres(1));
    CHECK(study.terrain.pond_depth == feet(1));
    CHECK(study.terrain.pond_speed == metres_per_second(1));
    CHECK(study.surface.band == 3);
    CHECK(study.surface.book == "town.csv");
    CHECK(study.surface.fallback_class == 71);
    CHECK(study.points.file == "points.gpkg");
    CHECK(study.points.name == "label");
    CHECK(study.points.layer == "inlets");
    CHECK(study.points.move_within == metres(0));
    CHECK(study.timing.sheet_limit == metres(30));
    CHECK(study.timing.sheet_limit_rule == SheetLimitRule::stated);
    CHECK(study.timing.shallow == ShallowRule::paved_and_unpaved);
    CHECK(study.timing.slope_floor_overland == 0.002);
    CHECK(study.timing.slope_floor_channel == 0.0);
    CHECK_FALSE(study.timing.channel_from);
    CHECK(study.timing.channel.n == 0.05);
    CHECK(study.timing.channel.width->exponent == 0.4);
    CHECK(study.timing.channel.depth->coefficient == metres(0.5));
    CHECK(study.timing.ignore_tail == 0.005);
    CHECK(study.timing.shortest_segment == metres(20));
    CHECK(study.output.folder == "answer");
}

TEST_CASE("rain by duration is read from its keys") {
    const Study study = read(R"([rain]
file = "atlas14.csv"
return_periods = [2, 10, 2.5e1]
[timing]
sheet = "kinematic"
sheet_constant = 0.94
storm = "sheet part"
raster_return_period = 25
[peaks]
least_time = "10 min"
)");
    CHECK(study.rain.file == "atlas14.csv");
    CHECK(study.rain.return_periods == std::vector<double>{2, 10, 25});
    CHECK(study.timing.is_kinematic());
    CHECK(study.timing.sheet_constant == 0.94);
    CHECK(study.timing.storm == StormDuration::sheet_part);
    CHECK(study.timing.raster_return_period == 25);
    CHECK(study.peaks.least_time == minutes(10));
}

TEST_CASE("a formula of rain stands alone or once a return period") {
    const Study one = read("[rain]\nformula = \"i[in/h] = 40 T^0.2 / (t[min] + 10)^0.8\"\nformula_from = \"5 min\"\n");
    REQUIRE(one.rain.formulas.size() == 1);
    CHECK_FALSE(one.rain.formulas.front().formula.return_period);
    CHECK(one.rain.formula_from == minutes(5));
    const Study two =
        read("[rain.formula]\n10 = \"i[in/h] = 50 / (t[min] + 10)\"\n\"2.5\" = \"i[in/h] = 40 / (t[min] + 10)\"\n");
    REQUIRE(two.rain.formulas.size() == 2);
    CHECK(two.rain.formulas[0].formula.return_period == 10);
    CHECK(two.rain.formulas[1].formula.return_period == 2.5);
    CHECK(two.rain.formulas[1].subject == "rain.formula.2.5 (studies/town.toml, line 3, column 9)");
}

TEST_CASE("a wrong formula or its return period is refused with file, line and the right form") {
    CHECK_THROWS_WITH(read("[rain]\nformula = \"i = 5\"\n"),
                      Contains("rain.formula (studies/town.toml, line 2, column 11)"));
    CHECK_THROWS_WITH(read("[rain.formula]\nten = \"i[in/h] = 50 / (t[min] + 10)\"\n"),
                      Contains("rain.formula.ten (studies/town.toml, line 2"));
    CHECK_THROWS_WITH(read("[rain.formula]\n0 = \"i[in/h] = 50 / (t[min] + 10)\"\n"),
                      Contains("rain.formula.0 (studies/town.toml, line 2"));
    CHECK_THROWS_WITH(read("[rain.formula]\n10 = 3\n"),
                      Contains("rain.formula.10") && Contains("write a text in quotes"));
}

TEST_CASE("return periods are years from 1 on, rising") {
    for (const auto* list :
         {"[]", "[10, 2]", "[2, 2]", "[0.5]", "[nan]", "[inf]", "[\"2\"]", "[[2]]", "\"10\"", "0.5"}) {
        INFO(list);
        CHECK_THROWS_WITH(read(std::string("[rain]\nreturn_periods = ") + list + "\n"),
                          Contains("rain.return_periods (studies/town.toml, line 2") && Contains("[2, 10, 100]"));
    }
    CHECK(read("[rain]\nreturn_periods = 10\n").rain.return_periods == std::vector<double>{10});
}

TEST_CASE("the constant of the kinematic formula is one of the two that are printed") {
    CHECK_THROWS_WITH(read("[timing]\nsheet_constant = 0.935\n"),
                      Contains("line 2") && Contains("write 0.933 (HEC-22) or 0.94"));
}

TEST_CASE("points may be found by area, and ponded speed have no cap") {
    CHECK(read("[points]\nauto_area = \"2 %\"\n").points.auto_area == 0.02);
    CHECK(std::isinf(read("[terrain]\npond_speed = \"unlimited\"\n").terrain.pond_speed.si()));
}

TEST_CASE("dotted keys and inline tables say the same as sections") {
    CHECK(read("timing.channel.hydraulic_radius = \"0.4 m\"\n").timing.channel.hydraulic_radius == metres(0.4));
    CHECK(read("[timing.channel]\nhydraulic_radius = \"0.4 m\"\n").timing.channel.hydraulic_radius == metres(0.4));
}

TEST_CASE("an unknown key is refused with file, line, column and the nearest right key") {
    CHECK_THROWS_WITH(read("[terrain]\nelevation = \"d.tif\"\n  slope_widnow = \"20 m\"\n"),
                      "studies/town.toml, line 3, column 3: terrain.slope_widnow is not a key of a study; did you mean "
                      "terrain.slope_window?");
}

TEST_CASE("a right key in the wrong section is shown its place") {
    CHECK_THROWS_WITH(read("[timing]\nslope_window = \"20 m\"\n"), Contains("did you mean terrain.slope_window?"));
    CHECK_THROWS_WITH(read("elevation = \"d.tif\"\n"), Contains("did you mean terrain.elevation?"));
}

TEST_CASE("an unknown section is refused, empty or not") {
    CHECK_THROWS_WITH(read("[terain]\nelevation = \"d.tif\"\n"),
                      Contains("line 1") && Contains("did you mean terrain.elevation?"));
    CHECK_THROWS_WITH(read("[weather]\n"), Contains("weather is not a key of a study"));
    CHECK_THROWS_WITH(read("[[terrain]]\n"), Contains("terrain holds keys of its own"));
    CHECK_THROWS_WITH(read("terrain = 3\n"), Contains("terrain holds keys of its own"));
}

TEST_CASE("what this version does not compute is refused and not passed over") {
    for (const auto* text : {"[rain]\ntable = \"r.csv\""}) {
        INFO(text);
        CHECK_THROWS_WITH(read(text), Contains("not known to this version of rillclock") && Contains("line "));
    }
}

TEST_CASE("a word that is not among a key's words is refused with them") {
    CHECK_THROWS_WITH(read("report_units = \"uss\"\n"), Contains("write \"us\" or \"si\"; did you mean us?"));
    CHECK_THROWS_WITH(read("[terrain]\nelevation_unit = \"feet\"\n"),
                      Contains("write \"m\" or \"ft\" or \"us survey ft\""));
}

TEST_CASE("a wrong unit is refused with line, column and the right form") {
    CHECK_THROWS_WITH(read("[terrain]\nslope_window = \"20 s\"\n"),
                      Contains("terrain.slope_window (studies/town.toml, line 2, column 16) is \"20 s\"") &&
                          Contains("such as \"20 m\""));
    CHECK_THROWS_WITH(read("[terrain]\nslope_window = 20\n"),
                      Contains("is 20; write a text in quotes, such as \"20 m\""));
    CHECK_THROWS_WITH(read("[rain]\ntwo_year_24_hour = \"3.6\"\n"), Contains("has no unit") && Contains("\"3.6 in\""));
    CHECK_THROWS_WITH(read("[rain]\ntwo_year_24_hour = \"360 in\"\n"), Contains("lies between 0.5 in and 30 in"));
}

TEST_CASE("every length, area, speed and share refuses zero, negative numbers and what is no number") {
    for (const auto* form :
         {"terrain.slope_window = \"{} m\"", "terrain.vertical_step = \"{} m\"", "terrain.pond_depth = \"{} m\"",
          "terrain.pond_speed = \"{} m/s\"", "points.auto_area = \"{} %\"", "rain.two_year_24_hour = \"{} in\"",
          "timing.sheet_limit = \"{} ft\"", "timing.channel_from = \"{} ha\"", "timing.channel.width = \"{} m\"",
          "timing.channel.depth = \"{} m * km2^0.2\"", "timing.channel.hydraulic_radius = \"{} m\"",
          "timing.shortest_segment = \"{} m\"", "timing.channel.n = {}", "rain.formula_to = \"{} min\"",
          "rain.return_periods = [{}]", "rain.return_periods = {}", "timing.raster_return_period = {}",
          "timing.sheet_constant = {}"})
        for (const auto* number : {"0", "-1", "nan", "inf", "-inf"}) {
            std::string text = form;
            text.replace(text.find("{}"), 2, number);
            INFO(text);
            CHECK_THROWS_AS(read(text), Error);
        }
}

TEST_CASE("what may be zero refuses negative numbers and what is no number") {
    for (const auto* form :
         {"points.move_within = \"{} m\"", "timing.ignore_tail = \"{} %\"", "timing.slope_floor.overland = {}",
          "timing.slope_floor.channel = {}", "timing.channel.side_slope = {}", "surface.fallback_class = {}", "peaks.least_time = \"{} min\"",
          "rain.formula_from = \"{} min\""}) {
        const auto with = [&](const char* number) {
            return std::string(form).replace(std::string(form).find("{}"), 2, number);
        };
        CHECK_NOTHROW(read(with("0")));
        for (const auto* number : {"-1", "nan", "inf"}) CHECK_THROWS_AS(read(with(number)), Error);
    }
}

TEST_CASE("choices of how steps are timed are read") {
    const Study study = read(
        "[surface]\npath_length = \"unbiased\"\n[timing]\nsheet = \"kinematic\"\nsheet_rain = \"runoff\"\nshallow = \"chart\"\nvelocity_chart = "
        "\"chart.csv\"\nchannel = { region = \"Interior Plains\", flow = \"design storm\", side_slope = 1.5 }\n");
    CHECK(study.surface.unbiased_lengths);
    CHECK(study.timing.sheet_takes_runoff);
    CHECK(study.timing.shallow == ShallowRule::chart);
    CHECK(study.timing.velocity_chart == "chart.csv");
    CHECK(study.timing.channel.published_size()->width(square_kilometres(1)) == metres(2.56));
    CHECK(study.timing.channel.design_storm);
    CHECK(study.timing.channel.side_slope == 1.5);
}

TEST_CASE("a share of all or more is refused") {
    CHECK_THROWS_WITH(read("[timing]\nignore_tail = \"100 %\"\n"), Contains("under 100 %"));
}

TEST_CASE("a whole number is asked for where only that has a meaning") {
    CHECK_THROWS_WITH(read("[terrain]\nband = 0\n"), Contains("is 0; write a whole number, 1 or more"));
    CHECK_THROWS_WITH(read("[terrain]\nband = 1.5\n"), Contains("is 1.5; write a whole number"));
    CHECK_THROWS_WITH(read("[terrain]\nband = \"1\"\n"), Contains("is \"1\"; write a whole number"));
    CHECK_THROWS_WITH(read("[terrain]\nband = true\n"), Contains("is true; write a whole number"));
}

TEST_CASE("a list, a date or an empty text is no value of a key") {
    CHECK_THROWS_WITH(read("title = [1, 2]\n"), Contains("is a list; write a text in quotes"));
    CHECK_THROWS_WITH(read("title = 2020-01-01\n"), Contains("is a table or a date"));
    CHECK_THROWS_WITH(read("[terrain]\nelevation = \"\"\n"), Contains("is empty"));
}

TEST_CASE("a key given twice is refused with its line") {
    CHECK_THROWS_WITH(read("[terrain]\nband = 1\nband = 2\n"),
                      Contains("studies/town.toml, line 3") && Contains("each key once"));
}

TEST_CASE("text that is no TOML is refused with its line") {
    CHECK_THROWS_WITH(read("[terrain\nband = 1\n"),
                      Contains("studies/town.toml, line 1") && Contains("cannot be read as TOML"));
    CHECK_THROWS_WITH(read("title = \"\xff\"\n"), Contains("cannot be read as TOML"));
}

TEST_CASE("a soil group is one letter for the whole study, or a raster of them") {
    CHECK(read("surface.soil_group = \"C\"").surface.soil_group == SoilGroup::c);
    const Study study = read("surface.soil_group = \"soils.tif\"\nsurface.soil_band = 2\n"
                             "surface.fallback_soil_group = \"D\"\n[surface.soil_classes]\n1 = \"A\"\n13 = \"D\"");
    CHECK_FALSE(study.surface.soil_group);
    CHECK(study.surface.soil.file == "soils.tif");
    CHECK(study.surface.soil.band == 2);
    CHECK(study.surface.soil.fallback_group == SoilGroup::d);
    CHECK(study.surface.soil.classes == std::map<int, SoilGroup>{{1, SoilGroup::a}, {13, SoilGroup::d}});
}

TEST_CASE("what is said of a soil raster is refused with the right form, and where there is none") {
    const auto says = [](const std::string& text, const std::string& part) {
        CHECK_THROWS_WITH(parse_study(smallest + "[surface.soil_classes]\n" + text, "town.toml"), Contains(part));
    };
    says("x = \"A\"", "surface.soil_classes.x (town.toml, line 9, column 5) stands under x; name it by the whole number");
    says("1 = \"E\"", "write \"A\" or \"B\" or \"C\" or \"D\"");
    says("1 = \"A\"\n01 = \"B\"", "gives the value 1 a second time");
    says("1 = \"A\"", "add soil_group = \"soils.tif\"");
    CHECK_THROWS_WITH(read("surface.soil_classes = \"A\""), Contains("write a table, such as { 1 = \"A\""));
    CHECK_THROWS_WITH(read("surface.soil_group = \"b\""), Contains("or the name of a raster, such as \"soils.tif\""));
}

TEST_CASE("rain may be read from a block of its file and from the files of zones") {
    const Study study = read("[rain]\nfile = \"a.csv\"\nblock = \"upper bound\"\nzones = \"z.gpkg\"\nzone_field = \"station\"");
    CHECK(study.rain.block == Atlas14Block::upper_bound);
    CHECK(study.rain.zones.file == "z.gpkg");
    CHECK(study.rain.zones.field == "station");
    CHECK(read("[rain]\nzones = \"z.gpkg\"").rain.zones.field == "rain");
    CHECK(read("[rain]\nzones = \"z.gpkg\"").rain.is_by_duration());
    CHECK_THROWS_WITH(parse_study(smallest + "zone_field = \"a\"", "town.toml"), Contains("add zones = \"zones.gpkg\""));
    CHECK_THROWS_WITH(parse_study(smallest + "zones_layer = \"a\"", "town.toml"), Contains("add zones = \"zones.gpkg\""));
    CHECK_THROWS_WITH(parse_study(smallest + "block = \"estimate\"", "town.toml"), Contains("add file = \"atlas14.csv\""));
    CHECK_THROWS_WITH(read("rain.block = \"upper\""), Contains("write \"estimate\" or \"upper bound\" or \"lower bound\""));
}

TEST_CASE("what the lump methods need is a number, a word of the method's table, or a field of the points") {
    const Study study = read(R"(methods = { kerby_n = 0.4, izzard_c = "concrete", impervious = 0, county_k = "commercial", kirpich_factor = "paved overland", undeveloped_coefficient = "field CU" })");
    CHECK(study.methods[LumpInput::kerby_n].number == 0.4);
    CHECK(study.methods[LumpInput::izzard_c].number == 0.012);
    CHECK(study.methods[LumpInput::impervious].number == 0);
    CHECK(study.methods[LumpInput::county_k].number == 0.304);
    CHECK(study.methods[LumpInput::kirpich_factor].number == 0.4);
    CHECK(study.methods[LumpInput::undeveloped_coefficient].field == "CU");
    CHECK_FALSE(study.methods[LumpInput::undeveloped_coefficient].number);
    CHECK_THROWS_WITH(read("methods.kerby_n = 0"), Contains("from 0.001 to 1"));
    CHECK_THROWS_WITH(read("methods.impervious = 35"), Contains("from 0 to 1"));
    CHECK_THROWS_WITH(read("methods.county_k = \"comercial\""), Contains("did you mean commercial?"));
    CHECK_THROWS_WITH(parse_study(smallest + "[methods]\nkerby_n = \"field N\"", "town.toml"),
                      Contains("takes methods.kerby_n from a field of the points' file but gives no file"));
}

}  // namespace
}  // namespace rillclock
