#pragma once

#include <cmath>
#include <cstdint>
#include <limits>
#include <optional>

#include "rillclock/core/notice.hpp"

namespace rillclock {

/// Index of a cell, row by row from the north-west corner. Rasters of 2³² − 1 cells and more are refused where they are opened.
using Cell = std::uint32_t;
inline constexpr Cell no_cell = std::numeric_limits<Cell>::max();

/// A cell by its row and column, from 0 at the north-west corner.
struct RowColumn {
    std::int64_t row = 0;
    std::int64_t column = 0;
    bool operator==(const RowColumn&) const = default;
};

/// Where cells are: a north-up grid in the coordinates of its reference system. Values live elsewhere.
///
/// Row 0 is the northernmost, column 0 the westernmost. A file stored south-up is turned while it is read.
struct Grid {
    std::int64_t rows = 0;
    std::int64_t columns = 0;
    double left = 0.0;         ///< x of the western edge of column 0
    double top = 0.0;          ///< y of the northern edge of row 0
    double cell_width = 1.0;   ///< positive, in the reference system's unit
    double cell_height = 1.0;  ///< positive

    bool operator==(const Grid&) const = default;

    [[nodiscard]] std::int64_t size() const { return rows * columns; }
    /// The index of a cell on the grid.
    [[nodiscard]] Cell cell(RowColumn at) const { return static_cast<Cell>(at.row * columns + at.column); }
    /// Row and column of an index.
    [[nodiscard]] RowColumn row_column(Cell cell) const { return {cell / columns, cell % columns}; }
    /// Whether the cell lies on the grid.
    [[nodiscard]] bool contains(RowColumn at) const {
        return at.row >= 0 && at.row < rows && at.column >= 0 && at.column < columns;
    }
    /// The centre of a cell, in the reference system's coordinates.
    [[nodiscard]] Place centre(RowColumn at) const {
        return {left + (static_cast<double>(at.column) + 0.5) * cell_width,
                top - (static_cast<double>(at.row) + 0.5) * cell_height};
    }
    /// The centre of a cell, in the reference system's coordinates.
    [[nodiscard]] Place centre(Cell cell) const { return centre(row_column(cell)); }

    /// The cell that holds a place; the southern and the eastern edge of the grid belong to no cell. NaN is nowhere.
    [[nodiscard]] std::optional<RowColumn> at(Place place) const {
        const double column = std::floor((place.x - left) / cell_width);
        const double row = std::floor((top - place.y) / cell_height);
        if (!(column >= 0 && column < static_cast<double>(columns))) return std::nullopt;
        if (!(row >= 0 && row < static_cast<double>(rows))) return std::nullopt;
        return RowColumn{static_cast<std::int64_t>(row), static_cast<std::int64_t>(column)};
    }
};

}  // namespace rillclock
