#include "rillclock/study/lump_inputs.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

TEST_CASE("a lump input is a number or a name of the method's own table") {
    CHECK(lump_input_from_text(LumpInput::kerby_n, "0.4", "here") == 0.4);
    CHECK(lump_input_from_text(LumpInput::kerby_n, "pavement", "here") == 0.02);
    CHECK(lump_input_from_text(LumpInput::izzard_c, "closely clipped sod", "here") == 0.046);
    CHECK(lump_input_from_text(LumpInput::county_k, "undeveloped, good cover", "here") == 0.937);
    CHECK(lump_input_from_text(LumpInput::kirpich_factor, "concrete channel", "here") == 0.2);
}

TEST_CASE("every lump input has a name, a range, and refuses what lies outside of it") {
    for (const LumpInput input : all_lump_inputs) {
        INFO(name_of(input));
        CHECK_FALSE(name_of(input).empty());
        CHECK(range_of(input).least < range_of(input).greatest);
        for (const char* bad : {"-1", "11", "nan", "inf", "0.4 m", "x", ""})
            CHECK_THROWS_WITH(lump_input_from_text(input, bad, "the field"), Contains("the field"));
    }
}

TEST_CASE("a name that is nearly right is suggested") {
    CHECK_THROWS_WITH(lump_input_from_text(LumpInput::kerby_n, "pavment", "here"),
                      Contains("here is \"pavment\"; write a number from 0.001 to 1, or one of: pavement;") &&
                          Contains("did you mean pavement?"));
}

}  // namespace
}  // namespace rillclock
