#include "tile_descent.hpp"

#include <cmath>
#include <cstring>

#include "inverse_lengths.hpp"
#include "rillclock/core/vectorised.hpp"

namespace rillclock {
namespace {

/// The codes of a row: the first of the steepest falls, `flow_undecided` where there is none. `here` points to the
/// row's first cell, `above` and `below` to those north and south of it.
template <class Z>
[[gnu::always_inline]] inline void steepest_in_row(const Z* above, const Z* here, const Z* below,
                                                   const InverseLengths& lengths, FlowCode* codes,
                                                   std::int64_t columns) {
    const InverseLengths inverse = lengths;
    for (std::int64_t i = 0; i < columns; ++i) {
        const double own = here[i];
        double steepest = 0.0;
        // As wide as a fall, so that both are selected by one comparison.
        std::int64_t code = flow_undecided;
        const auto ask = [&](Direction d, Z beside) {
            const double fall = (own - static_cast<double>(beside)) * inverse[static_cast<std::size_t>(d)];
            const bool steeper = fall > steepest;
            steepest = steeper ? fall : steepest;
            code = steeper ? std::int64_t{flow_code(d)} : code;
        };
        ask(Direction::north, above[i]);
        ask(Direction::north_east, above[i + 1]);
        ask(Direction::east, here[i + 1]);
        ask(Direction::south_east, below[i + 1]);
        ask(Direction::south, below[i]);
        ask(Direction::south_west, below[i - 1]);
        ask(Direction::west, here[i - 1]);
        ask(Direction::north_west, above[i - 1]);
        codes[i] = static_cast<FlowCode>(code);
    }
}

RILLCLOCK_VECTORISED
void steepest_of_row(const float* above, const float* here, const float* below, const InverseLengths& inverse,
                     FlowCode* __restrict codes, std::int64_t columns) {
    steepest_in_row(above, here, below, inverse, codes, columns);
}
RILLCLOCK_VECTORISED
void steepest_of_row(const double* above, const double* here, const double* below, const InverseLengths& inverse,
                     FlowCode* __restrict codes, std::int64_t columns) {
    steepest_in_row(above, here, below, inverse, codes, columns);
}

template <class Z>
[[gnu::always_inline]] inline bool is_missing_in(const Z* values, std::int64_t count) {
    std::int32_t missing = 0;
    for (std::int64_t i = 0; i < count; ++i) missing |= static_cast<std::int32_t>(std::isnan(values[i]));
    return missing != 0;
}

RILLCLOCK_VECTORISED
bool has_void(const float* values, std::int64_t count) {
    return is_missing_in(values, count);
}
RILLCLOCK_VECTORISED
bool has_void(const double* values, std::int64_t count) {
    return is_missing_in(values, count);
}

/// Decides what the steepest fall could not: voids, and cells where water leaves the data or is swallowed. Returns
/// whether a cell lies level with a neighbour and is undecided still.
template <class Z>
bool look_again(const Patch<Z>& z, Position first, Position last, bool voids_near, Patch<FlowCode>& codes) {
    bool level = false;
    for (Position p = first; p < last; ++p) {
        const void* found = std::memchr(&codes[p], flow_undecided, last - p);
        if (found == nullptr) break;
        p += static_cast<Position>(static_cast<const FlowCode*>(found) - &codes[p]);
        if (voids_near && std::isnan(z[p])) {
            codes[p] = flow_void;
        } else if (static_cast<double>(z[p]) == swallowing_level || (voids_near && !is_surrounded(z, p))) {
            codes[p] = flow_root;
        } else {
            level = level || has_level_neighbour(z, p);
        }
    }
    return level;
}

}  // namespace

template <class Z>
std::vector<bool> rows_with_voids(const Patch<Z>& z) {
    const PatchShape& shape = z.shape();
    std::vector<bool> rows(static_cast<std::size_t>(shape.rows() + 2));
    for (std::int64_t row = -1; row <= shape.rows(); ++row) {
        rows[static_cast<std::size_t>(row + 1)] = has_void(z.at(row, -1), shape.columns() + 2);
    }
    return rows;
}

template <class Z>
bool descend_in_tile(const Patch<Z>& z, const Ground& ground, Patch<FlowCode>& codes) {
    const PatchShape& shape = z.shape();
    const std::vector<bool> voids = rows_with_voids(z);
    codes.resize(shape, flow_void);
    bool level = false;
    for (std::int64_t row = 0; row < shape.rows(); ++row) {
        steepest_of_row(z.at(row - 1, 0), z.at(row, 0), z.at(row + 1, 0),
                        inverse_lengths(ground, shape.window().row + row), codes.at(row, 0), shape.columns());
        const auto r = static_cast<std::size_t>(row);
        const bool voids_near = voids[r] || voids[r + 1] || voids[r + 2];
        level |= look_again(z, shape.position(row, 0), shape.position(row, shape.columns()), voids_near, codes);
    }
    return level;
}

template std::vector<bool> rows_with_voids(const Patch<float>&);
template std::vector<bool> rows_with_voids(const Patch<double>&);
template bool descend_in_tile(const Patch<float>&, const Ground&, Patch<FlowCode>&);
template bool descend_in_tile(const Patch<double>&, const Ground&, Patch<FlowCode>&);

}  // namespace rillclock
