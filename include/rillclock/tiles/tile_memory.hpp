#pragma once

#include <cstddef>
#include <memory_resource>
#include <vector>

#include "rillclock/raster/large_memory.hpp"

namespace rillclock {

/// The pool that tiles' arrays come from: huge pages, handed out again and again, kept until the program ends. Safe from several threads.
[[nodiscard]] std::pmr::memory_resource& tile_pool();

/// Memory for arrays of a tile's size, from `tile_pool`. There are a dozen such arrays a thread, used for tile after tile in no order
/// at all: on small pages the processor spends a fifth of its time looking pages up.
template <class T>
class TileMemory {
public:
    using value_type = T;

    TileMemory() = default;
    /// From that of another type; the pool is the same.
    template <class U>
    explicit(false) TileMemory(const TileMemory<U>&) {}

    /// Memory for so many values, from the pool where a tile's array fits it. Throws std::bad_alloc.
    [[nodiscard]] T* allocate(std::size_t count) {
        if (count > most_pooled / sizeof(T)) return LargeMemory<T>().allocate(count);
        return static_cast<T*>(tile_pool().allocate(count * sizeof(T)));
    }
    /// Gives back what `allocate` gave for the same count.
    void deallocate(T* memory, std::size_t count) {
        if (count > most_pooled / sizeof(T)) return LargeMemory<T>().deallocate(memory, count);
        tile_pool().deallocate(memory, count * sizeof(T));
    }

    bool operator==(const TileMemory&) const = default;

private:
    static constexpr std::size_t most_pooled = std::size_t{1} << 20U;
};

/// A value for each cell of a tile.
template <class T>
using TileValues = std::vector<T, TileMemory<T>>;

}  // namespace rillclock
