#include <array>
#include <stdexcept>

#include "published_formulas.hpp"
#include "rillclock/hydraulics/lump_formulas.hpp"
#include "rillclock/study/catchment_runoff.hpp"
#include "rillclock/study/lump_inputs.hpp"
#include "rillclock/surface/composite.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "rillclock/surface/printed_coefficients.hpp"
#include "rillclock/surface/runoff_coefficients.hpp"

namespace rillclock {
namespace {

/// A class of the built-in book of NLCD.
const CoverClass& nlcd(const Inputs& in) {
    static const CoverBook book = built_in_book("nlcd");
    const CoverClass* found = book.find(static_cast<int>(in["code"]));
    if (found == nullptr) throw std::runtime_error("the book nlcd has no such class");
    return *found;
}

double curve_number(const Inputs& in) {
    return nlcd(in).curve_number(static_cast<SoilGroup>(static_cast<int>(in["group"]) - 1)).value();
}

/// The coefficient that a class gets which names a land use in its book.
double named_coefficient(std::string_view land_use, CellSoil soil, const Inputs& in, double years) {
    const std::string text = "code,name,n_typical,shallow_type,land_use,source\n1,Land,0.2,pavement," + std::string(land_use) + ",test\n";
    const LandKind land{.cover = 0, .soil = soil, .slope = slope_band(in["slope_percent"] / 100)};
    return kind_coefficient(parse_cover_book(text, "book.csv"), land, CoefficientSource::book, years).value.value();
}

double land_use_coefficient(const Inputs& in) {
    const LandUse& use = land_uses()[static_cast<std::size_t>(in["row"]) - 1];
    return named_coefficient(use.name, static_cast<CellSoil>(static_cast<int>(in["group"])), in, in["years"]);
}

const CoefficientTable& printed_table(const Inputs& in) { return coefficient_tables()[static_cast<std::size_t>(in["table"]) - 1]; }
const CoefficientRow& printed_row(const Inputs& in) { return printed_table(in).rows.at(static_cast<std::size_t>(in["row"]) - 1); }
PrintedRange printed_ends(const Inputs& in) { return printed_table(in).range(printed_row(in), slope_band(in["slope_percent"] / 100)); }

/// The land of HEC-22, 3rd ed., 2009, example 3-1, as a cover book describes it (values from memory).
const CoverBook& example_book() {
    static const CoverBook book = parse_cover_book(
        "code,name,n_typical,shallow_type,c,source\n"
        "1,Paved,0.011,pavement,0.90,example 3-1\n"
        "2,Lawn,0.24,short-grass pasture,0.15,example 3-1\n"
        "3,Unimproved grass,0.15,short-grass pasture,0.25,example 3-1\n"
        "4,Grass,0.15,short-grass pasture,0.22,example 3-1\n",
        "example.csv");
    return book;
}

std::vector<LandShare> example_land(const Inputs& in) {
    constexpr std::array names{"paved_ha", "lawn_ha", "unimproved_grass_ha", "grass_ha"};
    std::vector<LandShare> land;
    for (std::size_t place = 0; place < names.size(); ++place) {
        const FixedArea area = to_fixed_area(in_square_metres(hectares(in[names[place]])));
        if (area > 0) land.push_back({.kind = {.cover = static_cast<std::uint8_t>(place)}, .cells = 1, .area = area});
    }
    return land;
}

/// As the methods that take a catchment as one lump have it.
double example_coefficient(const Inputs& in) { return composite_runoff_coefficient(example_land(in), example_book()).value.value(); }

/// As peaks have it, of a return period whose frequency factor is 1.
CompositeCoefficient example_composite(const Inputs& in) {
    Coefficients coefficients(example_book(), {}, {10.0});
    LandAreas areas;
    for (const LandShare& share : example_land(in)) areas[share.kind] += share.area;
    return composite_of(areas, coefficients, 0);
}

double kirpich_factor(const Inputs& in) {
    constexpr std::array names{"paved overland", "concrete channel"};
    return lump_input_from_text(LumpInput::kirpich_factor, names.at(static_cast<std::size_t>(in["row"]) - 1), "here");
}

}  // namespace

Formulas surface_formulas() {
    return {
        {"nlcd_n", [](const Inputs& in) { return nlcd(in).n_typical; }},
        {"nlcd_cn", curve_number},
        {"nlcd_kerby_N", [](const Inputs& in) { return nlcd(in).kerby_n.value(); }},
        {"kirpich_factor", kirpich_factor},
        {"example_c", example_coefficient},
        {"example_peak_c", [](const Inputs& in) { return example_composite(in).value; }},
        {"example_runoff_ha", [](const Inputs& in) { return in_hectares(square_metres(from_fixed_area(example_composite(in).runoff))); }},
        {"land_use_c", land_use_coefficient},
        {"printed_c", [](const Inputs& in) { return named_coefficient(printed_row(in).name, CellSoil::unknown, in, 10); }},
        {"printed_c_least", [](const Inputs& in) { return printed_ends(in).least; }},
        {"printed_c_greatest", [](const Inputs& in) { return printed_ends(in).greatest; }},
        {"kirpich_sharifi_hosseini", [](const Inputs&) { return kirpich_sharifi_hosseini; }},
        {"california_sharifi_hosseini", [](const Inputs&) { return california_sharifi_hosseini; }},
    };
}

}  // namespace rillclock
