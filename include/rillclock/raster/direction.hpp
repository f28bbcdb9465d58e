#pragma once

#include <array>
#include <cstdint>

#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// One of the eight ways out of a cell, clockwise from grid north; the number times 45 is the azimuth in degrees.
/// This order is also the fixed order in which neighbours are asked wherever the first of equals wins.
enum class Direction : std::uint8_t { north, north_east, east, south_east, south, south_west, west, north_west };

inline constexpr std::array<Direction, 8> all_directions = {
    Direction::north, Direction::north_east, Direction::east, Direction::south_east,
    Direction::south, Direction::south_west, Direction::west, Direction::north_west};

/// Tables of the two functions below; within them they would be made anew at every call.
namespace direction_detail {
inline constexpr std::array<int, 8> row_steps = {-1, -1, 0, 1, 1, 1, 0, -1};
inline constexpr std::array<int, 8> column_steps = {0, 1, 1, 1, 0, -1, -1, -1};
}  // namespace direction_detail

/// Rows to the neighbour: −1 north, 1 south.
[[nodiscard]] constexpr int row_step(Direction d) { return direction_detail::row_steps[static_cast<std::size_t>(d)]; }
/// Columns to the neighbour: −1 west, 1 east.
[[nodiscard]] constexpr int column_step(Direction d) { return direction_detail::column_steps[static_cast<std::size_t>(d)]; }
/// The way back.
[[nodiscard]] constexpr Direction opposite(Direction d) {
    return static_cast<Direction>((static_cast<unsigned>(d) + 4U) % 8U);
}
/// Whether the neighbour shares a corner alone.
[[nodiscard]] constexpr bool is_diagonal(Direction d) { return static_cast<unsigned>(d) % 2U == 1U; }
/// Degrees clockwise from grid north: 0, 45 … 315.
[[nodiscard]] constexpr int azimuth_degrees(Direction d) { return 45 * static_cast<int>(d); }

/// The neighbour in a direction, on the grid or beside it.
[[nodiscard]] constexpr RowColumn neighbour(RowColumn at, Direction d) {
    return {at.row + row_step(d), at.column + column_step(d)};
}

/// The same for a cell's index, on a grid of so many columns; the neighbour must lie on the grid.
[[nodiscard]] constexpr Cell neighbour(Cell cell, Direction d, std::int64_t columns) {
    return static_cast<Cell>(static_cast<std::int64_t>(cell) + row_step(d) * columns + column_step(d));
}

}  // namespace rillclock
