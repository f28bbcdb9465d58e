#pragma once

#include <bit>
#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/tiles/tile_grid.hpp"

namespace rillclock {

/// Spill elevations, kept for those cells alone that lie below theirs: all others spill at their own elevation. A bit and a half for each
/// cell, and 4 bytes (8 where elevations are wide) for each cell below its spill elevation. NaN where void.
class SpillStore {
public:
    /// `elevations` must outlive the store, and tiles must be written before they are read.
    SpillStore(const ElevationStore& elevations, const TileGrid& tiles);

    /// Keeps what differs between a tile's elevations and its spill elevations, both row by row. The elevations' width must hold every spill
    /// elevation exactly. Different tiles may be written at a time.
    void write(Tile tile, std::span<const double> elevation, std::span<const double> spill);
    /// Makes a tile's spill elevations out of its elevations.
    void read(Tile tile, std::span<const double> elevation, std::span<double> spill) const;

    /// Whether a cell lies below its spill elevation.
    [[nodiscard]] bool is_below(RowColumn at) const {
        const Place place = place_of(at);
        return (parts_[place.tile].below[place.word] >> place.bit & 1U) != 0;
    }
    /// How many cells of written tiles lie below their spill elevation.
    [[nodiscard]] std::size_t count_below() const;
    /// Bytes that a spill elevation takes.
    [[nodiscard]] std::size_t value_bytes() const { return elevations_->width() == ElevationStore::Width::four_bytes ? sizeof(float) : sizeof(double); }
    /// The spill elevation of a cell.
    [[nodiscard]] double operator[](Cell cell) const { return at({cell / elevations_->columns(), cell % elevations_->columns()}); }
    /// The same by row and column.
    [[nodiscard]] double at(RowColumn at) const;

    /// Calls `use(cell)` for the cells of a row that lie below their spill elevation, by increasing position.
    template <class Use>
    void for_each_below(std::int64_t row, Use use) const {
        for (std::int64_t column = 0; column < tiles_.columns(); column += tiles_.side()) {
            const Place first = place_of({row, column});
            const Part& part = parts_[first.tile];
            for (std::size_t word = 0; word < words_of(tiles_.window(first.tile)); ++word) {
                const auto left = row * tiles_.columns() + column + static_cast<std::int64_t>(word) * 64;
                for (std::uint64_t bits = part.below[first.word + word]; bits != 0; bits &= bits - 1) {
                    use(static_cast<Cell>(left + std::countr_zero(bits)));
                }
            }
        }
    }

private:
    /// What is kept of a tile. Each of its rows begins a word of bits.
    struct Part {
        std::vector<std::uint64_t> below;
        std::vector<std::uint32_t> before;   ///< by word: how many cells of the words before it lie below their spill elevation
        std::vector<float> single;           ///< their spill elevations, in order; in one of the two, by the elevations' width
        std::vector<double> wide;
    };
    struct Place {
        Tile tile = 0;
        std::size_t word = 0;
        unsigned bit = 0;
    };

    /// Calls `use(position)` for a tile's cells below their spill elevation, by increasing position in it.
    template <class Use>
    void for_each_below_in(Tile tile, Use use) const;
    static std::size_t words_of(const Window& window) { return static_cast<std::size_t>((window.columns + 63) / 64); }
    [[nodiscard]] Place place_of(RowColumn at) const;

    const ElevationStore* elevations_;
    TileGrid tiles_;
    std::vector<Part> parts_;
};

}  // namespace rillclock
