#include "rillclock/io/raster_output.hpp"

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <limits>
#include <map>
#include <span>
#include <string>
#include <type_traits>
#include <vector>

#include "coarser_rows.hpp"
#include "nearest_float.hpp"
#include "raster_writer.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Rows of the raster that belong to one row of blocks, until all their cells have come.
template <class S>
struct Strip {
    std::vector<S> values;
    std::int64_t missing = 0;
};

/// Calls `action` with a zero of the type that a file stores.
template <class Action>
void with_type(StoredType type, const Action& action) {
    switch (type) {
        case StoredType::int8:
            return action(std::int8_t{});
        case StoredType::uint8:
            return action(std::uint8_t{});
        case StoredType::int16:
            return action(std::int16_t{});
        case StoredType::uint16:
            return action(std::uint16_t{});
        case StoredType::int32:
            return action(std::int32_t{});
        case StoredType::uint32:
            return action(std::uint32_t{});
        case StoredType::float32:
            return action(float{});
        case StoredType::float64:
            return action(double{});
    }
}

template <class S, class T>
bool fits(T value) {
    if constexpr (std::is_floating_point_v<S> || std::is_same_v<S, T>) return true;
    const auto wide = static_cast<double>(value);
    return wide >= static_cast<double>(std::numeric_limits<S>::min()) &&
           wide <= static_cast<double>(std::numeric_limits<S>::max()) && wide == std::floor(wide);
}

/// A nodata value in the type that a file stores.
template <class S>
S nodata_as(double nodata) {
    if constexpr (std::is_same_v<S, float>) return nearest_float(nodata);
    return static_cast<S>(nodata);
}

/// The nodata value that a description states, in the type that the file stores.
template <class S>
std::optional<S> stored_nodata(const RasterDescription& description, const std::filesystem::path& path) {
    if (!description.nodata) return std::nullopt;
    if (!fits<S>(*description.nodata))
        throw bug("The nodata value of the raster " + path.string() + " does not fit its type");
    return nodata_as<S>(*description.nodata);
}

/// Takes values as T, stores them as S.
template <class T, class S>
class RasterSink : public BlockSink<T> {
public:
    RasterSink(const std::filesystem::path& path, const Grid& grid, const ReferenceSystem& system,
               const RasterDescription& description)
        : nodata_(stored_nodata<S>(description, path)), writer_(path, grid, system, description), grid_(grid),
          levels_(writer_, description.overviews, nodata_) {}

    void write(const Window& window, std::span<const T> values) override {
        check(window, values.size());
        if (is_next_row_of_blocks(window)) leave(values);
        else gather(window, values);
        while (!strips_.empty() && strips_.begin()->first == next_ && strips_.begin()->second.missing <= 0) {
            leave_stored(strips_.begin()->second.values);
            strips_.erase(strips_.begin());
        }
    }

    void close() override {
        if (!strips_.empty() || next_ * writer_.block_rows() < grid_.rows)
            throw bug("The raster " + writer_.path().string() + " was closed before all of its cells were written");
        writer_.close();
    }

private:
    void check(const Window& window, std::size_t count) const {
        const bool is_inside = window.row >= 0 && window.column >= 0 && window.row + window.rows <= grid_.rows &&
                               window.column + window.columns <= grid_.columns;
        if (!is_inside || static_cast<std::size_t>(window.size()) != count)
            throw bug("A window written to " + writer_.path().string() +
                      " lies outside it or has another number of values");
        if (window.row < next_ * writer_.block_rows())
            throw bug("A window was written to " + writer_.path().string() + " twice");
    }

    [[nodiscard]] std::int64_t rows_of(std::int64_t strip) const {
        return std::min(writer_.block_rows(), grid_.rows - strip * writer_.block_rows());
    }
    [[nodiscard]] bool is_next_row_of_blocks(const Window& window) const {
        return strips_.empty() && window.columns == grid_.columns && window.row == next_ * writer_.block_rows() &&
               window.rows == rows_of(next_);
    }

    /// Hands a whole row of blocks on, as it came where it is stored as it came.
    void leave(std::span<const T> values) {
        if constexpr (std::is_same_v<T, S> && !std::is_floating_point_v<T>) {
            leave_stored(values);
        } else {
            room_.resize(values.size());
            std::transform(values.begin(), values.end(), room_.begin(), [this](T value) { return stored_value(value); });
            leave_stored(room_);
        }
    }

    void leave_stored(std::span<const S> values) {
        writer_.add_statistics(statistics_of(values, nodata_));
        levels_.add(values);
        ++next_;
    }

    void gather(const Window& window, std::span<const T> values) {
        const std::int64_t height = writer_.block_rows();
        for (std::int64_t r = 0; r < window.rows; ++r) {
            const std::int64_t row = window.row + r;
            Strip<S>& strip = strip_at(row / height);
            const auto from = values.begin() + r * window.columns;
            std::transform(from, from + window.columns, strip.values.begin() + row % height * grid_.columns + window.column,
                           [this](T value) { return stored_value(value); });
            strip.missing -= window.columns;
        }
    }

    Strip<S>& strip_at(std::int64_t number) {
        Strip<S>& strip = strips_[number];
        if (strip.values.empty()) {
            strip.missing = rows_of(number) * grid_.columns;
            strip.values.resize(static_cast<std::size_t>(strip.missing));
        }
        return strip;
    }

    [[nodiscard]] S stored_value(T value) const {
        if constexpr (std::is_floating_point_v<T>)
            if (std::isnan(value) && nodata_) return *nodata_;
        if (!fits<S>(value))
            throw bug("The value " + std::to_string(value) + " does not fit the type of the raster " +
                      writer_.path().string());
        return static_cast<S>(value);
    }

    std::optional<S> nodata_;
    RasterWriter writer_;
    Grid grid_;
    CoarserRows<S> levels_;
    std::vector<S> room_;
    std::map<std::int64_t, Strip<S>> strips_;
    std::int64_t next_ = 0;
};

}  // namespace

template <class T>
std::unique_ptr<BlockSink<T>> create_raster(const std::filesystem::path& path, const Grid& grid,
                                            const ReferenceSystem& system, const RasterDescription& description) {
    std::unique_ptr<BlockSink<T>> sink;
    with_type(description.stored, [&](auto zero) {
        sink = std::make_unique<RasterSink<T, decltype(zero)>>(path, grid, system, description);
    });
    return sink;
}

#define RILLCLOCK_INSTANCE(T)                                                                          \
    template std::unique_ptr<BlockSink<T>> create_raster<T>(const std::filesystem::path&, const Grid&, \
                                                            const ReferenceSystem&, const RasterDescription&);
RILLCLOCK_INSTANCE(double)
RILLCLOCK_INSTANCE(float)
RILLCLOCK_INSTANCE(std::uint8_t)
RILLCLOCK_INSTANCE(std::uint16_t)
RILLCLOCK_INSTANCE(std::uint32_t)
RILLCLOCK_INSTANCE(std::int32_t)
#undef RILLCLOCK_INSTANCE

}  // namespace rillclock
