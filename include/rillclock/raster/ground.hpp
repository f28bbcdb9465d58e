#pragma once

#include <cstdint>
#include <vector>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/direction.hpp"

namespace rillclock {

/// Ground lengths of the three kinds of step that start in one row, and the ground area of its cells.
struct GroundRow {
    FixedLength east_west = 0;  ///< between neighbours in the row
    FixedLength south = 0;      ///< to the cell below, in the next row; of the last row: as for the row before
    FixedLength diagonal = 0;   ///< to the cell below and beside, in the next row
    FixedArea area = 0;         ///< of one cell
    bool operator==(const GroundRow&) const = default;
};

/// How far apart neighbouring cell centres are on the ground, and how large cells are.
///
/// On a projected grid all rows are alike and are stored once; on a geographic grid every row has its own geodesic lengths.
/// Whatever the reference system, the answer depends on the row alone, so it is one small table.
class Ground {
public:
    /// A grid of rectangular cells on a plane: the diagonal is the hypotenuse.
    [[nodiscard]] static Ground planar(Length cell_width, Length cell_height);
    /// A table with one entry a row (at least one).
    [[nodiscard]] static Ground by_row(std::vector<GroundRow> rows);

    /// Length of the step out of a cell of `row` in direction `d`. Steps north are the steps south of the row before.
    [[nodiscard]] FixedLength length(std::int64_t row, Direction d) const {
        if (d == Direction::east || d == Direction::west) return at(row).east_west;
        const GroundRow& upper = at(row_step(d) < 0 ? row - 1 : row);
        return is_diagonal(d) ? upper.diagonal : upper.south;
    }
    /// Ground area of a cell of that row.
    [[nodiscard]] FixedArea cell_area(std::int64_t row) const { return at(row).area; }
    /// Whether all rows are alike.
    [[nodiscard]] bool is_uniform() const { return rows_.size() == 1; }
    /// The shorter side of the middle row's cells: what "one cell" means where a study speaks of cells.
    [[nodiscard]] Length cell_side() const;

    /// The same ground with every step counted at `weight` times its length; areas stay. For `unbiased_step_weight`.
    [[nodiscard]] Ground with_steps_weighted(double weight) const;
    /// What `length` gives over the distance of the two centres; 1 but for weighted steps.
    [[nodiscard]] double step_weight() const { return step_weight_; }

private:
    explicit Ground(std::vector<GroundRow> rows) : rows_(std::move(rows)) {}
    [[nodiscard]] const GroundRow& at(std::int64_t row) const {
        return rows_[rows_.size() == 1 ? 0U : static_cast<std::size_t>(row < 0 ? 0 : row)];
    }
    std::vector<GroundRow> rows_;
    double step_weight_ = 1.0;
};

/// Weight of steps to a neighbour by which the greatest error of a path along the grid, over all directions of a straight line, is least:
/// 0.96194 orthogonal and 1.36039 diagonal, which is 0.96194 √2; so it weighs both alike, and cells of any shape.
///
/// Without, a path is cos θ + (√2 − 1) sin θ times as long as the line, θ from 0° to 45°: 1.0824 at 22.5°, 1.0548 on average. With, from
/// 0.962 to 1.041, 1.015 on average. Source: Butt and Maragos, Optimum design of chamfer distance transforms, IEEE Trans. Image
/// Process. 7(10), 1998 (values from memory; the errors follow by arithmetic).
inline constexpr double unbiased_step_weight = 0.96194;

}  // namespace rillclock
