#include "rillclock/surface/runoff_coefficients.hpp"

#include <algorithm>

#include "rillclock/hydraulics/rational.hpp"
#include "rillclock/surface/printed_coefficients.hpp"

namespace rillclock {
namespace {

constexpr double rare_from_years = 25.0;

using ByGroup = std::array<std::array<double, 3>, 4>;

constexpr ByGroup everywhere(double flat, double rolling, double steep) {
    return {{{flat, rolling, steep}, {flat, rolling, steep}, {flat, rolling, steep}, {flat, rolling, steep}}};
}

// For each use the frequent storms, then the rare ones; a line holds the groups A to D of 0 to 2, 2 to 6, above 6 %.
constexpr std::array uses{
    LandUse{"cultivated",
            {{{{{.08, .13, .16}, {.11, .15, .21}, {.14, .19, .26}, {.18, .23, .31}}},
              {{{.14, .18, .22}, {.16, .21, .28}, {.20, .25, .34}, {.24, .29, .41}}}}}},
    LandUse{"pasture",
            {{{{{.12, .20, .30}, {.18, .28, .37}, {.24, .34, .44}, {.30, .40, .50}}},
              {{{.15, .25, .37}, {.23, .34, .45}, {.30, .42, .52}, {.37, .50, .62}}}}}},
    LandUse{"meadow",
            {{{{{.10, .16, .25}, {.14, .22, .30}, {.20, .28, .36}, {.24, .30, .40}}},
              {{{.14, .22, .30}, {.20, .28, .37}, {.26, .35, .44}, {.30, .40, .50}}}}}},
    LandUse{"forest",
            {{{{{.05, .08, .11}, {.08, .11, .14}, {.10, .13, .16}, {.12, .16, .20}}},
              {{{.08, .11, .14}, {.10, .14, .18}, {.12, .16, .20}, {.15, .20, .25}}}}}},
    LandUse{"residential 1/8 acre",
            {{{{{.25, .28, .31}, {.27, .30, .35}, {.30, .33, .38}, {.33, .36, .42}}},
              {{{.33, .37, .40}, {.35, .39, .44}, {.38, .42, .49}, {.41, .45, .54}}}}}},
    LandUse{"residential 1/4 acre",
            {{{{{.22, .26, .29}, {.24, .29, .33}, {.27, .31, .36}, {.30, .34, .40}}},
              {{{.30, .34, .37}, {.33, .37, .42}, {.36, .40, .47}, {.38, .42, .52}}}}}},
    LandUse{"residential 1/3 acre",
            {{{{{.19, .23, .26}, {.22, .26, .30}, {.25, .29, .34}, {.28, .32, .39}}},
              {{{.28, .32, .35}, {.30, .35, .39}, {.33, .38, .45}, {.36, .40, .50}}}}}},
    LandUse{"residential 1/2 acre",
            {{{{{.16, .20, .24}, {.19, .23, .28}, {.22, .27, .32}, {.26, .30, .37}}},
              {{{.25, .29, .32}, {.28, .32, .36}, {.31, .35, .42}, {.34, .38, .48}}}}}},
    LandUse{"residential 1 acre",
            {{{{{.14, .19, .22}, {.17, .21, .26}, {.20, .25, .31}, {.24, .29, .35}}},
              {{{.22, .26, .29}, {.24, .28, .34}, {.28, .32, .40}, {.31, .35, .46}}}}}},
    LandUse{"industrial",
            {{{{{.67, .68, .68}, {.68, .68, .69}, {.68, .69, .69}, {.69, .69, .70}}},
              {{{.85, .85, .86}, {.85, .86, .86}, {.86, .86, .87}, {.86, .86, .88}}}}}},
    LandUse{"commercial",
            {{{{{.71, .71, .72}, {.71, .72, .72}, {.72, .72, .72}, {.72, .72, .72}}},
              {{{.88, .88, .89}, {.89, .89, .89}, {.89, .89, .90}, {.89, .89, .90}}}}}},
    LandUse{"streets",
            {{{{{.70, .71, .72}, {.71, .72, .74}, {.72, .73, .76}, {.73, .75, .78}}},
              {{{.76, .77, .79}, {.80, .82, .84}, {.84, .85, .89}, {.89, .91, .95}}}}}},
    LandUse{"open space",
            {{{{{.05, .10, .14}, {.08, .13, .19}, {.12, .17, .24}, {.16, .21, .28}}},
              {{{.11, .16, .20}, {.14, .19, .26}, {.18, .23, .32}, {.22, .27, .39}}}}}},
    LandUse{"parking", {{everywhere(.85, .86, .87), everywhere(.95, .96, .97)}}},
};

std::string lacking_text(const CoverClass& cover, const std::string& what) {
    return "the cover book has no " + what + " for " + cover.name;
}

KindCoefficient from_book(const CoverClass& cover, const LandKind& kind, double return_period) {
    const std::optional<SoilGroup> group = group_of(kind.soil);
    const bool by_soil = group && cover.runoff_coefficients[static_cast<std::size_t>(*group)];
    if (const auto own = cover.coefficient(group)) return {.value = *own, .by_soil = by_soil};
    if (const auto found = find_printed_row(cover.land_use)) {
        return {.value = found->table->range(*found->row, kind.slope).used(), .by_slope = found->row->is_by_slope()};
    }
    const LandUse* use = find_land_use(cover.land_use);
    if (use == nullptr) return {.lacking = lacking_text(cover, "c or land_use")};
    if (!group) return {.lacking = "the land use of " + cover.name + " needs a soil group, which is not stated everywhere"};
    return {.value = use->coefficient(*group, kind.slope, return_period), .varies_with_period = true, .by_soil = true, .by_slope = true};
}

KindCoefficient from_imperviousness(const CoverClass& cover, CoefficientSource source) {
    if (cover.is_open_water() && cover.impervious.value_or(1.0) == 1.0) return {.value = open_water_coefficient};
    if (!cover.impervious) return {.lacking = lacking_text(cover, "impervious_percent")};
    return {.value = source == CoefficientSource::urbonas ? urbonas_coefficient(*cover.impervious) : schueler_coefficient(*cover.impervious)};
}

}  // namespace

double LandUse::coefficient(SoilGroup group, SlopeBand slope, double return_period) const {
    const ByGroup& groups = printed[return_period < rare_from_years ? 0 : 1];
    const std::size_t column = slope == SlopeBand::to_2 ? 0 : slope <= SlopeBand::to_6 ? 1 : 2;
    return groups[static_cast<std::size_t>(group)][column];
}

double LandUse::least() const { return printed[0][0][0]; }
double LandUse::greatest() const { return printed[1][3][2]; }

std::span<const LandUse> land_uses() { return uses; }

const LandUse* find_land_use(std::string_view name) {
    const auto found = std::find_if(uses.begin(), uses.end(), [&](const LandUse& use) { return use.name == name; });
    return found == uses.end() ? nullptr : &*found;
}

std::string_view words(CoefficientSource source) {
    switch (source) {
        case CoefficientSource::book: return "book";
        case CoefficientSource::urbonas: return "imperviousness";
        case CoefficientSource::schueler: return "imperviousness, schueler";
    }
    return "";
}

KindCoefficient kind_coefficient(const CoverBook& book, const LandKind& kind, CoefficientSource source, double return_period) {
    const CoverClass& cover = book.classes()[kind.cover];
    return source == CoefficientSource::book ? from_book(cover, kind, return_period) : from_imperviousness(cover, source);
}

bool has_coefficients(const CoverBook& book, CoefficientSource source) {
    const auto classes = book.classes();
    return std::any_of(classes.begin(), classes.end(), [&](const CoverClass& c) {
        if (source != CoefficientSource::book) return c.impervious.has_value();
        const auto has = [](const std::optional<double>& value) { return value.has_value(); };
        return has(c.runoff_coefficient) || !c.land_use.empty() ||
               std::any_of(c.runoff_coefficients.begin(), c.runoff_coefficients.end(), has);
    });
}

bool uses_slope(const CoverBook& book, CoefficientSource source) {
    const auto classes = book.classes();
    return source == CoefficientSource::book && std::any_of(classes.begin(), classes.end(), [](const CoverClass& c) {
               const auto found = find_printed_row(c.land_use);
               return found ? found->row->is_by_slope() : !c.land_use.empty();
           });
}

}  // namespace rillclock
