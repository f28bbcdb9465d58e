#include "land_row.hpp"

#include "rillclock/core/vectorised.hpp"

namespace rillclock {
namespace {

template <class Z>
[[gnu::always_inline]] inline void fill_slopes(const RowsAround<Z>& around, std::int64_t column, double* __restrict found, std::int64_t count) {
    const RowsAround<Z> rows = around;   // so that the compiler knows that writing slopes does not change it
    const Z* const at = rows.at + column;
    const Z* const above = rows.above + column;
    const Z* const below = rows.below + column;
    for (std::int64_t i = 0; i < count; ++i) {
        const auto here = static_cast<double>(at[i]);
        const auto rise = [here](Z z) { return static_cast<double>(z) - here; };
        found[i] = rows.slope_between(rows.side(rise(at[i + 1]), rows.beside_m), rows.side(rise(at[i - 1]), rows.beside_m),
                                      rows.side(rise(below[i]), rows.below_m), rows.side(rise(above[i]), rows.above_m));
    }
}

RILLCLOCK_VECTORISED
void fill_single(const RowsAround<float>& rows, std::int64_t column, double* found, std::int64_t count) {
    fill_slopes(rows, column, found, count);
}
RILLCLOCK_VECTORISED
void fill_wide(const RowsAround<double>& rows, std::int64_t column, double* found, std::int64_t count) {
    fill_slopes(rows, column, found, count);
}

}  // namespace

void slopes_inside(const RowsAround<float>& rows, std::int64_t column, std::span<double> found) {
    fill_single(rows, column, found.data(), static_cast<std::int64_t>(found.size()));
}
void slopes_inside(const RowsAround<double>& rows, std::int64_t column, std::span<double> found) {
    fill_wide(rows, column, found.data(), static_cast<std::int64_t>(found.size()));
}

}  // namespace rillclock
