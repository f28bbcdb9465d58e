#pragma once

#include <cstdint>
#include <filesystem>
#include <memory>
#include <string>
#include <variant>
#include <vector>

#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// What a layer's features are.
enum class LayerGeometry { points, lines, polygons };
/// What a field holds.
enum class FieldKind { text, number, whole_number };

/// A field of a layer.
struct LayerField {
    std::string name;
    FieldKind kind = FieldKind::text;
    std::string description = {};
};

/// How features of one kind are drawn.
struct LayerLook {
    std::string value = {};   ///< of the style's field; empty where there is but one look
    std::string label = {};
    std::string fill = {};    ///< "#rrggbb"; empty for none. Of lines it is not looked at
    double fill_opacity = 1.0;
    std::string stroke = "#000000";
    double stroke_mm = 0.26;
};

/// How a layer is drawn: all alike, or by the values of one field.
struct LayerStyle {
    std::string field = {};   ///< empty where all are alike
    std::vector<LayerLook> looks = {};
    std::string label_field = {};   ///< written beside the features, where stated
};

/// A layer before it has features.
struct LayerDescription {
    std::string name;
    std::string description;
    LayerGeometry geometry = LayerGeometry::points;
    std::vector<LayerField> fields = {};
    std::string indexed_field = {};   ///< queries by it are quick
    LayerStyle style = {};
};

/// The value of a field; none for NULL.
using FieldValue = std::variant<std::monostate, std::string, double, std::int64_t>;
/// The geometry of a feature, as the layer's kind asks.
using LayerShape = std::variant<Place, std::vector<Line>, std::vector<Polygon>>;

/// A GeoPackage in the making: layers one after the other, each with a spatial index, descriptions and a style in the table
/// `layer_styles`. The same features give the same bytes.
class VectorFile {
public:
    /// Throws Error (machine) where the file cannot be made.
    VectorFile(const std::filesystem::path& path, const ReferenceSystem& system);
    VectorFile(const VectorFile&) = delete;
    VectorFile& operator=(const VectorFile&) = delete;
    /// Removes the file unless it was closed.
    ~VectorFile();

    /// Begins the next layer.
    void begin_layer(const LayerDescription& layer);
    /// A feature of the layer begun last; values in the order of its fields. A shape without parts is stored as none.
    void add(const LayerShape& shape, const std::vector<FieldValue>& values);
    /// Adds indexes and styles, closes, opens the file again and counts what is in it. Throws Error (machine) where anything since the
    /// start went wrong.
    void close();

private:
    class Package;
    std::unique_ptr<Package> package_;
};

}  // namespace rillclock
