#include "bench/heap_flood.hpp"

#include <algorithm>
#include <array>
#include <bit>
#include <functional>
#include <queue>
#include <vector>

namespace rillclock::bench {
namespace {

/// Elevation and cell in one number that sorts by elevation, then by cell: half the memory of a pair, and one
/// comparison.
using Entry = std::uint64_t;

Entry entry_of(float z, Cell cell) {
    const auto bits = std::bit_cast<std::uint32_t>(z);
    const std::uint32_t ordered = (bits & 0x80000000U) != 0 ? ~bits : bits | 0x80000000U;
    return Entry{ordered} << 32U | cell;
}

class Flood {
public:
    /// The raster gets a margin of one cell that counts as flooded, so that no neighbour need be asked whether it is
    /// there.
    explicit Flood(const Raster<float>& elevations)
        : rows_(elevations.rows()),
          columns_(elevations.columns()),
          width_(columns_ + 2),
          level_(rows_ + 2, width_),
          flooded_(static_cast<std::size_t>(level_.size()), 1) {
        for (std::int64_t row = 0; row < rows_; ++row) {
            const auto from = elevations.row(row);
            std::copy(from.begin(), from.end(), level_.row(row + 1).begin() + 1);
            std::fill_n(flooded_.begin() + (row + 1) * width_ + 1, columns_, std::uint8_t{0});
        }
    }

    Raster<float> filled() {
        enter_edges();
        while (!rim_.empty()) {
            const auto cell = static_cast<Cell>(rim_.top());
            rim_.pop();
            enter_neighbours(cell);
        }
        return without_margin();
    }

private:
    void enter(Cell cell) {
        if (flooded_[cell] != 0) return;
        flooded_[cell] = 1;
        rim_.push(entry_of(level_[cell], cell));
    }

    void enter_edges() {
        for (std::int64_t column = 1; column <= columns_; ++column) {
            enter(static_cast<Cell>(width_ + column));
            enter(static_cast<Cell>(rows_ * width_ + column));
        }
        for (std::int64_t row = 1; row <= rows_; ++row) {
            enter(static_cast<Cell>(row * width_ + 1));
            enter(static_cast<Cell>(row * width_ + columns_));
        }
    }

    void enter_neighbours(Cell cell) {
        const std::array<std::int64_t, 8> steps = {-width_ - 1, -width_,    -width_ + 1, -1,
                                                   1,           width_ - 1, width_,      width_ + 1};
        const float water = level_[cell];
        for (const std::int64_t step : steps) {
            const auto beside = static_cast<Cell>(cell + step);
            if (flooded_[beside] != 0) continue;
            flooded_[beside] = 1;
            level_[beside] = std::max(level_[beside], water);
            rim_.push(entry_of(level_[beside], beside));
        }
    }

    [[nodiscard]] Raster<float> without_margin() const {
        Raster<float> result(rows_, columns_);
        for (std::int64_t row = 0; row < rows_; ++row) {
            std::copy_n(level_.row(row + 1).begin() + 1, columns_, result.row(row).begin());
        }
        return result;
    }

    std::int64_t rows_;
    std::int64_t columns_;
    std::int64_t width_;
    Raster<float> level_;
    std::vector<std::uint8_t> flooded_;
    std::priority_queue<Entry, std::vector<Entry>, std::greater<>> rim_;
};

}  // namespace

Raster<float> heap_flooded(const Raster<float>& elevations) {
    return Flood(elevations).filled();
}

}  // namespace rillclock::bench
