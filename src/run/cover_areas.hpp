#pragma once

#include <cstdint>
#include <vector>

#include "rillclock/raster/grid_shapes.hpp"
#include "study_data.hpp"

namespace rillclock {

/// Polygons of land cover that a study lays over its raster.
struct CoverAreas {
    struct Part {
        std::uint8_t position = 0;   ///< of the class in the book
        Polygon polygon;
    };
    std::vector<Part> parts;         ///< in the order of the file
    Notices notices;
};

/// Reads them in the coordinates of the elevations; none where the study names no file. Throws an input error where the file cannot be used, or
/// a polygon names no class of the book, by its code or its name.
[[nodiscard]] CoverAreas read_cover_areas(const Study& study, const CoverBook& book, const ReferenceSystem& system);

/// Writes position + 1 into every cell whose centre lies within a polygon, and leaves the others as they are, which is to be 0. Where polygons
/// of two classes overlap, the one that comes first in the file counts, and a notice tells of it. Throws an input error where polygons
/// are stated and none holds the centre of a cell.
[[nodiscard]] Notices lay_over(const Study& study, const CoverAreas& areas, const Grid& grid, Raster<std::uint8_t>& cells);

}  // namespace rillclock
