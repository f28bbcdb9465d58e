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

TEST_CASE("the bands of land slope end at 2 % and 6 %, ends included") {
    CHECK(slope_band(0) == SlopeBand::flat);
    CHECK(slope_band(0.02) == SlopeBand::flat);
    CHECK(slope_band(0.0201) == SlopeBand::rolling);
    CHECK(slope_band(0.06) == SlopeBand::rolling);
    CHECK(slope_band(0.0601) == SlopeBand::steep);
    CHECK(words(SlopeBand::rolling) == "2 to 6 %");
}

TEST_CASE("land is counted by kind, in whatever order and parts it comes") {
    const LandKind meadow{.cover = 7, .soil = CellSoil::b, .slope = SlopeBand::steep};
    const LandKind street{.cover = 2, .soil = CellSoil::unknown, .slope = SlopeBand::flat};
    const LandKind street_on_d{.cover = 2, .soil = CellSoil::d, .slope = SlopeBand::flat};
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
