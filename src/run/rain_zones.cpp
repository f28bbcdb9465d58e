#include "rain_zones.hpp"

#include <algorithm>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/io/shape_file.hpp"
#include "claimed_cells.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_zones = 255;
constexpr double least_share = 0.5;

/// The number of the zone of that rain file; a new one where the file is new.
std::size_t zone_of(const std::string& file, std::vector<std::string>& files) {
    const auto known = std::find(files.begin(), files.end(), file);
    if (known != files.end()) return static_cast<std::size_t>(known - files.begin()) + 1;
    files.push_back(file);
    return files.size();
}

Notices overlap_notices(const Study& study, std::int64_t cells) {
    if (cells == 0) return {};
    return {{.code = "rain-zones-overlap",
             .text = "polygons of '" + *study.rain.zones.file + "' with different rain overlap at " +
                     std::to_string(cells) + " cells, which were given to the polygon that comes first",
             .value = static_cast<double>(cells)}};
}

std::string percent(double share) {
    return significant(100.0 * share, 3) + " %";
}

}  // namespace

RainZoneShapes read_rain_zones(const Study& study) {
    const ZoneStudy& stated = study.rain.zones;
    if (!stated.file) return {};
    ShapeFile file = read_shapes(located(study, *stated.file),
                                 {.role = "rain zones", .kinds = ShapeKinds::polygons, .layer = stated.layer, .layer_key = "zones_layer",
                                  .text_field = stated.field},
                                 open_elevation_of(study).system);
    RainZoneShapes zones{.files = {}, .parts = {}, .notices = file.notices};
    for (std::size_t i = 0; i < file.polygons.size(); ++i) {
        if (file.polygon_texts[i].empty())
            throw input_error("a polygon of '" + *stated.file + "' names no rain file in its field \"" + stated.field +
                              "\"; write the name of a file there, such as atlas14.csv, or remove the polygon");
        zones.parts.push_back({zone_of(file.polygon_texts[i], zones.files), std::move(file.polygons[i])});
    }
    if (zones.files.size() > most_zones)
        throw input_error("the polygons of '" + *stated.file + "' name " + std::to_string(zones.files.size()) +
                          " rain files, more than the 255 that are served; join zones");
    return zones;
}

RainZoneCells rain_zone_cells(const Study& study, const RainZoneShapes& shapes, const TerrainData& terrain) {
    if (!study.rain.zones.file) return {};
    RainZoneCells cells{.zone = Raster<std::uint8_t>(terrain.grid.rows, terrain.grid.columns), .notices = shapes.notices};
    const ClaimedCells claimed = claim_cells(shapes.parts, terrain.grid, cells.zone,
                                             [](const RainZoneShapes::Part& part) { return static_cast<std::uint8_t>(part.zone); });
    if (claimed.all == 0)
        throw input_error("none of the rain zones in '" + *study.rain.zones.file +
                          "' lies within the elevations; check their reference system");
    const Notices overlaps = overlap_notices(study, claimed.twice);
    cells.notices.insert(cells.notices.end(), overlaps.begin(), overlaps.end());
    return cells;
}

void require_rain(const StudyRain& rain, const std::vector<Outlet>& outlets) {
    if (rain.zones.empty()) return;
    for (const Outlet& outlet : outlets)
        if (!(outlet.rain_zone.share > 0))
            throw input_error("the catchment of the point '" + outlet.point.name +
                              "' lies outside of all rain zones; draw a zone there, or state under [rain] a file or "
                              "formula for what lies outside");
}

Notices zone_notices(const StudyRain& rain, const std::vector<Outlet>& outlets, const Grid& grid) {
    Notices notices;
    for (const Outlet& outlet : outlets) {
        if (rain.zones.empty() || outlet.rain_zone.share >= least_share) continue;
        notices.push_back({.code = "rain-zone-minority",
                           .text = "'" + outlet.point.name + "': its rain zone, " + rain.zone_name(outlet.rain_zone.number) +
                                   ", holds only " + percent(outlet.rain_zone.share) +
                                   " of the catchment, and no other holds more; look at the rain of the others",
                           .point = outlet.point.name,
                           .value = outlet.rain_zone.share,
                           .threshold = least_share,
                           .place = grid.centre(outlet.point.cell)});
    }
    return notices;
}

}  // namespace rillclock
