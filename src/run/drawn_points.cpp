#include "drawn_points.hpp"

#include <algorithm>
#include <array>
#include <map>
#include <set>
#include <string_view>
#include <tuple>

#include "rillclock/catchment/tiled_cells.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/trimmed.hpp"
#include "rillclock/io/shape_file.hpp"

namespace rillclock {
namespace {

constexpr std::array<std::string_view, 3> usual_names{"name", "label", "id"};
constexpr double least_overlap = 0.9;

std::string in_ha(FixedArea area) { return significant(from_fixed_area(area) / 1e4, 4) + " ha"; }

void refuse_equal_names(const Study& study, const std::vector<DrawnCatchment>& drawn) {
    std::set<std::string> names;
    for (const DrawnCatchment& one : drawn) {
        if (names.insert(one.name).second) continue;
        throw input_error("two catchments of '" + *study.points.catchments.file + "' have the same name, \"" + one.name +
                          "\"; give each its own, draw the parts of one as one feature, or name another field with name = \"...\" under [points]");
    }
}

bool reaches_beyond(const std::vector<Polygon>& polygons, const Grid& grid) {
    const double right = grid.left + static_cast<double>(grid.columns) * grid.cell_width;
    const double bottom = grid.top - static_cast<double>(grid.rows) * grid.cell_height;
    const auto off = [&](const Place& at) { return at.x < grid.left || at.x > right || at.y > grid.top || at.y < bottom; };
    return std::any_of(polygons.begin(), polygons.end(), [&](const Polygon& polygon) {
        return std::any_of(polygon.rings.begin(), polygon.rings.end(),
                           [&](const Line& ring) { return std::any_of(ring.begin(), ring.end(), off); });
    });
}

CellRuns cells_of_drawn(const DrawnCatchment& drawn, const TiledTravel& travel, const TerrainData& terrain) {
    return cells_of(std::span(drawn.polygons), terrain.grid, travel.ground().forest.codes());
}

/// Where water leaves each, those that come in question.
std::vector<std::vector<Cell>> crossings_of(const std::vector<CellRuns>& cells, const ResolvedStudy& resolved, const TiledTravel& travel,
                                            const TerrainData& terrain) {
    const double metres_per_unit = travel.ground().metres_per_elevation_unit;
    const auto elevation_m = [&](Cell cell) { return terrain.elevations[cell] * metres_per_unit; };
    std::vector<std::vector<Cell>> crossings;
    for (const CellRuns& one : cells) {
        crossings.push_back(lowest_crossings(one, travel.ground().forest.codes(), elevation_m, in_metres(resolved.vertical_step)));
    }
    return crossings;
}

}  // namespace

StatedPoints read_drawn_catchments(const Study& study, const ReferenceSystem& system) {
    const MappedLayer& stated = study.points.catchments;
    ShapeFile file = read_shapes(located(study, *stated.file),
                                 {.role = "catchments", .kinds = ShapeKinds::polygons, .layer = stated.layer, .layer_key = "catchments_layer",
                                  .text_field = study.points.name.value_or(""), .usual_text_fields = usual_names},
                                 system);
    StatedPoints read{.points = {}, .lump_inputs = {}, .drawn = {}, .notices = file.notices};
    std::size_t feature = 0;
    for (std::size_t i = 0; i < file.polygons.size(); ++i) {
        const std::string name(trimmed(file.polygon_texts[i]));
        const bool is_new = file.feature_of_polygon[i] != feature;
        feature = file.feature_of_polygon[i];
        if (is_new) read.drawn.push_back({.name = name.empty() ? "catchment " + std::to_string(feature) : name, .polygons = {}});
        read.drawn.back().polygons.push_back(std::move(file.polygons[i]));
    }
    refuse_equal_names(study, read.drawn);
    return read;
}

StatedPoints with_crossings(StatedPoints stated, const ResolvedStudy& resolved, const TiledTravel& travel, const TerrainData& terrain) {
    std::vector<CellRuns> cells;
    for (const DrawnCatchment& drawn : stated.drawn) cells.push_back(cells_of_drawn(drawn, travel, terrain));
    const std::vector<std::vector<Cell>> crossings = crossings_of(cells, resolved, travel, terrain);
    std::vector<Cell> all;
    for (const std::vector<Cell>& some : crossings) all.insert(all.end(), some.begin(), some.end());
    const auto areas = areas_at(travel, std::move(all));
    for (std::size_t i = 0; i < stated.drawn.size(); ++i) {
        const std::string& name = stated.drawn[i].name;
        if (crossings[i].empty()) {
            stated.notices.push_back({.code = "drawn-catchment-off-data",
                                      .text = "the drawn catchment '" + name + "' holds no cell with elevations and is left out; draw it anew, or check " +
                                              "the reference system of its file",
                                      .point = name});
            continue;
        }
        const Cell lowest = *std::min_element(crossings[i].begin(), crossings[i].end(), [&](Cell a, Cell b) {
            return std::tuple(-areas.at(a), a) < std::tuple(-areas.at(b), b);
        });
        const Place place = terrain.grid.centre(lowest);
        stated.points.push_back({.name = name, .place = place, .surveyed = area_of(cells[i], terrain.grid, terrain.ground)});
        if (!reaches_beyond(stated.drawn[i].polygons, terrain.grid)) continue;
        stated.notices.push_back({.code = "drawn-catchment-beyond-data",
                                  .text = "the drawn catchment '" + name + "' reaches beyond the elevations; only what lies within was compared",
                                  .point = name, .place = place});
    }
    return stated;
}

std::vector<DrawnDifference> drawn_differences(const std::optional<StatedPoints>& stated, const std::vector<DesignPoint>& points,
                                               const StudyRegions& regions, const TiledTravel& travel, const TerrainData& terrain) {
    std::vector<DrawnDifference> differences;
    if (!stated || stated->drawn.empty()) return differences;
    std::map<std::string, const DrawnCatchment*> by_name;
    for (const DrawnCatchment& drawn : stated->drawn) by_name.emplace(drawn.name, &drawn);
    for (std::size_t i = 0; i < points.size(); ++i) {
        const auto number = static_cast<PointNumber>(i + 1);
        const CellRuns drawn = cells_of_drawn(*by_name.at(points[i].name), travel, terrain);
        const std::vector<CornerPolygon> outlines = regions.catchment(number);
        const CellRuns found = cells_of(std::span(outlines), terrain.grid);
        differences.push_back(difference_of(number, drawn, found, terrain.grid, terrain.ground));
    }
    return differences;
}

Notices notices_of(const std::vector<DrawnDifference>& differences, const std::vector<DesignPoint>& points) {
    Notices notices;
    for (const DrawnDifference& one : differences) {
        if (one.overlap() >= least_overlap) continue;
        const DesignPoint& point = points[one.point - 1];
        notices.push_back({.code = "drawn-catchment-differs",
                           .text = "the drawn catchment of '" + point.name + "', " + in_ha(one.drawn) + ", and that of the elevations, " +
                                   in_ha(one.found) + ", have " + significant(100.0 * one.overlap(), 3) + " % in common; look at " +
                                   "catchment_differences in study.gpkg for where they disagree",
                           .point = point.name, .value = one.overlap(), .threshold = least_overlap, .place = point.stated});
    }
    return notices;
}

}  // namespace rillclock
