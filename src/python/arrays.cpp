#include "arrays.hpp"

#include <cstring>
#include <limits>
#include <string>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/quantity_text.hpp"

namespace rillclock {

namespace py = pybind11;

namespace {

std::string shape_text(const py::array& array) { return py::str(array.attr("shape")); }
std::string type_text(const py::array& array) { return py::str(array.dtype()); }

/// The class of an item, which has to fit the codes of a cover book.
template <class Item>
std::int32_t class_from(Item item, std::int64_t row, std::int64_t column) {
    if (std::in_range<std::int32_t>(item) && std::cmp_not_equal(item, no_class)) return static_cast<std::int32_t>(item);
    throw input_error("cover holds " + std::to_string(item) + " at row " + std::to_string(row) + ", column " + std::to_string(column) +
                      "; a class is a whole number that fits 32 bits");
}

template <class T, class Item>
T value_from(Item item, std::int64_t row, std::int64_t column) {
    if constexpr (std::is_same_v<T, double>) return static_cast<double>(item);
    else return class_from(item, row, column);
}

template <class T>
constexpr T no_item() {
    if constexpr (std::is_same_v<T, double>) return std::numeric_limits<double>::quiet_NaN();
    else return no_class;
}

template <class T, class Item>
void read_items(const ArrayItems& items, const ArrayItems& masked, const Window& window, std::span<T> values) {
    std::size_t at = 0;
    for (std::int64_t row = window.row; row < window.row + window.rows; ++row) {
        for (std::int64_t column = window.column; column < window.column + window.columns; ++column, ++at) {
            const bool is_masked = masked.first != nullptr && *masked.at(row, column) != std::byte{0};
            Item item{};
            std::memcpy(&item, items.at(row, column), sizeof(Item));
            values[at] = is_masked ? no_item<T>() : value_from<T>(item, row, column);
        }
    }
}

/// How items of a type are read; null for types that are not served.
template <class T>
typename ArraySource<T>::Reader reader_of(const py::array& array) {
    const char kind = array.dtype().kind();
    const py::ssize_t size = array.itemsize();
    if (kind == 'i') {
        if (size == 1) return &read_items<T, std::int8_t>;
        if (size == 2) return &read_items<T, std::int16_t>;
        if (size == 4) return &read_items<T, std::int32_t>;
        if (size == 8) return &read_items<T, std::int64_t>;
    }
    if (kind == 'u') {
        if (size == 1) return &read_items<T, std::uint8_t>;
        if (size == 2) return &read_items<T, std::uint16_t>;
        if (size == 4) return &read_items<T, std::uint32_t>;
        if (size == 8) return &read_items<T, std::uint64_t>;
    }
    if constexpr (std::is_same_v<T, double>) {
        if (kind == 'f' && size == 4) return &read_items<T, float>;
        if (kind == 'f' && size == 8) return &read_items<T, double>;
    }
    return nullptr;
}

ArrayItems items_of(const py::array& array) {
    return {.first = static_cast<const std::byte*>(array.data()), .row_step = array.strides(0), .column_step = array.strides(1)};
}

py::object numpy() { return py::module_::import("numpy"); }

/// What was given as an array, with its mask where it has one.
struct GivenArray {
    py::array items;   ///< in this machine's order of bytes
    py::object mask = py::none();

    explicit GivenArray(const py::object& given) {
        const py::object array = numpy().attr("asanyarray")(given);
        const py::object masks = numpy().attr("ma");
        if (py::isinstance(array, masks.attr("MaskedArray"))) mask = masks.attr("getmaskarray")(array);
        items = numpy().attr("asarray")(array).cast<py::array>();
        const py::object type = items.dtype();
        if (!type.attr("isnative").cast<bool>()) items = items.attr("astype")(type.attr("newbyteorder")("=")).cast<py::array>();
    }
};

void require_plane(const py::array& array, const char* name) {
    if (array.ndim() == 2 && array.size() > 0) return;
    throw input_error(std::string(name) + " has the shape " + shape_text(array) + "; give an array of rows × columns with at least one cell");
}

}  // namespace

template <class T>
ArraySource<T>::ArraySource(const py::array& array, const py::object& mask, Reader reader)
    : array_(array), mask_(mask), grid_{.rows = array.shape(0), .columns = array.shape(1), .top = static_cast<double>(array.shape(0))},
      items_(items_of(array)), reader_(reader) {
    if (!mask.is_none()) masked_ = items_of(mask.cast<py::array>());
}

ArraySource<double> elevation_source(const py::object& elevation) {
    const GivenArray given(elevation);
    const auto reader = reader_of<double>(given.items);
    if (reader == nullptr) {
        throw input_error("elevation has the type " + type_text(given.items) +
                          "; give float32, float64 or whole numbers, such as elevation.astype('float32')");
    }
    require_plane(given.items, "elevation");
    return {given.items, given.mask, reader};
}

ArraySource<std::int32_t> cover_source(const py::object& cover, const Grid& grid) {
    GivenArray given(cover);
    const auto reader = reader_of<std::int32_t>(given.items);
    if (reader == nullptr) {
        throw input_error("cover has the type " + type_text(given.items) +
                          "; give whole numbers, the codes of its classes, such as cover.astype('int32')");
    }
    if (given.items.ndim() == 0 && given.mask.is_none()) {
        given.items = numpy().attr("broadcast_to")(given.items, py::make_tuple(grid.rows, grid.columns)).cast<py::array>();
    }
    require_plane(given.items, "cover");
    return {given.items, given.mask, reader};
}

namespace {

Length side_of(const py::handle& given) {
    if (py::isinstance<py::str>(given)) return length_from_text(given.cast<std::string>(), {.subject = "cell", .example = "5 m"});
    const double side_m = py::isinstance<py::bool_>(given) ? 0.0 : PyFloat_AsDouble(given.ptr());
    const bool is_number = PyErr_Occurred() == nullptr && !py::isinstance<py::bool_>(given);
    PyErr_Clear();
    if (!is_number) throw input_error("cell is " + std::string(py::repr(given)) + "; give metres, a text such as \"10 ft\", or a pair of them");
    return metres(side_m);
}

}  // namespace

std::pair<Length, Length> cell_sides(const py::object& cell) {
    const bool is_pair = (py::isinstance<py::tuple>(cell) || py::isinstance<py::list>(cell)) && py::len(cell) == 2;
    if (!is_pair) {
        const Length side = side_of(cell);
        return {side, side};
    }
    const auto pair = py::reinterpret_borrow<py::sequence>(cell);
    return {side_of(pair[0]), side_of(pair[1])};
}

}  // namespace rillclock
