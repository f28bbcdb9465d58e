#include "land_row.hpp"

#include "rillclock/core/vectorised.hpp"

namespace rillclock {
namespace {

template <class Z>
[[gnu::always_inline]] inline void fill_slopes(const RowsAround<Z>& around, std::int64_t column, std::span<double> slopes) {
    const RowsAround<Z> rows = around;   // so that the compiler knows that writing slopes does not change it
    const Z* const at = rows.at + column;
    const Z* const above = rows.above + column;
    const Z* const below = rows.below + column;
    double* const __restrict found = slopes.data();
    const auto count = static_cast<std::int64_t>(slopes.size());
    for (std::int64_t i = 0; i < count; ++i) {
        const auto here = static_cast<double>(at[i]);
        const auto rise = [here](Z z) { return static_cast<double>(z) - here; };
        found[i] = rows.slope_between(rows.side(rise(at[i + 1]), rows.beside_m), rows.side(rise(at[i - 1]), rows.beside_m),
                                      rows.side(rise(below[i]), rows.below_m), rows.side(rise(above[i]), rows.above_m));
    }
}

}  // namespace

RILLCLOCK_VECTORISED
void slopes_inside(const RowsAround<float>& rows, std::int64_t column, std::span<double> found) { fill_slopes(rows, column, found); }
RILLCLOCK_VECTORISED
void slopes_inside(const RowsAround<double>& rows, std::int64_t column, std::span<double> found) { fill_slopes(rows, column, found); }

}  // namespace rillclock
