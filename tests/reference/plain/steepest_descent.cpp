#include "reference/plain/steepest_descent.hpp"

#include <cmath>

#include "inverse_lengths.hpp"

namespace rillclock {
namespace {

FlowCode steepest_way(const Elevations& z, Cell cell, const InverseLengths& inverse) {
    double steepest = 0.0;
    FlowCode code = flow_undecided;
    for_each_neighbour(z, cell, [&](Cell beside, Direction d) {
        // A void beside is NaN, and no comparison with it holds.
        const double steepness = (z[cell] - z[beside]) * inverse[static_cast<std::size_t>(d)];
        if (!(steepness > steepest)) return;
        steepest = steepness;
        code = flow_code(d);
    });
    return code;
}

}  // namespace

bool is_border(const Elevations& z, RowColumn at) {
    if (at.row == 0 || at.column == 0 || at.row == z.rows() - 1 || at.column == z.columns() - 1) return true;
    bool beside_void = false;
    for (const Direction d : all_directions) {
        const RowColumn beside = neighbour(at, d);
        beside_void = beside_void || std::isnan(z(beside.row, beside.column));
    }
    return beside_void;
}

Raster<FlowCode> steepest_descent(const Elevations& z, const Ground& ground) {
    Raster<FlowCode> codes(z.rows(), z.columns(), flow_void);
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        const InverseLengths inverse = inverse_lengths(ground, row);
        for (std::int64_t column = 0; column < z.columns(); ++column) {
            if (std::isnan(z(row, column))) continue;
            FlowCode code = steepest_way(z, static_cast<Cell>(row * z.columns() + column), inverse);
            const bool swallows = z(row, column) == swallowing_level;
            if (code == flow_undecided && (swallows || is_border(z, {row, column}))) code = flow_root;
            codes(row, column) = code;
        }
    }
    return codes;
}

}  // namespace rillclock
