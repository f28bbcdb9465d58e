#include "layer_system.hpp"

#include <ogrsf_frmts.h>

#include "rillclock/core/error.hpp"

namespace rillclock {

OGRLayer* layer_of(GDALDataset& file, const std::optional<std::string>& asked, const std::string& called, const std::string& say) {
    std::string names;
    for (int i = 0; i < file.GetLayerCount(); ++i) names += (i == 0 ? "" : ", ") + std::string(file.GetLayer(i)->GetName());
    if (asked) {
        OGRLayer* layer = file.GetLayerByName(asked->c_str());
        if (layer == nullptr) throw input_error("The " + called + " has no layer \"" + *asked + "\"; it has " + names + ".");
        return layer;
    }
    if (file.GetLayerCount() == 1) return file.GetLayer(0);
    throw input_error("The " + called + " has several layers: " + names + "; say which is meant, for example " + say + " = \"" +
                      file.GetLayer(0)->GetName() + "\".");
}

ReferenceSystem system_of_layer(OGRLayer& layer, const std::string& called, const std::filesystem::path& path) {
    const OGRSpatialReference* system = layer.GetSpatialRef();
    char* text = nullptr;
    if (system && !system->IsEmpty()) system->exportToWkt(&text);
    const std::string wkt = text ? text : "";
    CPLFree(text);
    if (!wkt.empty()) return ReferenceSystem::from_text(wkt);
    throw input_error("The " + called + " has no reference system; state the one its coordinates are in: ogr2ogr -a_srs EPSG:nnnnn " +
                      path.stem().string() + "-placed.gpkg " + path.string() + ".");
}

}  // namespace rillclock
