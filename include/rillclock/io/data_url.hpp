#pragma once

#include <array>
#include <cstdint>
#include <string>
#include <string_view>
#include <vector>

namespace rillclock {

/// Bytes as text of 64 letters (RFC 4648).
[[nodiscard]] std::string base64(std::string_view bytes);

/// What a content security policy calls a text by: "sha256-" and its checksum.
[[nodiscard]] std::string policy_hash(std::string_view text);

/// An image of at most 256 colours, row by row from the north-west corner.
struct PaletteImage {
    std::int64_t rows = 0;
    std::int64_t columns = 0;
    std::vector<std::uint8_t> values;                    ///< places in the palette
    std::vector<std::array<std::uint8_t, 4>> palette;    ///< red, green, blue, opacity
};

/// The image as a PNG file's bytes, the same every time. Throws Error (machine) where GDAL cannot make it.
[[nodiscard]] std::string palette_png(const PaletteImage& image);

}  // namespace rillclock
