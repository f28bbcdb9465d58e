#include "rillclock/terrain/spill_store.hpp"

#include <algorithm>

namespace rillclock {

SpillStore::SpillStore(const ElevationStore& elevations, const TileGrid& tiles)
    : elevations_(&elevations), tiles_(tiles), parts_(tiles.count()) {}

template <class Use>
void SpillStore::for_each_below_in(Tile tile, Use use) const {
    const Window window = tiles_.window(tile);
    const std::size_t words = words_of(window);
    const std::vector<std::uint64_t>& below = parts_[tile].below;
    for (std::size_t word = 0; word < below.size(); ++word) {
        const std::size_t first = word / words * static_cast<std::size_t>(window.columns) + word % words * 64;
        for (std::uint64_t bits = below[word]; bits != 0; bits &= bits - 1) use(first + static_cast<std::size_t>(std::countr_zero(bits)));
    }
}

void SpillStore::write(Tile tile, std::span<const double> elevation, std::span<const double> spill) {
    const Window window = tiles_.window(tile);
    const std::size_t words = words_of(window);
    Part& part = parts_[tile];
    part.below.assign(words * static_cast<std::size_t>(window.rows), 0);
    part.before.assign(part.below.size(), 0);
    const auto columns = static_cast<std::size_t>(window.columns);
    std::uint32_t count = 0;
    for (std::size_t word = 0; word < part.below.size(); ++word) {
        part.before[word] = count;
        const std::size_t first = word / words * columns + word % words * 64;
        const std::size_t size = std::min<std::size_t>(64, columns - word % words * 64);
        // No comparison with a void's NaN holds.
        for (std::size_t i = 0; i < size; ++i) part.below[word] |= std::uint64_t{spill[first + i] > elevation[first + i]} << i;
        count += static_cast<std::uint32_t>(std::popcount(part.below[word]));
    }
    const auto keep = [&](auto& kept) {
        using Value = typename std::remove_cvref_t<decltype(kept)>::value_type;
        kept.clear();
        kept.reserve(count);
        for_each_below_in(tile, [&](std::size_t position) { kept.push_back(static_cast<Value>(spill[position])); });
    };
    if (elevations_->width() == ElevationStore::Width::four_bytes) keep(part.single);
    else keep(part.wide);
}

void SpillStore::read(Tile tile, std::span<const double> elevation, std::span<double> spill) const {
    std::copy(elevation.begin(), elevation.end(), spill.begin());
    const auto fill = [&](const auto& kept) {
        std::size_t next = 0;
        for_each_below_in(tile, [&](std::size_t position) { spill[position] = static_cast<double>(kept[next++]); });
    };
    if (elevations_->width() == ElevationStore::Width::four_bytes) fill(parts_[tile].single);
    else fill(parts_[tile].wide);
}

std::size_t SpillStore::count_below() const {
    std::size_t count = 0;
    for (const Part& part : parts_) count += part.single.size() + part.wide.size();
    return count;
}

double SpillStore::at(RowColumn at) const {
    const Place place = place_of(at);
    const Part& part = parts_[place.tile];
    const std::uint64_t bits = part.below[place.word];
    const std::uint64_t bit = std::uint64_t{1} << place.bit;
    if ((bits & bit) == 0) return (*elevations_)[static_cast<Cell>(at.row * tiles_.columns() + at.column)];
    const std::size_t number = part.before[place.word] + static_cast<std::size_t>(std::popcount(bits & (bit - 1)));
    return part.single.empty() ? part.wide[number] : static_cast<double>(part.single[number]);
}

SpillStore::Place SpillStore::place_of(RowColumn at) const {
    // 32 bits divide faster, and rows and columns are counted in them.
    const auto side = static_cast<std::uint32_t>(std::min<std::int64_t>(tiles_.side(), UINT32_MAX));
    const auto row = static_cast<std::uint32_t>(at.row);
    const auto column = static_cast<std::uint32_t>(at.column);
    const std::uint32_t tile_row = row / side;
    const std::uint32_t tile_column = column / side;
    const auto tile = static_cast<Tile>(tile_row * static_cast<std::uint64_t>(tiles_.tiles_across()) + tile_column);
    const std::uint32_t columns = std::min(side, static_cast<std::uint32_t>(tiles_.columns()) - tile_column * side);
    const std::uint32_t inner_column = column - tile_column * side;
    const std::size_t words = (columns + 63U) / 64U;
    return {.tile = tile, .word = (row - tile_row * side) * words + inner_column / 64U, .bit = inner_column % 64U};
}

}  // namespace rillclock
