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

#include "nearest_float.hpp"
#include "raster_writer.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Rows of the raster that belong to one row of blocks, until all their cells have come.
template <class T>
struct Strip {
    std::vector<T> values;
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
    if constexpr (std::is_floating_point_v<S>) return true;
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

template <class S>
void check_nodata(const RasterDescription& description, const std::filesystem::path& path) {
    if (description.nodata && !fits<S>(*description.nodata))
        throw bug("The nodata value of the raster " + path.string() + " does not fit its type");
}

template <class T>
class RasterSink : public BlockSink<T> {
public:
    RasterSink(const std::filesystem::path& path, const Grid& grid, const ReferenceSystem& system,
               const RasterDescription& description)
        : writer_(path, grid, system, description), grid_(grid), description_(description) {
        with_type(description.stored, [&](auto zero) { check_nodata<decltype(zero)>(description, path); });
    }

    void write(const Window& window, std::span<const T> values) override {
        check(window, values.size());
        const std::int64_t height = writer_.block_rows();
        for (std::int64_t r = 0; r < window.rows; ++r) {
            const std::int64_t row = window.row + r;
            Strip<T>& strip = strip_at(row / height);
            const auto from = values.begin() + r * window.columns;
            std::copy(from, from + window.columns, strip.values.begin() + row % height * grid_.columns + window.column);
            strip.missing -= window.columns;
        }
        while (!strips_.empty() && strips_.begin()->first == next_ && strips_.begin()->second.missing <= 0)
            flush_first();
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

    Strip<T>& strip_at(std::int64_t number) {
        Strip<T>& strip = strips_[number];
        if (strip.values.empty()) {
            const std::int64_t height = writer_.block_rows();
            strip.missing = std::min(height, grid_.rows - number * height) * grid_.columns;
            strip.values.resize(static_cast<std::size_t>(strip.missing));
        }
        return strip;
    }

    void flush_first() {
        const auto strip = strips_.begin();
        with_type(description_.stored, [&](auto zero) { write_as<decltype(zero)>(strip->second); });
        strips_.erase(strip);
        ++next_;
    }

    template <class S>
    void write_as(const Strip<T>& strip) {
        std::vector<S> stored(strip.values.size());
        std::transform(strip.values.begin(), strip.values.end(), stored.begin(),
                       [this](T value) { return this->template stored_value<S>(value); });
        count_statistics(std::span<const S>(stored));
        writer_.write_blocks(next_, std::as_bytes(std::span(stored)));
    }

    template <class S>
    [[nodiscard]] S stored_value(T value) const {
        if constexpr (std::is_floating_point_v<T>)
            if (std::isnan(value) && description_.nodata) return nodata_as<S>(*description_.nodata);
        if (!fits<S>(value))
            throw bug("The value " + std::to_string(value) + " does not fit the type of the raster " +
                      writer_.path().string());
        return static_cast<S>(value);
    }

    template <class S>
    void count_statistics(std::span<const S> values) {
        std::vector<double> counted;
        counted.reserve(values.size());
        for (const S value : values)
            if (!is_nodata(value) && std::isfinite(static_cast<double>(value)))
                counted.push_back(static_cast<double>(value));
        writer_.add_statistics(statistics_of(counted));
    }

    template <class S>
    [[nodiscard]] bool is_nodata(S value) const {
        return description_.nodata && value == nodata_as<S>(*description_.nodata);
    }

    RasterWriter writer_;
    Grid grid_;
    RasterDescription description_;
    std::map<std::int64_t, Strip<T>> strips_;
    std::int64_t next_ = 0;
};

}  // namespace

template <class T>
std::unique_ptr<BlockSink<T>> create_raster(const std::filesystem::path& path, const Grid& grid,
                                            const ReferenceSystem& system, const RasterDescription& description) {
    return std::make_unique<RasterSink<T>>(path, grid, system, description);
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
