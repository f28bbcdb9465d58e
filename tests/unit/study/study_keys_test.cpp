#include "rillclock/study/study_keys.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"
#include "rillclock/study/study_file.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

TEST_CASE("the form that is shown for a key is one that can be read") {
    for (const StudyKey& key : study_keys()) {
        const std::string line = std::string(key.key) + " = " + std::string(key.form) + "\n";
        INFO(line);
        CHECK_NOTHROW(read_study(line, "town.toml"));
        CHECK_FALSE(key.help.empty());
        CHECK_FALSE(key.standard.empty());
    }
}

TEST_CASE("no key but the return periods takes a list") {
    for (const StudyKey& key : study_keys())
        if (key.key != "rain.return_periods")
        CHECK_THROWS_WITH(read_study(std::string(key.key) + " = [1]\n", "town.toml"), Contains(std::string(key.form)));
}

TEST_CASE("sections are what stands before the dots") {
    CHECK(is_study_section("terrain"));
    CHECK(is_study_section("timing.slope_floor"));
    CHECK_FALSE(is_study_section("terrain.band"));
    CHECK_FALSE(is_study_section("terr"));
    CHECK(is_study_key("terrain.band"));
    CHECK_FALSE(is_study_key("terrain"));
}

TEST_CASE("a value from the command line says its option where it is wrong") {
    Study study;
    set_study_value(study, "rain.two_year_24_hour", {.value = std::string("3.6 in"), .subject = "--rain"});
    CHECK(study.rain.two_year_24_hour == inches(3.6));
    CHECK_THROWS_WITH(
        set_study_value(study, "rain.two_year_24_hour", {.value = std::string("3.6"), .subject = "--rain"}),
        Contains("--rain is \"3.6\", which has no unit"));
}

TEST_CASE("a key that does not exist is a fault of the program that sets it") {
    Study study;
    try {
        set_study_value(study, "terrain.colour", {.value = true, .subject = "here"});
        FAIL("an unknown key was set");
    } catch (const Error& error) {
        CHECK(error.fault() == Fault::bug);
    }
}

TEST_CASE("a key near a section, or in a section that is not known, is told the section") {
    CHECK_THROWS_WITH(refuse_study_key("timing.slope_flor", "town.toml, line 1, column 1"), Contains("did you mean the section [timing.slope_floor]?"));
    CHECK_THROWS_WITH(refuse_study_key("timng.qqqqqqqq", "town.toml, line 1, column 1"), Contains("did you mean the section [timing]?"));
    CHECK_THROWS_WITH(refuse_study_key("timing.slope_flor.overland", "town.toml, line 1, column 1"), Contains("did you mean timing.slope_floor.overland?"));
}

TEST_CASE("a key far from all is refused without a guess") {
    CHECK_THROWS_WITH(refuse_study_key("qqqqqqqq", "town.toml, line 1, column 1"), Contains("remove it"));
}

}  // namespace
}  // namespace rillclock
