#include "rillclock/terrain/elevation_store.hpp"

#include <algorithm>

namespace rillclock {
namespace {

/// Calls `copy(row of the raster, offset among the window's values)` for the stretch of each of the window's rows.
template <class RasterType, class Copy>
void for_each_stretch(RasterType& raster, const Window& window, Copy copy) {
    for (std::int64_t r = 0; r < window.rows; ++r) {
        copy(raster.row(window.row + r).subspan(static_cast<std::size_t>(window.column), static_cast<std::size_t>(window.columns)),
             static_cast<std::size_t>(r * window.columns));
    }
}

}  // namespace

ElevationStore::ElevationStore(std::int64_t rows, std::int64_t columns, Width width) : rows_(rows), columns_(columns) {
    if (width == Width::eight_bytes) values_ = Raster<double>(rows, columns);
    else values_ = Raster<float>(rows, columns);
}

void ElevationStore::put(Cell cell, double value) {
    if (auto* single = std::get_if<Raster<float>>(&values_)) (*single)[cell] = static_cast<float>(value);
    else std::get<Raster<double>>(values_)[cell] = value;
}

void ElevationStore::read(const Window& window, std::span<double> values) const {
    std::visit([&](const auto& raster) {
        for_each_stretch(raster, window, [&](auto stretch, std::size_t offset) {
            std::copy(stretch.begin(), stretch.end(), values.begin() + static_cast<std::ptrdiff_t>(offset));
        });
    }, values_);
}

void ElevationStore::write(const Window& window, std::span<const double> values) {
    std::visit([&](auto& raster) {
        using Kept = std::remove_cvref_t<decltype(raster[0])>;
        for_each_stretch(raster, window, [&](auto stretch, std::size_t offset) {
            for (std::size_t i = 0; i < stretch.size(); ++i) stretch[i] = static_cast<Kept>(values[offset + i]);
        });
    }, values_);
}

}  // namespace rillclock
