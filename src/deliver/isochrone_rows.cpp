#include "isochrone_rows.hpp"

#include <map>

#include "geographic_lines.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/study_geopackage.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

double to_decimals(double value, int decimals) { return std::stod(fixed_decimals(value, decimals)); }

Json properties_of(const IsochroneRow& row) {
    return {{"point", row.outlet->point.name},
            {"of", words(row.band->scope)},
            {"from_min", to_decimals(row.from_min, 4)},
            {"to_min", to_decimals(row.to_min, 4)},
            {"area_m2", to_decimals(from_fixed_area(row.band->area), 1)},
            {"area_until_m2", to_decimals(from_fixed_area(row.area_until), 1)},
            {"share_until", to_decimals(static_cast<double>(row.area_until) / static_cast<double>(row.area_in_all), 6)}};
}

}  // namespace

std::string_view words(IsochroneScope scope) {
    switch (scope) {
        case IsochroneScope::subarea: return "subarea";
        case IsochroneScope::catchment: return "catchment";
    }
    return "";
}

std::vector<Polygon> placed(const std::vector<CornerPolygon>& polygons, const Grid& grid) {
    std::vector<Polygon> shapes;
    for (const CornerPolygon& polygon : polygons) {
        shapes.emplace_back();
        for (const CornerRing& ring : polygon.rings) {
            Line line;
            for (const Corner& corner : ring) line.push_back({grid.left + corner.column * grid.cell_width, grid.top - corner.row * grid.cell_height});
            shapes.back().rings.push_back(std::move(line));
        }
    }
    return shapes;
}

std::vector<IsochroneRow> isochrone_rows(const StudyResult& result, const StudyRegions& regions) {
    std::vector<IsochroneRow> rows;
    if (!regions.isochrones()) return rows;
    const double step = in_minutes(regions.isochrones()->step);
    std::map<std::pair<IsochroneScope, PointNumber>, FixedArea> in_all;
    for (const IsochroneBand& band : regions.bands()) {
        FixedArea& until = in_all[{band.scope, band.point}];
        until += band.area;
        rows.push_back({.band = &band, .outlet = &result.outlets[band.point - 1], .from_min = band.number * step,
                        .to_min = (band.number + 1) * step, .area_until = until});
    }
    for (IsochroneRow& row : rows) row.area_in_all = in_all[{row.band->scope, row.band->point}];
    return rows;
}

std::string isochrones_geojson(const StudyResult& result, const StudyRegions& regions) {
    GeographicLines shapes(result.system);
    std::string features;
    for (const IsochroneRow& row : isochrone_rows(result, regions)) {
        const Json feature = {{"type", "Feature"}, {"properties", properties_of(row)},
                              {"geometry", shapes.geometry(placed(regions.outline(*row.band), result.grid))}};
        features += (features.empty() ? "" : ",\n") + feature.dump();
    }
    std::string text = "{\"type\":\"FeatureCollection\",";
    if (!features.empty()) text += "\"bbox\":" + shapes.bbox().dump() + ",";
    return text + "\"features\":[\n" + features + "\n]}\n";
}

}  // namespace rillclock
