#include "rillclock/study/scenario.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"
#include "rillclock/study/study_file.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

const std::string base = R"(title = "Town"
[terrain]
elevation = "dem.tif"
[surface]
cover = "cover.tif"
band = 2
book = "nlcd"
[points]
file = "p.gpkg"
[methods]
kerby_n = "field kerby"
[timing]
channel = { width = "2 m", depth = "0.5 m" }
)";

Study under(const std::string& rain, const std::string& scenario) {
    const Study study = parse_study(base + rain + "[scenario.after]\n" + scenario, "folder/town.toml");
    REQUIRE(study.scenarios.size() == 1);
    return scenario_study(study, study.scenarios.front());
}

const std::string by_formula = "[rain]\ntwo_year_24_hour = \"3 in\"\nformula_to = \"24 h\"\nformula = \"i[in/h] = 60 / (t[min] + 12)^0.85\"\n";

TEST_CASE("a scenario has the study's values but those that it states") {
    const Study after = under(by_formula, "timing.sheet_limit = \"50 ft\"\nsurface.book = \"worldcover\"\n");
    CHECK(after.scenario == "after");
    CHECK(after.title == "Town (scenario after)");
    CHECK(after.file == "folder/town.toml");
    CHECK(after.output.folder == "result/scenario-after");
    CHECK(after.scenarios.empty());
    CHECK(after.timing.sheet_limit == feet(50));
    CHECK(after.surface.book == "worldcover");
    CHECK(after.surface.cover == "cover.tif");
    CHECK(after.surface.band == 2);
    CHECK(after.rain.formulas.size() == 1);
}

TEST_CASE("scenarios leave the study itself as it is, and come in the order of the file by name") {
    const Study study = parse_study(base + by_formula + "[scenario.a]\nsurface.book = \"worldcover\"\n[scenario.b]\ntiming.sheet_limit = \"50 ft\"\n", "t.toml");
    REQUIRE(study.scenarios.size() == 2);
    CHECK(study.scenarios[0].name == "a");
    CHECK(study.scenarios[1].changes.front().key == "timing.sheet_limit");
    CHECK(study.surface.book == "nlcd");
    CHECK(study.timing.sheet_limit == feet(100));
    CHECK(study.scenario.empty());
}

TEST_CASE("what says the same in another way gives way to what a scenario states") {
    CHECK(under(by_formula, "rain.file = \"r.csv\"\n").rain.formulas.empty());
    CHECK_FALSE(under(by_formula, "rain.file = \"r.csv\"\n").rain.formula_to);
    CHECK(under(by_formula, "rain.formula = \"i[in/h] = 70 / (t[min] + 12)^0.85\"\n").rain.formulas.size() == 1);
    const Study by_file = under("[rain]\nfile = \"a.csv\"\nblock = \"upper bound\"\n", "rain.formula = { 10 = \"i[in/h] = 70 / (t[min] + 12)^0.85\" }\n");
    CHECK_FALSE(by_file.rain.file);
    CHECK_FALSE(by_file.rain.block);
    CHECK_FALSE(under(by_formula, "surface.cover = \"plan.tif\"\n").surface.band);
    CHECK_FALSE(under(by_formula, "timing.channel.hydraulic_radius = \"0.4 m\"\n").timing.channel.width);
    CHECK_FALSE(under(by_formula, "methods.kerby_n = 0.4\n").methods[LumpInput::kerby_n].field);
}

TEST_CASE("a letter takes the place of a raster of soil groups, and a raster of a letter") {
    const auto soil = [](const std::string& study, const std::string& scenario) {
        const Study whole = parse_study("[terrain]\nelevation = \"d.tif\"\n[surface]\ncover = \"c.tif\"\nbook = \"nlcd\"\n" + study +
                                            "[rain]\ntwo_year_24_hour = \"3 in\"\n[scenario.after]\n" + scenario, "t.toml");
        return scenario_study(whole, whole.scenarios.front()).surface;
    };
    const SurfaceStudy letter = soil("soil_group = \"s.tif\"\nfallback_soil_group = \"D\"\n", "surface.soil_group = \"B\"\n");
    CHECK(letter.soil_group == SoilGroup::b);
    CHECK_FALSE(letter.soil.file);
    const SurfaceStudy raster = soil("soil_group = \"B\"\n", "surface.soil_group = \"s.tif\"\n");
    CHECK_FALSE(raster.soil_group);
    CHECK(raster.soil.file == "s.tif");
}

TEST_CASE("keys of the terrain, the points, the units and the output belong to the study alone") {
    for (const StudyKey& key : study_keys()) {
        const bool own = key.key.starts_with("surface.") || key.key.starts_with("rain.") || key.key.starts_with("timing.") ||
                         key.key.starts_with("peaks.") || key.key.starts_with("methods.") || key.key == "title" || key.key == "points.pipes";
        INFO(key.key);
        CHECK(may_differ(key.key) == own);
    }
    CHECK_THROWS_WITH(under(by_formula, "terrain.vertical_step = \"1 m\"\n"),
                      Contains("scenario.after.terrain.vertical_step (folder/town.toml, line ") && Contains("cannot differ"));
}

TEST_CASE("contradictions of a scenario are told with its name") {
    CHECK_THROWS_WITH(under(by_formula, "timing.channel.flow = \"design storm\"\ntiming.channel.hydraulic_radius = \"1 m\"\n"),
                      Contains("folder/town.toml, scenario.after, asks for channel flow by the design storm"));
}

TEST_CASE("a scenario's name is of letters, digits, - and _") {
    CHECK_NOTHROW(check_scenario_name("plan-2_B", "t.toml"));
    const std::string long_name(61, 'a');
    for (const std::string& bad : {std::string(), std::string("a b"), std::string(".."), std::string("a/b"), std::string("ä"), long_name})
        CHECK_THROWS_WITH(check_scenario_name(bad, "t.toml, line 1, column 1"), Contains("t.toml, line 1, column 1: ") && Contains("letters, digits"));
}

}  // namespace
}  // namespace rillclock
