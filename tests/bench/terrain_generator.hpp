#pragma once

#include <optional>
#include <string_view>

#include "bench/smooth_noise.hpp"
#include "rillclock/raster/blocks.hpp"
#include "rillclock/raster/raster.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock::bench {

/// The terrains on which speed is measured; they differ in what is hard about them.
enum class TerrainKind {
    fractal,    ///< hills of all sizes under the noise that lidar has: a pit in about every fiftieth cell
    quantised,  ///< smooth hills kept to 0.1 m: about a quarter of the cells has no lower neighbour
    integers    ///< smooth hills kept to whole metres: mostly flats
};

[[nodiscard]] std::string_view name_of(TerrainKind kind);
[[nodiscard]] std::optional<TerrainKind> terrain_kind(std::string_view name);

/// An endless invented terrain of 1 m cells, elevations in metres between 100 and 1000.
///
/// Promise: a cell's elevation follows from kind, seed, row and column alone, bit for bit on every machine; so rasters
/// of any size can be made strip by strip, on any number of threads, and a small raster is the corner of a larger one.
class TerrainGenerator {
public:
    explicit TerrainGenerator(TerrainKind kind, std::uint32_t seed = 1);

    /// Writes the elevations of a window, row by row.
    void fill(const Window& window, std::span<float> elevations) const;

private:
    void finish_row(std::int64_t row, std::int64_t column, std::span<float> elevations) const;

    TerrainKind kind_;
    std::uint32_t seed_;
    FractalNoise hills_;
};

/// Land cover in patches of some hundred metres, by codes of the National Land Cover Database, for the same plane.
class CoverGenerator {
public:
    explicit CoverGenerator(std::uint32_t seed = 1);

    /// Writes the codes of a window, row by row.
    void fill(const Window& window, std::span<std::uint8_t> codes) const;

private:
    FractalNoise wetness_;
    FractalNoise use_;
};

/// Makes the rows of a window on all threads.
template <class Generator, class T>
void fill_on_threads(const Generator& generator, const Window& window, std::span<T> values, const Executor& executor) {
    const auto columns = static_cast<std::size_t>(window.columns);
    executor.for_each(static_cast<std::size_t>(window.rows), [&](std::size_t r) {
        const Window row{.row = window.row + static_cast<std::int64_t>(r),
                         .column = window.column,
                         .rows = 1,
                         .columns = window.columns};
        generator.fill(row, values.subspan(r * columns, columns));
    });
}

/// A whole terrain in memory.
[[nodiscard]] Raster<float> terrain_raster(const TerrainGenerator& generator, std::int64_t rows, std::int64_t columns,
                                           const Executor& executor);

}  // namespace rillclock::bench
