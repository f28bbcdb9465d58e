#pragma once

#include <cstddef>
#include <new>
#include <type_traits>
#include <utility>

namespace rillclock {

/// Bytes of a huge page.
inline constexpr std::size_t huge_page = std::size_t{1} << 21U;

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
};

/// Memory of so many bytes that is zero without having been touched, on huge pages where there are enough of them. Throws std::bad_alloc.
[[nodiscard]] void* allocate_zeros(std::size_t bytes);
/// Gives back what `allocate_zeros` gave for the same number.
void deallocate_zeros(void* memory, std::size_t bytes) noexcept;

/// Memory for arrays of numbers that are made once, begin as zeros and never change their size: the pages are first touched by whichever
/// thread first writes a cell, and not one after the other by the thread that makes the array.
template <class T>
class ZeroMemory {
public:
    using value_type = T;
    /// Whether zeros are what a new value is.
    static constexpr bool serves = std::is_arithmetic_v<T> || std::is_enum_v<T>;

    ZeroMemory() = default;
    /// From that of another type; no memory is shared.
    template <class U>
    explicit(false) ZeroMemory(const ZeroMemory<U>&) {}

    /// Memory for so many values, all zero where it serves them. Throws std::bad_alloc.
    [[nodiscard]] T* allocate(std::size_t count) {
        if (count > static_cast<std::size_t>(-1) / sizeof(T)) throw std::bad_array_new_length();
        return static_cast<T*>(allocate_zeros(count * sizeof(T)));
    }
    /// Gives back what `allocate` gave for the same count.
    void deallocate(T* memory, std::size_t count) noexcept { deallocate_zeros(memory, count * sizeof(T)); }

    /// Makes a value: one that is nothing but zero is there already.
    template <class U, class... Arguments>
    void construct(U* place, Arguments&&... arguments) {
        if constexpr (sizeof...(Arguments) > 0 || !serves) ::new (static_cast<void*>(place)) U(std::forward<Arguments>(arguments)...);
    }

    bool operator==(const ZeroMemory&) const = default;
};

}  // namespace rillclock
