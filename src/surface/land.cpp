#include "rillclock/surface/land.hpp"

#include <algorithm>
#include <array>
#include <string_view>

namespace rillclock {
namespace {

constexpr std::array<std::string_view, slope_bands - 1> band_ends_percent{"2", "5", "6", "7", "10", "30"};

}  // namespace

CellSoil cell_soil(SoilGroup group) {
    return static_cast<CellSoil>(static_cast<std::uint8_t>(group) + 1U);
}

std::optional<SoilGroup> group_of(CellSoil soil) {
    if (soil == CellSoil::unknown) return std::nullopt;
    return static_cast<SoilGroup>(static_cast<std::uint8_t>(soil) - 1U);
}

std::string letter_of(CellSoil soil) {
    constexpr std::string_view letters = "ABCD";
    return soil == CellSoil::unknown ? "" : std::string(1, letters[static_cast<std::uint8_t>(soil) - 1U]);
}

std::string words(SlopeBand band) {
    const auto place = static_cast<std::size_t>(band);
    const auto percent = [](std::size_t end) { return std::string(band_ends_percent[end]); };
    if (place == 0) return "to " + percent(0) + " %";
    if (place == band_ends_percent.size()) return "above " + percent(place - 1) + " %";
    return percent(place - 1) + " to " + percent(place) + " %";
}

void LandTally::add(const LandTally& other) {
    for (std::size_t soil = 0; soil < cell_soils; ++soil) {
        const std::vector<Count>& more = other.counts_[soil];
        std::vector<Count>& counts = counts_[soil];
        if (more.size() > counts.size()) counts.resize(more.size());
        for (std::size_t place = 0; place < more.size(); ++place) {
            counts[place].cells += more[place].cells;
            counts[place].area += more[place].area;
        }
    }
}

std::vector<LandShare> LandTally::shares() const {
    std::vector<LandShare> met;
    for (std::size_t soil = 0; soil < cell_soils; ++soil) {
        for (std::size_t place = 0; place < counts_[soil].size(); ++place) {
            const Count& count = counts_[soil][place];
            if (count.cells == 0) continue;
            const LandKind kind{.cover = static_cast<std::uint8_t>(place / slope_bands),
                                .soil = static_cast<CellSoil>(soil),
                                .slope = static_cast<SlopeBand>(place % slope_bands)};
            met.push_back({.kind = kind, .cells = count.cells, .area = count.area});
        }
    }
    std::sort(met.begin(), met.end(), [](const LandShare& a, const LandShare& b) { return a.kind < b.kind; });
    return met;
}

}  // namespace rillclock
