#include "rillclock/tiles/tile_memory.hpp"

namespace rillclock {
namespace {

constexpr std::size_t block = std::size_t{16} << 20U;

/// Takes memory from the system, on huge pages.
class HugePages : public std::pmr::memory_resource {
    void* do_allocate(std::size_t bytes, std::size_t) override { return LargeMemory<std::byte>().allocate(bytes); }
    void do_deallocate(void* memory, std::size_t bytes, std::size_t) override {
        LargeMemory<std::byte>().deallocate(static_cast<std::byte*>(memory), bytes);
    }
    [[nodiscard]] bool do_is_equal(const memory_resource& other) const noexcept override { return this == &other; }
};

struct Pool {
    HugePages pages;
    std::pmr::monotonic_buffer_resource blocks{block, &pages};
    std::pmr::synchronized_pool_resource arrays{{.max_blocks_per_chunk = 4, .largest_required_pool_block = std::size_t{1} << 20U}, &blocks};
};

}  // namespace

std::pmr::memory_resource& tile_pool() {
    static Pool& pool = *new Pool;  // outlives whatever is destroyed at the end of the program
    return pool.arrays;
}

}  // namespace rillclock
