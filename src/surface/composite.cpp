#include "rillclock/surface/composite.hpp"

#include <algorithm>
#include <cstdint>
#include <functional>
#include <utility>
#include <vector>

namespace rillclock {
namespace {

struct ClassOnSoil {
    const CoverClass& cover;
    CellSoil soil = CellSoil::unknown;
};

using ValueOfLand = std::function<std::optional<double>(const ClassOnSoil&)>;

/// An average by area, or the first kind of land that has no value.
struct AreaMean {
    std::optional<double> value = {};
    const CoverClass* without = nullptr;
    CellSoil on = CellSoil::unknown;
};

AreaMean area_mean(std::span<const LandShare> land, const CoverBook& book, const ValueOfLand& value_of) {
    double sum = 0.0;
    double whole = 0.0;
    for (const LandShare& share : land) {
        const CoverClass& cover = book.classes()[share.kind.cover];
        const std::optional<double> value = value_of({.cover = cover, .soil = share.kind.soil});
        if (!value) return {.value = {}, .without = &cover, .on = share.kind.soil};
        sum += from_fixed_area(share.area) * *value;
        whole += from_fixed_area(share.area);
    }
    if (!(whole > 0)) return {};
    return {.value = sum / whole};
}

std::vector<LandShare> dry_land(std::span<const LandShare> land, const CoverBook& book) {
    std::vector<LandShare> dry;
    for (const LandShare& share : land) {
        if (!book.classes()[share.kind.cover].is_open_water()) dry.push_back(share);
    }
    return dry;
}

std::int64_t cells_without_soil(std::span<const LandShare> land) {
    std::int64_t cells = 0;
    for (const LandShare& share : land) {
        if (share.kind.soil == CellSoil::unknown) cells += share.cells;
    }
    return cells;
}

std::string column_for(const std::string& stem, CellSoil soil) {
    if (soil == CellSoil::unknown) return stem;
    return stem + "_" + "abcd"[static_cast<std::size_t>(*group_of(soil))];
}

std::string lacking_mean_text(const AreaMean& mean, const std::string& columns) {
    return mean.without == nullptr ? "" : "the cover book has no " + columns + " for " + mean.without->name;
}

}  // namespace

Composite composite_curve_number(std::span<const LandShare> land, const CoverBook& book) {
    const std::int64_t without = cells_without_soil(land);
    if (without > 0) return {.lacking = std::to_string(without) + " cells of the catchment have no soil group"};
    const AreaMean mean =
        area_mean(land, book, [](const ClassOnSoil& at) { return at.cover.curve_number(*group_of(at.soil)); });
    return {.value = mean.value, .lacking = lacking_mean_text(mean, column_for("cn", mean.on))};
}

Composite composite_runoff_coefficient(std::span<const LandShare> land, const CoverBook& book) {
    const AreaMean mean =
        area_mean(land, book, [](const ClassOnSoil& at) { return at.cover.coefficient(group_of(at.soil)); });
    const std::string either = mean.on == CellSoil::unknown ? "" : " or " + column_for("c", mean.on);
    return {.value = mean.value, .lacking = lacking_mean_text(mean, "c" + either)};
}

Composite composite_impervious(std::span<const LandShare> land, const CoverBook& book) {
    const AreaMean mean = area_mean(land, book, [](const ClassOnSoil& at) { return at.cover.impervious; });
    return {.value = mean.value, .lacking = lacking_mean_text(mean, "impervious_percent")};
}

Composite prevailing(std::span<const LandShare> land, const CoverBook& book, std::optional<double> CoverClass::*value,
                     const std::string& column) {
    std::vector<std::pair<double, FixedArea>> area_of;  // by value, in the order of the book
    for (const LandShare& share : dry_land(land, book)) {
        const CoverClass& cover = book.classes()[share.kind.cover];
        if (!(cover.*value)) return {.lacking = "the cover book has no " + column + " for " + cover.name};
        const auto known = std::find_if(area_of.begin(), area_of.end(),
                                        [&](const auto& each) { return each.first == *(cover.*value); });
        if (known == area_of.end())
            area_of.emplace_back(*(cover.*value), share.area);
        else
            known->second += share.area;
    }
    const auto most = std::max_element(area_of.begin(), area_of.end(),
                                       [](const auto& a, const auto& b) { return a.second < b.second; });
    if (most == area_of.end()) return {};
    return {.value = most->first};
}

Composite composite_overland_n(std::span<const LandShare> land, const CoverBook& book) {
    const std::vector<LandShare> dry = dry_land(land, book);
    const AreaMean mean =
        area_mean(dry, book, [](const ClassOnSoil& at) { return std::optional(at.cover.n_typical); });
    return {.value = mean.value};
}

}  // namespace rillclock
