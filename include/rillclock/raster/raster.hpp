#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/raster/grid.hpp"
#include "rillclock/raster/large_memory.hpp"

namespace rillclock {

/// Values of the cells of a grid, row by row from the north-west corner. What the values mean, and their unit, is said by whoever
/// holds the raster.
template <class T>
class Raster {
public:
    Raster() = default;
    /// All cells zero, or what a new T is.
    Raster(std::int64_t rows, std::int64_t columns) : rows_(rows), columns_(columns), values_(static_cast<std::size_t>(rows * columns)) {}
    Raster(std::int64_t rows, std::int64_t columns, T value)
        : rows_(rows), columns_(columns), values_(static_cast<std::size_t>(rows * columns), value) {}

    [[nodiscard]] std::int64_t rows() const { return rows_; }
    [[nodiscard]] std::int64_t columns() const { return columns_; }
    [[nodiscard]] std::int64_t size() const { return rows_ * columns_; }

    [[nodiscard]] T& operator[](Cell cell) { return values_[cell]; }
    [[nodiscard]] const T& operator[](Cell cell) const { return values_[cell]; }
    [[nodiscard]] T& operator()(std::int64_t row, std::int64_t column) {
        return values_[static_cast<std::size_t>(row * columns_ + column)];
    }
    [[nodiscard]] const T& operator()(std::int64_t row, std::int64_t column) const {
        return values_[static_cast<std::size_t>(row * columns_ + column)];
    }

    [[nodiscard]] std::span<T> values() { return values_; }
    [[nodiscard]] std::span<const T> values() const { return values_; }
    /// The cells of a row, from west to east.
    [[nodiscard]] std::span<T> row(std::int64_t r) {
        return std::span<T>(values_).subspan(static_cast<std::size_t>(r * columns_), static_cast<std::size_t>(columns_));
    }
    /// The cells of a row, from west to east.
    [[nodiscard]] std::span<const T> row(std::int64_t r) const {
        return std::span<const T>(values_).subspan(static_cast<std::size_t>(r * columns_),
                                                   static_cast<std::size_t>(columns_));
    }

    bool operator==(const Raster&) const = default;

private:
    std::int64_t rows_ = 0;
    std::int64_t columns_ = 0;
    std::vector<T, ZeroMemory<T>> values_;
};

}  // namespace rillclock
