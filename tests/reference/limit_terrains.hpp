#pragma once

#include <array>

#include "reference/plain/steepest_descent.hpp"

/// Terrains at the limits of what may come.
namespace rillclock::limits {

/// A one-cell-wide way that winds inwards between walls, level all along; the middle is its only lower cell where `with_pit`.
inline Elevations spiral(std::int64_t size, bool with_pit) {
    Elevations z(size, size, 9.0);
    RowColumn at{1, 0};
    const std::array<RowColumn, 4> ways = {RowColumn{0, 1}, {1, 0}, {0, -1}, {-1, 0}};
    std::size_t way = 0;
    z(at.row, at.column) = 1.0;
    for (int turns = 0; turns < 2;) {
        const RowColumn next{at.row + ways[way].row, at.column + ways[way].column};
        const RowColumn after{next.row + ways[way].row, next.column + ways[way].column};
        const bool blocked = next.row < 1 || next.column < 1 || next.row > size - 2 || next.column > size - 2 ||
                             (after.row >= 0 && after.row < size && after.column >= 0 && after.column < size &&
                              z(after.row, after.column) < 9.0);
        if (blocked) {
            way = (way + 1) % 4;
            ++turns;
            continue;
        }
        turns = 0;
        at = next;
        z(at.row, at.column) = 1.0;
    }
    if (with_pit) z(at.row, at.column) = 0.0;
    return z;
}

/// Level teeth one cell wide on both sides of a level back, between walls.
inline Elevations comb(std::int64_t rows, std::int64_t columns) {
    Elevations z(rows, columns, 5.0);
    for (std::int64_t row = 1; row < rows - 1; ++row) {
        for (std::int64_t column = 1; column < columns - 1; ++column) {
            if (column % 2 == 1 || row == rows / 2) z(row, column) = 2.0;
        }
    }
    return z;
}

}  // namespace rillclock::limits
