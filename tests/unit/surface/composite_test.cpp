#include "rillclock/surface/composite.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

CoverBook composite_book() {
    CoverClass grass{.code = 1, .name = "Grass", .n_typical = 0.2};
    grass.curve_numbers = {39, 61, 74, std::nullopt};
    grass.runoff_coefficient = 0.2;
    grass.runoff_coefficients = {0.1, std::nullopt, 0.3, 0.4};
    CoverClass street{.code = 2, .name = "Street", .n_typical = 0.01};
    street.curve_numbers = {98, 98, 98, 98};
    street.runoff_coefficient = 0.9;
    CoverClass pond{.code = 3, .name = "Pond", .water_depth = metres(1)};
    return {"test", {grass, street, pond}};
}

LandShare share(std::uint8_t cover, CellSoil soil, double area_m2) {
    return {.kind = {.cover = cover, .soil = soil}, .cells = 10, .area = to_fixed_area(area_m2)};
}

TEST_CASE("a curve number is the mean by area over cover and soil") {
    const std::vector<LandShare> land{share(0, CellSoil::a, 100), share(0, CellSoil::c, 200), share(1, CellSoil::d, 100)};
    CHECK(*composite_curve_number(land, composite_book()).value == Approx((39 * 100 + 74 * 200 + 98 * 100) / 400.0));
}

TEST_CASE("a runoff coefficient is that of the soil group where the book has one, else that of any soil") {
    const std::vector<LandShare> land{share(0, CellSoil::a, 100), share(0, CellSoil::b, 100),
                                      share(0, CellSoil::unknown, 100), share(1, CellSoil::c, 100)};
    CHECK(*composite_runoff_coefficient(land, composite_book()).value == Approx((0.1 + 0.2 + 0.2 + 0.9) / 4));
}

TEST_CASE("a composite says which number the book lacks, and for which class") {
    const std::vector<LandShare> on_d{share(0, CellSoil::d, 1)};
    CHECK(composite_curve_number(on_d, composite_book()).lacking == "the cover book has no cn_d for Grass");
    const std::vector<LandShare> unknown{share(1, CellSoil::a, 1), share(0, CellSoil::unknown, 1)};
    CHECK(composite_curve_number(unknown, composite_book()).lacking == "10 cells of the catchment have no soil group");
    const std::vector<LandShare> pond{share(2, CellSoil::unknown, 1)};
    CHECK(composite_runoff_coefficient(pond, composite_book()).lacking == "the cover book has no c for Pond");
    const std::vector<LandShare> pond_on_b{share(2, CellSoil::b, 1)};
    CHECK(composite_runoff_coefficient(pond_on_b, composite_book()).lacking == "the cover book has no c or c_b for Pond");
}

TEST_CASE("overland n leaves open water out, and is none where there is nothing else") {
    const std::vector<LandShare> land{share(0, CellSoil::unknown, 300), share(1, CellSoil::unknown, 100),
                                      share(2, CellSoil::unknown, 500)};
    CHECK(*composite_overland_n(land, composite_book()).value == Approx((0.2 * 300 + 0.01 * 100) / 400));
    const std::vector<LandShare> pond{share(2, CellSoil::unknown, 1)};
    CHECK_FALSE(composite_overland_n(pond, composite_book()).value);
}

TEST_CASE("a retardance is that of the surface that prevails, never a mean of two") {
    CoverClass lawn{.code = 1, .name = "Lawn", .n_typical = 0.2, .kerby_n = 0.4};
    CoverClass street{.code = 2, .name = "Street", .n_typical = 0.01, .kerby_n = 0.02, .impervious = 1};
    CoverClass yard{.code = 3, .name = "Yard", .n_typical = 0.1, .kerby_n = 0.4};
    CoverClass pond{.code = 4, .name = "Pond", .water_depth = metres(1)};
    const CoverBook town{"test", {lawn, street, yard, pond}};
    const std::vector<LandShare> land{share(0, CellSoil::b, 60), share(1, CellSoil::b, 100), share(2, CellSoil::b, 50),
                                      share(3, CellSoil::b, 900)};
    CHECK(prevailing(land, town, &CoverClass::kerby_n, "kerby_n").value == 0.4);
    const std::vector<LandShare> alike{share(0, CellSoil::b, 100), share(1, CellSoil::b, 100)};
    CHECK(prevailing(alike, town, &CoverClass::kerby_n, "kerby_n").value == 0.4);
    CHECK(prevailing(land, town, &CoverClass::izzard_c, "izzard_c").lacking == "the cover book has no izzard_c for Lawn");
    CHECK(composite_impervious(land, town).lacking == "the cover book has no impervious_percent for Lawn");
    const std::vector<LandShare> water{share(3, CellSoil::b, 1)};
    CHECK_FALSE(prevailing(water, town, &CoverClass::kerby_n, "kerby_n").value);
}

}  // namespace
}  // namespace rillclock
