#pragma once

#include <filesystem>
#include <memory>

#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock {

/// A raster of figures that a run has written, opened again.
struct ValueRaster {
    std::unique_ptr<BlockSource<double>> source;   ///< NaN where it has no value
    ReferenceSystem system;

    [[nodiscard]] const Grid& grid() const { return source->grid(); }
};

/// Opens the first band. Throws Error (inputs) where the file is missing or is no raster that can be used.
[[nodiscard]] ValueRaster open_values(const std::filesystem::path& path);

}  // namespace rillclock
