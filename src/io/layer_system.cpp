#include "layer_system.hpp"

#include <ogrsf_frmts.h>

#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {

namespace {

bool has_shapes(OGRLayer& layer) { return layer.GetLayerDefn()->GetGeomFieldCount() > 0; }

std::vector<OGRLayer*> layers_with_shapes(GDALDataset& file) {
    std::vector<OGRLayer*> layers;
    for (OGRLayer* layer : file.GetLayers()) {
        if (has_shapes(*layer)) layers.push_back(layer);
    }
    return layers;
}

std::string names_of(const std::vector<OGRLayer*>& layers) {
    std::string names;
    for (OGRLayer* layer : layers) names += (names.empty() ? "" : ", ") + std::string(layer->GetName());
    return names;
}

bool is_csv(const std::filesystem::path& path) { return EQUAL(path.extension().c_str(), ".csv"); }

std::string no_shapes(const std::string& called, const std::filesystem::path& path) {
    return "The " + called + " is a table without shapes; " +
           (is_csv(path) ? "a CSV file needs a column WKT with the shapes, or columns x and y with places." : "name a file whose features have places.");
}

}  // namespace

OGRLayer* layer_of(GDALDataset& file, const LayerWish& wish) {
    const std::vector<OGRLayer*> layers = layers_with_shapes(file);
    if (layers.empty()) throw input_error(no_shapes(wish.called, wish.path));
    if (wish.asked) {
        OGRLayer* layer = file.GetLayerByName(wish.asked->c_str());
        if (layer == nullptr) throw input_error("The " + wish.called + " has no layer \"" + *wish.asked + "\"; it has " + names_of(layers) + ".");
        if (!has_shapes(*layer)) {
            throw input_error("The layer \"" + *wish.asked + "\" of the " + wish.called + " is a table without shapes; those with shapes are " + names_of(layers) + ".");
        }
        return layer;
    }
    if (layers.size() == 1) return layers.front();
    throw input_error("The " + wish.called + " has several layers: " + names_of(layers) + "; say which is meant, for example " + wish.key + " = \"" +
                      layers.front()->GetName() + "\".");
}

ReferenceSystem system_of_layer(OGRLayer& layer, const std::string& called, const std::filesystem::path& path) {
    const OGRSpatialReference* system = layer.GetSpatialRef();
    char* text = nullptr;
    if (system && !system->IsEmpty()) system->exportToWkt(&text);
    const std::string wkt = text ? text : "";
    CPLFree(text);
    if (!wkt.empty()) return ReferenceSystem::from_text(wkt);
    // The columns of places are those that are looked for here.
    const std::string columns = is_csv(path) ? " -oo X_POSSIBLE_NAMES=x,easting,lon,longitude -oo Y_POSSIBLE_NAMES=y,northing,lat,latitude" : "";
    throw input_error("The " + called + " has no reference system; state the one its coordinates are in: ogr2ogr -a_srs EPSG:nnnnn" + columns + " " +
                      path.stem().string() + "-placed.gpkg " + path.string() + ".");
}

}  // namespace rillclock
