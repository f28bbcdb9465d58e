#pragma once

#include <cstdint>
#include <span>

#include "rillclock/raster/grid.hpp"

namespace rillclock {

/// A rectangle of cells.
struct Window {
    std::int64_t row = 0;
    std::int64_t column = 0;
    std::int64_t rows = 0;
    std::int64_t columns = 0;
    [[nodiscard]] std::int64_t size() const { return rows * columns; }
};

/// Where cell values come from: a file, a test's array, another program's memory. The core of the library sees rasters only so.
///
/// Instances: `double` elevations in the file's own unit (NaN where void), `std::int32_t` cover classes (`no_class` where
/// there is none).
template <class T>
class BlockSource {
public:
    BlockSource() = default;
    BlockSource(const BlockSource&) = delete;
    BlockSource& operator=(const BlockSource&) = delete;
    virtual ~BlockSource() = default;

    [[nodiscard]] virtual const Grid& grid() const = 0;
    /// Fills `values` (window.rows × window.columns, row by row) with the cells of a window that lies within the grid.
    /// Throws Error, naming the file and the window, where they cannot be read.
    virtual void read(const Window& window, std::span<T> values) = 0;
};

/// Where cell values go. Windows arrive in row-major order of the sink's own blocks and never twice.
template <class T>
class BlockSink {
public:
    BlockSink() = default;
    BlockSink(const BlockSink&) = delete;
    BlockSink& operator=(const BlockSink&) = delete;
    virtual ~BlockSink() = default;

    /// Takes the values of a window, row by row.
    virtual void write(const Window& window, std::span<const T> values) = 0;
    /// Ends the raster: flushes, adds what belongs to it (overviews, statistics), closes. Throws Error where anything since the
    /// start went wrong; a sink that is destroyed without `close` leaves nothing that counts as a result.
    virtual void close() = 0;
};

/// Cover class of a cell that has none.
inline constexpr std::int32_t no_class = INT32_MIN;

}  // namespace rillclock
