#include "rillclock/surface/land.hpp"

#include <algorithm>

namespace rillclock {

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
    switch (band) {
        case SlopeBand::flat:
            return "to 2 %";
        case SlopeBand::rolling:
            return "2 to 6 %";
        case SlopeBand::steep:
            return "above 6 %";
    }
    return {};
}

void LandTally::add(const LandTally& other) {
    for (std::size_t soil = 0; soil < soils; ++soil) {
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
    for (std::size_t soil = 0; soil < soils; ++soil) {
        for (std::size_t place = 0; place < counts_[soil].size(); ++place) {
            const Count& count = counts_[soil][place];
            if (count.cells == 0) continue;
            const LandKind kind{.cover = static_cast<std::uint8_t>(place / bands),
                                .soil = static_cast<CellSoil>(soil),
                                .slope = static_cast<SlopeBand>(place % bands)};
            met.push_back({.kind = kind, .cells = count.cells, .area = count.area});
        }
    }
    std::sort(met.begin(), met.end(), [](const LandShare& a, const LandShare& b) { return a.kind < b.kind; });
    return met;
}

}  // namespace rillclock
