#include "rillclock/raster/ground.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"

namespace rillclock {

Ground Ground::planar(Length cell_width, Length cell_height) {
    const double width = in_metres(cell_width);
    const double height = in_metres(cell_height);
    if (!(width > 0 && height > 0)) throw bug("a grid was given cells without extent");
    return Ground({GroundRow{.east_west = to_fixed(width),
                             .south = to_fixed(height),
                             .diagonal = to_fixed(std::hypot(width, height)),
                             .area = to_fixed_area(width * height)}});
}

Ground Ground::by_row(std::vector<GroundRow> rows) {
    if (rows.empty()) throw bug("a ground table needs at least one row");
    return Ground(std::move(rows));
}

Ground Ground::with_steps_weighted(double weight) const {
    Ground weighted = *this;
    const auto scale = [weight](FixedLength& length) { length = to_fixed(weight * from_fixed(length)); };
    for (GroundRow& row : weighted.rows_) {
        scale(row.east_west);
        scale(row.south);
        scale(row.diagonal);
    }
    weighted.step_weight_ = weight * step_weight_;
    return weighted;
}

Length Ground::cell_side() const {
    const GroundRow& middle = rows_[rows_.size() / 2];
    return metres(from_fixed(std::min(middle.east_west, middle.south)));
}

}  // namespace rillclock
