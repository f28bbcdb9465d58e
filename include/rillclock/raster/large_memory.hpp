#pragma once

#include <cstddef>
#include <new>

namespace rillclock {

/// Asks the system for huge pages under memory that has not been written yet. It is advice: a refusal changes nothing but speed.
void ask_for_huge_pages(void* memory, std::size_t bytes);

/// Memory for arrays of a raster's size: asks the system for huge pages where there is much of it, since the first touch of a small
/// page costs more than the work on its cells. Where the system has none, it is memory as any other.
template <class T>
class LargeMemory {
public:
    using value_type = T;

    LargeMemory() = default;
    /// From that of another type; no memory is shared.
    template <class U>
    explicit(false) LargeMemory(const LargeMemory<U>&) {}

    /// Memory for so many values, on huge pages where there are enough of them. Throws std::bad_alloc.
    [[nodiscard]] T* allocate(std::size_t count) {
        if (count > static_cast<std::size_t>(-1) / sizeof(T)) throw std::bad_array_new_length();
        const std::size_t bytes = count * sizeof(T);
        if (bytes < huge_page) return static_cast<T*>(::operator new(bytes, std::align_val_t{alignof(std::max_align_t)}));
        void* const memory = ::operator new(bytes, std::align_val_t{huge_page});
        ask_for_huge_pages(memory, bytes);
        return static_cast<T*>(memory);
    }
    /// Gives back what `allocate` gave for the same count.
    void deallocate(T* memory, std::size_t count) {
        const std::size_t alignment = count * sizeof(T) < huge_page ? alignof(std::max_align_t) : huge_page;
        ::operator delete(memory, std::align_val_t{alignment});
    }

    bool operator==(const LargeMemory&) const = default;

private:
    static constexpr std::size_t huge_page = std::size_t{1} << 21U;
};

}  // namespace rillclock
