#include "layer_system.hpp"

#include <ogrsf_frmts.h>

#include "rillclock/core/error.hpp"

namespace rillclock {

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
