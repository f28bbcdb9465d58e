#include "rillclock/surface/land.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

TEST_CASE("soil groups and the soil of a cell are the same letters, and unknown is none") {
    CHECK(group_of(cell_soil(SoilGroup::c)) == SoilGroup::c);
    CHECK(letter_of(CellSoil::a) == "A");
    CHECK(letter_of(CellSoil::d) == "D");
    CHECK(letter_of(CellSoil::unknown).empty());
    CHECK_FALSE(group_of(CellSoil::unknown));
}

TEST_CASE("the bands of land slope end where some table of coefficients goes over to its next slope class, ends included") {
    CHECK(slope_band(0) == SlopeBand::to_2);
    CHECK(slope_band(0.02) == SlopeBand::to_2);
    CHECK(slope_band(0.0201) == SlopeBand::to_5);
    CHECK(slope_band(0.05) == SlopeBand::to_5);
    CHECK(slope_band(0.06) == SlopeBand::to_6);
    CHECK(slope_band(0.0601) == SlopeBand::to_7);
    CHECK(slope_band(0.07) == SlopeBand::to_7);
    CHECK(slope_band(0.1) == SlopeBand::to_10);
    CHECK(slope_band(0.3) == SlopeBand::to_30);
    CHECK(slope_band(0.3001) == SlopeBand::steeper);
    CHECK(words(SlopeBand::to_2) == "to 2 %");
    CHECK(words(SlopeBand::to_5) == "2 to 5 %");
    CHECK(words(SlopeBand::to_30) == "10 to 30 %");
    CHECK(words(SlopeBand::steeper) == "above 30 %");
}

TEST_CASE("land is counted by kind, in whatever order and parts it comes") {
    const LandKind meadow{.cover = 7, .soil = CellSoil::b, .slope = SlopeBand::to_7};
    const LandKind street{.cover = 2, .soil = CellSoil::unknown, .slope = SlopeBand::to_2};
    const LandKind street_on_d{.cover = 2, .soil = CellSoil::d, .slope = SlopeBand::to_2};
    LandTally one;
    one.add(meadow, 40);
    one.add(street_on_d, 5);
    LandTally other;
    other.add(meadow, 60);
    other.add(street, 7);
    LandTally forth = one;
    forth.add(other);
    LandTally back = other;
    back.add(one);
    for (const LandTally& tally : {forth, back}) {
        const std::vector<LandShare> land = tally.shares();
        REQUIRE(land.size() == 3);
        CHECK(land[0].kind == street);
        CHECK(land[1].kind == street_on_d);
        CHECK(land[2].kind == meadow);
        CHECK(land[2].cells == 2);
        CHECK(land[2].area == 100);
    }
}

}  // namespace
}  // namespace rillclock
