#pragma once

namespace rillclock {

/// How a raster file keeps a number.
enum class StoredType { int8, uint8, int16, uint16, int32, uint32, float32, float64 };

/// Whether the type holds whole numbers alone.
[[nodiscard]] constexpr bool is_integer(StoredType type) {
    return type != StoredType::float32 && type != StoredType::float64;
}

}  // namespace rillclock
