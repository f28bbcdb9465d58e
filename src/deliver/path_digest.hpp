#pragma once

#include <cstdint>
#include <span>
#include <string>

#include "rillclock/catchment/outlet.hpp"

namespace rillclock {

/// A number of 16 hexadecimal digits for the cells of a path in their order, by which two results on one grid tell whether a path is the same:
/// other cells have another, but for a chance of 2^-64. FNV-1a of 64 bits over the cells' places, lowest byte first (Fowler, Noll and Vo,
/// value from memory). Cost: linear in the cells.
[[nodiscard]] inline std::string path_digest(std::span<const Cell> cells) {
    constexpr std::uint64_t offset_basis = 14695981039346656037U;
    constexpr std::uint64_t prime = 1099511628211U;
    std::uint64_t digest = offset_basis;
    for (const Cell cell : cells) {
        for (unsigned shift = 0; shift < 64; shift += 8) digest = (digest ^ ((static_cast<std::uint64_t>(cell) >> shift) & 0xFFU)) * prime;
    }
    std::string text(16, '0');
    for (std::size_t digit = 0; digit < text.size(); ++digit) text[text.size() - 1 - digit] = "0123456789abcdef"[(digest >> (4 * digit)) & 0xFU];
    return text;
}

}  // namespace rillclock
