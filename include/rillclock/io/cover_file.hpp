#pragma once

#include <cstdint>
#include <filesystem>
#include <memory>
#include <optional>
#include <string>

#include "rillclock/core/notice.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock {

/// How a raster of classes is opened.
struct CoverOptions {
    std::optional<int> band = {};   ///< from 1; needed only where the file has several
    std::string role = "cover";     ///< "cover" or "soil", for messages and the codes of notices
    std::string band_key = "band";  ///< what states the band, for messages
};

/// A raster of classes, of land cover or soil, seen through another grid.
struct CoverFile {
    /// Class of each cell of the target grid; `no_class` outside the file and where it has nodata.
    std::unique_ptr<BlockSource<std::int32_t>> source;
    ReferenceSystem system;  ///< the file's own
    Grid file_grid;          ///< the file's own
    Notices notices;
};

/// Opens a raster of classes on any grid and in any reference system, to be sampled onto `target` while it is read.
///
/// The class of a target cell is that of the cover cell that holds its centre. Where the two systems give the target's
/// places the same coordinates (`same_coordinates`), nothing is transformed; otherwise centres are, exactly or with an
/// error under a hundredth of a cover cell. The answer does not depend on the windows asked for. Memory: 64 MB above
/// what is asked for.
///
/// Throws Error (inputs) as `open_elevation` does for files that cannot be used, where the two do not overlap at all,
/// and while reading where a class is not a whole number of 32 bits.
[[nodiscard]] CoverFile open_cover(const std::filesystem::path& path, const CoverOptions& options, const Grid& target,
                                   const ReferenceSystem& target_system);

}  // namespace rillclock
