#include "rillclock/surface/printed_coefficients.hpp"
#include "rillclock/surface/runoff_coefficients.hpp"

#include <catch2/catch.hpp>

#include <algorithm>

namespace rillclock {
namespace {

using Catch::Contains;

/// Grass with a land use alone, street with its own c, yard with both, wood with neither.
CoverBook coefficient_book() {
    return parse_cover_book(
        "code,name,n_typical,shallow_type,c,land_use,impervious_percent,source\n"
        "1,Grass,0.24,short-grass pasture,,pasture,0,test\n"
        "2,Street,0.011,pavement,0.9,,100,test\n"
        "3,Yard,0.011,pavement,0.99,parking,,test\n"
        "4,Wood,0.4,contour crops or woodland,,,,test\n",
        "book.csv");
}

KindCoefficient of(std::uint8_t cover, CellSoil soil, SlopeBand slope, double years) {
    return kind_coefficient(coefficient_book(), {.cover = cover, .soil = soil, .slope = slope}, CoefficientSource::book, years);
}

TEST_CASE("a land use has a coefficient by soil group, slope and return period") {
    // Rawls, Wong and McCuen, 1981, pasture (values from memory).
    CHECK(of(0, CellSoil::a, SlopeBand::to_2, 10).value == 0.12);
    CHECK(of(0, CellSoil::b, SlopeBand::to_5, 10).value == 0.28);
    CHECK(of(0, CellSoil::d, SlopeBand::to_7, 24.9).value == 0.50);
    CHECK(of(0, CellSoil::d, SlopeBand::to_7, 25).value == 0.62);
    CHECK(of(0, CellSoil::a, SlopeBand::to_2, 100).varies_with_period);
}

TEST_CASE("a coefficient of the book's own counts before its land use, and does not vary") {
    CHECK(of(2, CellSoil::a, SlopeBand::to_2, 10).value == 0.99);
    CHECK_FALSE(of(2, CellSoil::a, SlopeBand::to_2, 10).varies_with_period);
    CHECK(of(1, CellSoil::unknown, SlopeBand::to_2, 10).value == 0.9);
}

TEST_CASE("what a coefficient lacks is said") {
    CHECK(of(3, CellSoil::a, SlopeBand::to_2, 10).lacking == "the cover book has no c or land_use for Wood");
    CHECK_THAT(of(0, CellSoil::unknown, SlopeBand::to_2, 10).lacking, Contains("Grass needs a soil group"));
    CHECK(kind_coefficient(coefficient_book(), {.cover = 3}, CoefficientSource::urbonas, 10).lacking ==
          "the cover book has no impervious_percent for Wood");
}

TEST_CASE("from imperviousness a paved class has 0.892, a bare one 0.04") {
    CHECK(*kind_coefficient(coefficient_book(), {.cover = 1}, CoefficientSource::urbonas, 10).value == Approx(0.892));
    CHECK(*kind_coefficient(coefficient_book(), {.cover = 0}, CoefficientSource::urbonas, 10).value == Approx(0.04));
}

TEST_CASE("rain on open water runs off whole, in the built-in books and in one that does not state its imperviousness") {
    const auto c_of = [](const CoverBook& book, int code, CoefficientSource source) {
        const auto place = static_cast<std::uint8_t>(book.find(code) - book.classes().data());
        return kind_coefficient(book, {.cover = place}, source, 10).value;
    };
    const CoverBook own = parse_cover_book("code,name,n_typical,shallow_type,water_depth_m,impervious_percent,source\n"
                                           "1,Pond,,,2,,test\n2,Reeds,,,0.5,40,test\n3,Street,0.011,pavement,,100,test\n", "b.csv");
    for (const CoefficientSource source : {CoefficientSource::urbonas, CoefficientSource::schueler}) {
        CHECK(c_of(built_in_book("nlcd"), 11, source) == 1.0);
        CHECK(c_of(built_in_book("worldcover"), 80, source) == 1.0);
        CHECK(c_of(own, 1, source) == 1.0);
        CHECK(*c_of(own, 3, source) < 0.96);  // pavement is ground
    }
    CHECK(*c_of(own, 2, CoefficientSource::schueler) == Approx(0.05 + 0.9 * 0.4));  // what a book states counts
    CHECK(*built_in_book("nlcd").find(11)->impervious == 1.0);
    CHECK(*built_in_book("worldcover").find(80)->impervious == 1.0);
}

TEST_CASE("a coefficient says whether it depends on soil and slope") {
    CHECK((of(0, CellSoil::a, SlopeBand::to_2, 10).by_soil && of(0, CellSoil::a, SlopeBand::to_2, 10).by_slope));
    CHECK_FALSE((of(1, CellSoil::a, SlopeBand::to_2, 10).by_soil || of(1, CellSoil::a, SlopeBand::to_2, 10).by_slope));
    const CoverBook by_soil = parse_cover_book("code,name,n_typical,shallow_type,c,c_a,source\n1,Lawn,0.2,pavement,0.3,0.1,test\n", "b.csv");
    const auto on = [&](CellSoil soil) { return kind_coefficient(by_soil, {.cover = 0, .soil = soil}, CoefficientSource::book, 10); };
    CHECK((on(CellSoil::a).by_soil && !on(CellSoil::a).by_slope));
    CHECK_FALSE((on(CellSoil::d).by_soil || on(CellSoil::unknown).by_soil));
    const CoverBook printed = parse_cover_book("code,name,n_typical,shallow_type,land_use,source\n"
                                               "1,Roofs,0.01,pavement,asce roofs,test\n2,Hill,0.2,pavement,everett woods,test\n", "b.csv");
    const auto of_row = [&](std::uint8_t cover) { return kind_coefficient(printed, {.cover = cover}, CoefficientSource::book, 10); };
    CHECK_FALSE((of_row(0).by_soil || of_row(0).by_slope));
    CHECK((!of_row(1).by_soil && of_row(1).by_slope));
}

TEST_CASE("in every printed land use a rarer storm, a tighter soil and a steeper slope never have less") {
    for (const LandUse& use : land_uses()) {
        INFO(use.name);
        for (std::size_t group = 0; group < 4; ++group) {
            for (std::size_t slope = 0; slope < 3; ++slope) {
                const double here = use.printed[0][group][slope];
                CHECK(use.printed[1][group][slope] >= here);
                if (group > 0) CHECK(here >= use.printed[0][group - 1][slope]);
                if (slope > 0) CHECK(here >= use.printed[0][group][slope - 1]);
                CHECK((here >= use.least() && here <= use.greatest()));
            }
        }
    }
}

CoverBook book_with_land_use(const std::string& land_use, const std::string& c = "") {
    return parse_cover_book("code,name,n_typical,shallow_type,c,land_use,source\n1,Land,0.2,pavement," + c + "," + land_use + ",test\n", "b.csv");
}

TEST_CASE("a row of a printed table has the middle of its range, on any soil, and frequency factors act on it") {
    const CoverBook roofs = book_with_land_use("asce roofs");
    const KindCoefficient roof = kind_coefficient(roofs, {}, CoefficientSource::book, 100);
    CHECK(roof.value == Approx(0.85));
    CHECK_FALSE(roof.varies_with_period);
    CHECK_FALSE(uses_slope(roofs, CoefficientSource::book));
    CHECK(kind_coefficient(book_with_land_use("asce roofs", "0.9"), {}, CoefficientSource::book, 100).value == 0.9);
}

TEST_CASE("a row that is printed by slope goes over where its table says, and beyond what is printed keeps its last") {
    const CoverBook wood = book_with_land_use("schwab woodland on tight clay");
    CHECK(uses_slope(wood, CoefficientSource::book));
    const auto at = [&](double slope) { return *kind_coefficient(wood, {.slope = slope_band(slope)}, CoefficientSource::book, 10).value; };
    CHECK(at(0.05) == 0.40);
    CHECK(at(0.051) == 0.50);
    CHECK(at(0.10) == 0.50);
    CHECK(at(0.11) == 0.60);
    CHECK(at(0.5) == 0.60);
}

TEST_CASE("no two land uses have one name, each has a coefficient from 0 to 1, and a slope class for each that its table has") {
    std::vector<std::string_view> names(land_use_names().begin(), land_use_names().end());
    std::sort(names.begin(), names.end());
    CHECK(std::adjacent_find(names.begin(), names.end()) == names.end());
    for (const std::string_view name : names) {
        INFO(name);
        const auto range = printed_range(name);
        REQUIRE(range);
        CHECK((range->least >= 0 && range->least <= range->greatest && range->greatest <= 1));
    }
    for (const CoefficientTable& table : coefficient_tables()) {
        for (const CoefficientRow& row : table.rows) CHECK((row.by_slope.size() == 1 || row.by_slope.size() == table.slope_ends.size() + 1));
    }
}

TEST_CASE("an unknown land use and a share beyond 100 % are refused with what is right") {
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical,shallow_type,land_use,source\n1,Grass,0.2,pavement,pastur,test\n", "b.csv"),
                      Contains("b.csv, line 2, column 5 (land_use)") && Contains("did you mean pasture?"));
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical,shallow_type,land_use,source\n1,Grass,0.2,pavement,lawn on sand,test\n", "b.csv"),
                      Contains("`rillclock methods` prints") && Contains("did you mean herpicc lawn on sand"));
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical,shallow_type,land_use,source\n1,Grass,0.2,pavement,surface storage low,test\n", "b.csv"),
                      Contains("is \"surface storage low\"; write a land use"));
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical,shallow_type,impervious_percent,source\n1,Grass,0.2,pavement,120,test\n", "b.csv"),
                      Contains("(impervious_percent) is 120") && Contains("0 and 100"));
}

TEST_CASE("the slope of the land matters where a class has a land use, and the book only where it has something to give") {
    CHECK(uses_slope(coefficient_book(), CoefficientSource::book));
    CHECK_FALSE(uses_slope(coefficient_book(), CoefficientSource::urbonas));
    const CoverBook bare = parse_cover_book("code,name,n_typical,shallow_type,source\n1,Grass,0.2,pavement,test\n", "b.csv");
    CHECK_FALSE(uses_slope(bare, CoefficientSource::book));
    CHECK_FALSE(has_coefficients(bare, CoefficientSource::book));
    CHECK(has_coefficients(coefficient_book(), CoefficientSource::book));
}

}  // namespace
}  // namespace rillclock
