#include "rillclock/study/runoff_land.hpp"

#include <algorithm>
#include <map>
#include <tuple>
#include <utility>

namespace rillclock {
namespace {

RunoffLand::Figures figures_of(const LandKind& kind, Coefficients& coefficients, std::size_t period) {
    const double plain = coefficients.of(kind, period).value.value();
    const double factor = coefficients.factor(kind, period);
    return {.plain = plain, .factor = factor, .used = coefficients.capped(kind, period), .uncut = factor * plain};
}

/// A row for a kind of land, of which soil and slope are told only where they matter.
RunoffLand row_of(const LandKind& kind, Coefficients& coefficients, std::size_t periods) {
    const KindCoefficient& c = coefficients.of(kind, 0);
    RunoffLand row{.kind = {.cover = kind.cover}, .by_soil = c.by_soil, .by_slope = c.by_slope, .periods = {}};
    if (c.by_soil) row.kind.soil = kind.soil;
    if (c.by_slope) row.kind.slope = kind.slope;
    for (std::size_t period = 0; period < periods; ++period) row.periods.push_back(figures_of(kind, coefficients, period));
    return row;
}

RunoffLand rest_of(std::span<const RunoffLand> rows, std::size_t periods) {
    RunoffLand rest{.kind = {}, .rows = rows.size(), .periods = std::vector<RunoffLand::Figures>(periods, {0.0, 1.0, 0.0, 0.0})};
    for (const RunoffLand& row : rows) rest.area += row.area;
    for (std::size_t period = 0; period < periods; ++period) {
        RunoffLand::Figures& mean = rest.periods[period];
        for (const RunoffLand& row : rows) {
            const double share = static_cast<double>(row.area) / static_cast<double>(rest.area);
            mean.plain += share * row.periods[period].plain;
            mean.used += share * row.periods[period].used;
            mean.uncut += share * row.periods[period].uncut;
        }
    }
    return rest;
}

}  // namespace

std::vector<RunoffLand> runoff_land(const LandAreas& land, Coefficients& coefficients, std::size_t periods, std::size_t most) {
    std::map<LandKind, RunoffLand> by_kind;
    for (const auto& [kind, area] : land) {
        RunoffLand row = row_of(kind, coefficients, periods);
        by_kind.try_emplace(row.kind, row).first->second.area += area;
    }
    std::vector<RunoffLand> rows;
    for (auto& [unused, row] : by_kind) rows.push_back(std::move(row));
    std::sort(rows.begin(), rows.end(), [](const RunoffLand& a, const RunoffLand& b) { return std::tuple(-a.area, a.kind) < std::tuple(-b.area, b.kind); });
    if (rows.size() <= most) return rows;
    const RunoffLand rest = rest_of(std::span(rows).subspan(most - 1), periods);
    rows.resize(most - 1);
    rows.push_back(rest);
    return rows;
}

}  // namespace rillclock
