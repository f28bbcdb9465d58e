#pragma once

#include <cstdint>
#include <span>
#include <variant>

#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"

namespace rillclock {

/// Elevations kept as narrowly as their file's type allows without losing a bit: 4 bytes a cell where single precision holds every
/// value (floating point of 32 bits, integers of up to 16), else 8. NaN where void. What computes sees double precision.
class ElevationStore {
public:
    /// Bytes that a cell takes.
    enum class Width { four_bytes, eight_bytes };

    ElevationStore(std::int64_t rows, std::int64_t columns, Width width);

    [[nodiscard]] std::int64_t rows() const { return rows_; }
    [[nodiscard]] std::int64_t columns() const { return columns_; }
    [[nodiscard]] Width width() const { return values_.index() == 0 ? Width::four_bytes : Width::eight_bytes; }
    [[nodiscard]] double operator[](Cell cell) const {
        const auto* single = std::get_if<Raster<float>>(&values_);
        return single != nullptr ? static_cast<double>((*single)[cell]) : std::get<Raster<double>>(values_)[cell];
    }
    /// Sets one cell, to a value that the width holds exactly.
    void put(Cell cell, double value);
    /// The values of a window, row by row; NaN where void.
    void read(const Window& window, std::span<double> values) const;
    /// Every value must be one that the width holds exactly.
    void write(const Window& window, std::span<const double> values);

    /// Calls `use` with the raster itself, a Raster<float> or a Raster<double>.
    template <class Use>
    decltype(auto) visit(Use use) const {
        return std::visit(use, values_);
    }

private:
    std::int64_t rows_;
    std::int64_t columns_;
    std::variant<Raster<float>, Raster<double>> values_;
};

}  // namespace rillclock
