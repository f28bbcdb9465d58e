#pragma once

#include <pybind11/numpy.h>

#include <cstdint>
#include <utility>

#include "rillclock/core/quantity.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// One row after another of a two-dimensional NumPy array: where its items lie, however they are strided.
struct ArrayItems {
    const std::byte* first = nullptr;
    std::ptrdiff_t row_step = 0;      ///< bytes from one row to the next
    std::ptrdiff_t column_step = 0;

    [[nodiscard]] const std::byte* at(std::int64_t row, std::int64_t column) const { return first + row * row_step + column * column_step; }
};

/// A two-dimensional NumPy array of numbers as a source of blocks, read where it lies, without the interpreter's lock. Masked
/// items have no value.
template <class T>
class ArraySource final : public BlockSource<T> {
public:
    /// Reads the items of a window; `masked` are bytes that are not 0 where an item has no value, none where nothing is masked.
    using Reader = void (*)(const ArrayItems& items, const ArrayItems& masked, const Window& window, std::span<T> values);

    /// `mask`: an array of booleans of the same shape, or None.
    ArraySource(const pybind11::array& array, const pybind11::object& mask, Reader reader);

    [[nodiscard]] const Grid& grid() const override { return grid_; }
    void read(const Window& window, std::span<T> values) override { reader_(items_, masked_, window, values); }

    [[nodiscard]] bool is_whole() const { return array_.dtype().kind() != 'f'; }
    [[nodiscard]] std::int64_t item_size() const { return array_.itemsize(); }

private:
    pybind11::array array_;   ///< kept, so that the items stay
    pybind11::object mask_;
    Grid grid_;
    ArrayItems items_;
    ArrayItems masked_;
    Reader reader_;
};

/// Elevations from an array of whole or floating-point numbers, rows × columns from the north-west corner; NaN and masked items are void.
/// Throws an input error for another shape, no items, or another type.
[[nodiscard]] ArraySource<double> elevation_source(const pybind11::object& elevation);

/// Cover classes from an array of whole numbers of the elevations' shape, or from one whole number for all cells; masked items have no class.
/// Throws an input error for another shape or type; reading one throws where a class does not fit 32 bits.
[[nodiscard]] ArraySource<std::int32_t> cover_source(const pybind11::object& cover, const Grid& grid);

/// Width and height of a cell: a number of metres, a text such as "10 ft", or a pair of these. Throws an input error for anything else.
[[nodiscard]] std::pair<Length, Length> cell_sides(const pybind11::object& cell);

/// A raster as an array that owns it: nothing is copied.
template <class T>
[[nodiscard]] pybind11::array array_of(Raster<T>&& raster) {
    auto* kept = new Raster<T>(std::move(raster));   // the capsule deletes it
    const pybind11::capsule owner(kept, [](void* raster_again) { delete static_cast<Raster<T>*>(raster_again); });
    return pybind11::array_t<T>({kept->rows(), kept->columns()}, kept->values().data(), owner);
}

}  // namespace rillclock
