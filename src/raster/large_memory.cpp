#include "rillclock/raster/large_memory.hpp"

#include <sys/mman.h>

#include <cstdint>

namespace rillclock {

void ask_for_huge_pages(void* memory, std::size_t bytes) {
    constexpr std::uintptr_t page = 4096;
    const auto first = reinterpret_cast<std::uintptr_t>(memory);
    const std::uintptr_t begin = (first + page - 1) / page * page;
    const std::uintptr_t end = (first + bytes) / page * page;
    if (end > begin) madvise(reinterpret_cast<void*>(begin), end - begin, MADV_HUGEPAGE);
}

}  // namespace rillclock
