#pragma once

#include <algorithm>
#include <array>
#include <cstdint>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/raster/direction.hpp"
#include "rillclock/tiles/tile_grid.hpp"
#include "rillclock/tiles/tile_memory.hpp"

namespace rillclock {

/// Where a value stands in a patch. Positions within the tile are in the order of its cells, so the smaller position is
/// the smaller cell. Steps are added modulo 2³².
using Position = std::uint32_t;

/// A tile with a halo one cell wide, as local work sees it: rows and columns are counted from the tile's north-west
/// cell, the halo has row or column −1 or one beyond the last. It does not know where the tile's values are kept.
class PatchShape {
public:
    PatchShape() = default;
    PatchShape(const Window& window, std::int64_t raster_columns)
        : window_(window), raster_columns_(raster_columns), stride_(static_cast<Position>(window.columns + 2)) {
        if ((window.rows + 2) * (window.columns + 2) >= std::int64_t{UINT32_MAX}) throw bug("a tile is too large");
        for (const Direction d : all_directions) {
            steps_[static_cast<std::size_t>(d)] =
                static_cast<Position>(row_step(d)) * stride_ + static_cast<Position>(column_step(d));
        }
    }

    [[nodiscard]] const Window& window() const { return window_; }
    [[nodiscard]] std::int64_t rows() const { return window_.rows; }
    [[nodiscard]] std::int64_t columns() const { return window_.columns; }
    [[nodiscard]] std::int64_t raster_columns() const { return raster_columns_; }
    /// Number of positions; also the position of nothing on the patch.
    [[nodiscard]] Position size() const { return static_cast<Position>(window_.rows + 2) * stride_; }

    [[nodiscard]] Position position(std::int64_t row, std::int64_t column) const {
        return static_cast<Position>(row + 1) * stride_ + static_cast<Position>(column + 1);
    }
    [[nodiscard]] Position position(Cell cell) const {
        return position(cell / raster_columns_ - window_.row, cell % raster_columns_ - window_.column);
    }
    [[nodiscard]] RowColumn row_column(Position p) const {
        return {std::int64_t{p / stride_} - 1, std::int64_t{p % stride_} - 1};
    }
    [[nodiscard]] Cell cell(Position p) const {
        const RowColumn at = row_column(p);
        return static_cast<Cell>((window_.row + at.row) * raster_columns_ + window_.column + at.column);
    }
    [[nodiscard]] bool is_in_tile(Position p) const {
        const RowColumn at = row_column(p);
        return at.row >= 0 && at.row < rows() && at.column >= 0 && at.column < columns();
    }
    [[nodiscard]] bool is_in_patch(RowColumn at) const {
        return at.row >= -1 && at.row <= rows() && at.column >= -1 && at.column <= columns();
    }
    /// What to add to a position for one step.
    [[nodiscard]] Position step(Direction d) const { return steps_[static_cast<std::size_t>(d)]; }
    [[nodiscard]] const std::array<Position, 8>& steps() const { return steps_; }

    /// Calls `visit(position)` for each of the tile's outermost cells, once.
    template <class Visit>
    void for_each_rim(Visit visit) const {
        for_each_on_frame({0, 0, rows(), columns()}, visit);
    }
    /// Calls `visit(position)` for each position of the halo, once.
    template <class Visit>
    void for_each_halo(Visit visit) const {
        for_each_on_frame({-1, -1, rows() + 2, columns() + 2}, visit);
    }

private:
    template <class Visit>
    void for_each_on_frame(const Window& frame, Visit visit) const {
        const std::int64_t last_row = frame.row + frame.rows - 1;
        const std::int64_t last_column = frame.column + frame.columns - 1;
        for (std::int64_t row = frame.row; row <= last_row; ++row) {
            const bool whole = row == frame.row || row == last_row;
            const std::int64_t stride = whole ? 1 : std::max<std::int64_t>(1, frame.columns - 1);
            for (std::int64_t column = frame.column; column <= last_column; column += stride)
                visit(position(row, column));
        }
    }

    Window window_;
    std::int64_t raster_columns_ = 0;
    Position stride_ = 2;
    std::array<Position, 8> steps_{};
};

/// Values of a tile and its halo. A patch is loaded for one tile after another and keeps its memory.
template <class T>
class Patch {
public:
    /// Takes the tile's values and those around it; `beyond` where the raster ends.
    template <class Source>
    void load(const Source& source, const PatchShape& shape, T beyond) {
        resize(shape, beyond);
        const Window& w = shape.window();
        const std::int64_t before = w.column > 0 ? 1 : 0;
        const std::int64_t after = w.column + w.columns < source.columns() ? 1 : 0;
        for (std::int64_t row = -1; row <= w.rows; ++row) {
            if (w.row + row < 0 || w.row + row >= source.rows()) continue;
            const auto values = source.row(w.row + row);
            std::copy_n(values.begin() + (w.column - before), w.columns + before + after,
                        &values_[shape.position(row, -before)]);
        }
    }
    /// Takes the tile's values alone.
    template <class Source>
    void load_tile(const Source& source, const PatchShape& shape, T around) {
        resize(shape, around);
        const Window& w = shape.window();
        for (std::int64_t row = 0; row < w.rows; ++row) {
            std::copy_n(source.row(w.row + row).begin() + w.column, w.columns, &values_[shape.position(row, 0)]);
        }
    }
    /// Makes room without values but those around the tile.
    void resize(const PatchShape& shape, T around) {
        shape_ = shape;
        values_.resize(std::size_t{shape.size()} + 1);
        shape.for_each_halo([&](Position p) { values_[p] = around; });
    }
    /// Gives the tile's values back.
    template <class Sink>
    void store(Sink& sink) const {
        const Window& w = shape_.window();
        for (std::int64_t row = 0; row < w.rows; ++row) {
            std::copy_n(&values_[shape_.position(row, 0)], w.columns, sink.row(w.row + row).begin() + w.column);
        }
    }

    [[nodiscard]] const PatchShape& shape() const { return shape_; }
    [[nodiscard]] T& operator[](Position p) { return values_[p]; }
    [[nodiscard]] const T& operator[](Position p) const { return values_[p]; }
    [[nodiscard]] T* at(std::int64_t row, std::int64_t column) { return &values_[shape_.position(row, column)]; }
    [[nodiscard]] const T* at(std::int64_t row, std::int64_t column) const {
        return &values_[shape_.position(row, column)];
    }
    [[nodiscard]] T* data() { return values_.data(); }
    [[nodiscard]] const T* data() const { return values_.data(); }

private:
    PatchShape shape_;
    TileValues<T> values_;
};

}  // namespace rillclock
