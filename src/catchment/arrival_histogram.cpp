#include "rillclock/catchment/arrival_histogram.hpp"

#include <algorithm>
#include <iterator>
#include <tuple>
#include <utility>

#include "rillclock/catchment/drainage_network.hpp"

namespace rillclock {
namespace {

auto place_of(const HistogramEntry& e) {
    return std::tie(e.shift.fixed, e.shift.storm, e.width.fixed, e.width.storm, e.storm_bin, e.fixed_bin, e.kind);
}

bool stands_before(const HistogramEntry& a, const HistogramEntry& b) { return place_of(a) < place_of(b); }

/// Puts neighbours of one bin and kind together.
void put_together(std::vector<HistogramEntry>& entries) {
    std::size_t kept = 0;
    for (const HistogramEntry& entry : entries) {
        if (kept > 0 && place_of(entries[kept - 1]) == place_of(entry)) {
            entries[kept - 1].area += entry.area;
        } else {
            entries[kept++] = entry;
        }
    }
    entries.resize(kept);
}

}  // namespace

ArrivalHistogram::ArrivalHistogram(std::vector<HistogramEntry> entries) : entries_(std::move(entries)) {
    std::sort(entries_.begin(), entries_.end(), stands_before);
    put_together(entries_);
}

void ArrivalHistogram::shift_by(const StepTime& shift) {
    for (HistogramEntry& entry : entries_) entry.shift += shift;
}

void ArrivalHistogram::add(const ArrivalHistogram& other) {
    std::vector<HistogramEntry> both;
    both.reserve(entries_.size() + other.entries_.size());
    std::merge(entries_.begin(), entries_.end(), other.entries_.begin(), other.entries_.end(), std::back_inserter(both),
               stands_before);
    put_together(both);
    entries_ = std::move(both);
}

FixedArea ArrivalHistogram::area() const {
    FixedArea sum = 0;
    for (const HistogramEntry& entry : entries_) sum += entry.area;
    return sum;
}

std::size_t HistogramTally::KeyHash::operator()(const Key& key) const {
    const auto kind = (static_cast<std::size_t>(key.kind.cover) << 8U) | (static_cast<std::size_t>(key.kind.soil) << 4U) |
                      static_cast<std::size_t>(key.kind.slope);
    const auto bins = (static_cast<std::size_t>(static_cast<std::uint32_t>(key.storm_bin)) << 32U) |
                      static_cast<std::uint32_t>(key.fixed_bin);
    return (bins * 0x9E3779B97F4A7C15ULL) ^ (kind * 0xC2B2AE3D27D4EB4FULL);
}

HistogramTally::Key HistogramTally::key_of(const TileDesk& desk, Local local) const {
    const TiledGround& in = travel_.ground();
    const Cell cell = desk.flow.cell(local);
    const StepTime time = desk.time_to_root(local);
    const bool one = rules_.storms == Storms::one;
    const FixedTime storm_part = fixed_under({.fixed = 0, .storm = time.storm}, rules_.storm_factor);
    const double slope =
        rules_.by_slope ? land_slope(in.elevations, in.metres_per_elevation_unit, in.ground, cell) : 0.0;
    return {.storm_bin = one ? 0 : static_cast<std::int32_t>(bin_of(storm_part, rules_.bin)),
            .fixed_bin = static_cast<std::int32_t>(bin_of(one ? storm_part + time.fixed : time.fixed, rules_.bin)),
            .kind = {.cover = in.surface.index[cell], .soil = in.surface.soil_at(cell), .slope = slope_band(slope)}};
}

void HistogramTally::add(const TileDesk& desk) {
    const Ground& ground = travel_.ground().ground;
    std::unordered_map<std::uint32_t, Sums> by_owner;
    std::uint32_t owner = 0;
    Sums* sums = nullptr;
    for (Local local = 0; local < desk.flow.size(); ++local) {
        if (desk.owner[local] == 0) continue;
        if (desk.owner[local] != owner) {  // cells of a subarea lie together
            owner = desk.owner[local];
            sums = &by_owner[owner];
        }
        (*sums)[key_of(desk, local)] += ground.cell_area(desk.flow.row(local));
    }
    const std::lock_guard lock(mutex_);
    for (const auto& [number, found] : by_owner) {
        for (const auto& [key, area] : found) subareas_[number - 1][key] += area;
    }
}

std::vector<ArrivalHistogram> HistogramTally::take() {
    std::vector<ArrivalHistogram> taken;
    for (Sums& sums : subareas_) {
        std::vector<HistogramEntry> entries;
        entries.reserve(sums.size());
        for (const auto& [key, area] : sums) {
            entries.push_back({.storm_bin = key.storm_bin, .fixed_bin = key.fixed_bin, .kind = key.kind, .area = area});
        }
        taken.emplace_back(std::move(entries));
        sums.clear();
    }
    return taken;
}

}  // namespace rillclock
