#include "rillclock/raster/large_memory.hpp"

#include <sys/mman.h>

#include <algorithm>
#include <cstdint>
#include <cstdlib>

namespace rillclock {
namespace {

std::size_t whole_pages(std::size_t bytes) {
    constexpr std::size_t page = 4096;
    return (bytes + page - 1) / page * page;
}

}  // namespace

void ask_for_huge_pages(void* memory, std::size_t bytes) {
    constexpr std::uintptr_t page = 4096;
    const auto first = reinterpret_cast<std::uintptr_t>(memory);
    const std::uintptr_t begin = (first + page - 1) / page * page;
    const std::uintptr_t end = (first + bytes) / page * page;
    if (end > begin) madvise(reinterpret_cast<void*>(begin), end - begin, MADV_HUGEPAGE);
}

void* allocate_zeros(std::size_t bytes) {
    if (bytes < huge_page) {
        void* const memory = std::calloc(std::max<std::size_t>(bytes, 1), 1);
        if (memory == nullptr) throw std::bad_alloc();
        return memory;
    }
    // Pages fresh from the system are zero. To begin on a huge page, more is asked for and the ends are given back.
    const std::size_t size = whole_pages(bytes);
    void* const mapped = mmap(nullptr, size + huge_page, PROT_READ | PROT_WRITE, MAP_PRIVATE | MAP_ANONYMOUS, -1, 0);
    if (mapped == MAP_FAILED) throw std::bad_alloc();
    const auto first = reinterpret_cast<std::uintptr_t>(mapped);
    const std::uintptr_t begin = (first + huge_page - 1) / huge_page * huge_page;
    if (begin > first) munmap(mapped, begin - first);
    if (first + huge_page > begin) munmap(reinterpret_cast<void*>(begin + size), first + huge_page - begin);
    ask_for_huge_pages(reinterpret_cast<void*>(begin), size);
    return reinterpret_cast<void*>(begin);
}

void deallocate_zeros(void* memory, std::size_t bytes) noexcept {
    if (bytes < huge_page) std::free(memory);
    else munmap(memory, whole_pages(bytes));
}

}  // namespace rillclock
