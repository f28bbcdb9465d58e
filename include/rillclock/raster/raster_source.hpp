#pragma once

#include <algorithm>
#include <utility>

#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// A raster in memory as a source of blocks. The raster must outlive it and have the rows and columns of the grid.
template <class T>
class RasterSource final : public BlockSource<T> {
public:
    /// On a grid of square cells of side 1 whose south-western corner is at 0, 0, where none is given.
    explicit RasterSource(const Raster<T>& raster)
        : RasterSource(raster, {.rows = raster.rows(), .columns = raster.columns(), .top = static_cast<double>(raster.rows())}) {}
    RasterSource(const Raster<T>& raster, const Grid& grid) : raster_(raster), grid_(grid) {}

    [[nodiscard]] const Grid& grid() const override { return grid_; }
    void read(const Window& window, std::span<T> values) override {
        for (std::int64_t r = 0; r < window.rows; ++r) {
            const std::span<const T> row =
                raster_.row(window.row + r).subspan(static_cast<std::size_t>(window.column), static_cast<std::size_t>(window.columns));
            std::copy(row.begin(), row.end(), values.begin() + static_cast<std::ptrdiff_t>(r * window.columns));
        }
    }

private:
    const Raster<T>& raster_;
    Grid grid_;
};

}  // namespace rillclock
