#pragma once

#include <filesystem>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// What a file of shapes may hold; the others in it are left out with a notice.
enum class ShapeKinds { lines, points_and_polygons, polygons };

/// Shapes of a file in the target's coordinates, in the order of the file. A feature of several parts gives a shape a part.
struct ShapeFile {
    std::vector<Line> lines;
    std::vector<Place> points;
    std::vector<Polygon> polygons;
    std::vector<std::size_t> feature_of_line;   ///< number of each line's feature in the file, from 1
    std::vector<std::vector<std::optional<double>>> numbers;   ///< of each line: the asked fields; none where absent or empty
    std::vector<std::size_t> feature_of_polygon;   ///< number of each polygon's feature in the file, from 1
    std::vector<std::string> polygon_texts;   ///< of the field that was asked for, by polygon; empty where a feature has none
    std::size_t features = 0;   ///< of which at least one shape was taken
    Notices notices;
};

/// What is wanted of a file of shapes.
struct ShapeWish {
    std::string role;                         ///< names the file in messages: "channels"
    ShapeKinds kinds = ShapeKinds::lines;
    std::optional<std::string> layer = {};    ///< needed only where the file has several
    std::string layer_key;                    ///< of the study file, which says the layer: "channels_layer"
    /// Fields whose numbers are wanted of each line; a file may lack them.
    std::span<const std::string> fields = {};
    /// Field whose text is wanted of every polygon; none where empty.
    std::string text_field = {};
    /// In place of that: the first of these fields that the file has; it may have none.
    std::span<const std::string_view> usual_text_fields = {};
};

/// Reads the lines, or the points and polygons, of any vector format that lies on the disk (a file, a folder that is one data set, a
/// zip archive that holds one) and any reference system. Nothing is fetched that a file names elsewhere. Curves are made of short straight lines,
/// heights and measures are dropped.
///
/// Features of another type, without a shape, with corners that are not finite or that have no image in `target` are left out, one
/// notice each. Throws Error (inputs) where the file cannot be read, has several layers and none is asked for, or not that
/// one, its reference system is missing, a field holds no numbers, there is no `text_field`, or it holds no shape that can be used.
[[nodiscard]] ShapeFile read_shapes(const std::filesystem::path& path, const ShapeWish& wish, const ReferenceSystem& target);

}  // namespace rillclock
