#include "rillclock/terrain/relief.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <span>
#include <vector>

namespace rillclock {
namespace {

/// The ways to look so that every pair of neighbours is seen once.
constexpr std::array forward = {Direction::east, Direction::south_east, Direction::south, Direction::south_west};

/// Rows that one thread looks through at once.
constexpr std::int64_t band = 256;

template <class Z>
class ReliefSearch {
public:
    ReliefSearch(const Raster<Z>& z, const Ground& ground, double metres_per_unit)
        : z_(z), ground_(ground), metres_per_unit_(metres_per_unit) {}

    SteepestPair steepest(std::int64_t first_row, std::int64_t end_row) {
        for (std::int64_t row = first_row; row < end_row; ++row) {
            for (const Direction d : forward) look_along(row, d);
        }
        return found_;
    }

private:
    /// Only where a row holds something steeper is it asked where.
    void look_along(std::int64_t row, Direction d) {
        if (row + row_step(d) >= z_.rows()) return;
        const std::int64_t first = column_step(d) < 0 ? 1 : 0;
        const std::int64_t end = z_.columns() - (column_step(d) > 0 ? 1 : 0);
        const Z* here = z_.row(row).data();
        const Z* there = z_.row(row + row_step(d)).data() + column_step(d);
        const double run = from_fixed(ground_.length(row, d));
        const double steeper = found_.slope * run / metres_per_unit_;
        for (std::int64_t column = first; column < end; ++column) {
            const double fall = static_cast<double>(here[column]) - static_cast<double>(there[column]);
            if (std::abs(fall) > steeper) take(row, column, d, fall);
        }
    }

    void take(std::int64_t row, std::int64_t column, Direction d, double fall) {
        const double slope = std::abs(fall) * metres_per_unit_ / from_fixed(ground_.length(row, d));
        if (!(slope > found_.slope)) return;
        const RowColumn upper = fall > 0 ? RowColumn{row, column} : neighbour({row, column}, d);
        found_ = {slope, static_cast<Cell>(upper.row * z_.columns() + upper.column)};
    }

    const Raster<Z>& z_;
    const Ground& ground_;
    double metres_per_unit_;
    SteepestPair found_;
};

}  // namespace

SteepestPair steepest_pair(const ElevationStore& elevations, const Ground& ground, double metres_per_unit, const Executor& executor) {
    const std::int64_t rows = elevations.rows();
    std::vector<SteepestPair> found(static_cast<std::size_t>((rows + band - 1) / band));
    executor.for_each(found.size(), [&](std::size_t i) {
        const std::int64_t first = static_cast<std::int64_t>(i) * band;
        found[i] = elevations.visit([&](const auto& z) {
            return ReliefSearch(z, ground, metres_per_unit).steepest(first, std::min(first + band, rows));
        });
    });
    // Of equal ones the first: bands are in the order of their rows.
    SteepestPair steepest;
    for (const SteepestPair& pair : found) {
        if (pair.slope > steepest.slope) steepest = pair;
    }
    return steepest;
}

}  // namespace rillclock
