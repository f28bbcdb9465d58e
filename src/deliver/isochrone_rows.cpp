#include "isochrone_rows.hpp"

#include <map>

#include "feature_collection.hpp"
#include "geographic_lines.hpp"
#include "json_values.hpp"
#include "network_words.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/study_geopackage.hpp"

namespace rillclock {
namespace {

Json parts_json(const StudyResult& result, const IsochroneRow& row) {
    Json parts = Json::array();
    for (const IsochronePart& part : row.band->parts) {
        parts.push_back({{"subarea", point_name(result, part.subarea)}, {"area_m2", to_decimals(from_fixed_area(part.area), 1)}});
    }
    return parts;
}

/// What runs off; null where it is not known.
void add_runoff(const StudyResult& result, const IsochroneRow& row, Json& json) {
    const std::optional<BandRunoff>& runoff = row.runoff;
    const auto where_any = [&](auto value) { return runoff ? Json(value(*runoff)) : Json(nullptr); };
    json["return_period_years"] = where_any([&](const BandRunoff&) { return rounded(result.rain.raster_storm().return_period, 9); });
    json["ca_m2"] = where_any([](const BandRunoff& r) { return rounded(in_square_metres(r.runoff), 9); });
    json["ca_until_m2"] = where_any([](const BandRunoff& r) { return rounded(in_square_metres(r.running), 9); });
    json["rain_duration_min"] = where_any([](const BandRunoff& r) { return to_decimals(in_minutes(r.time), 4); });
    json["intensity_mm_per_h"] = where_any([](const BandRunoff& r) { return r.intensity ? Json(rounded(in_millimetres_per_hour(*r.intensity), 9)) : Json(nullptr); });
    json["flow_m3_per_s"] = where_any([](const BandRunoff& r) { return r.flow ? Json(rounded(in_cubic_metres_per_second(*r.flow), 9)) : Json(nullptr); });
}

Json properties_of(const StudyResult& result, const IsochroneRow& row) {
    Json json = {{"point", row.outlet->point.name},
            {"of", words(row.band->scope)},
            {"from_min", to_decimals(row.from_min, 4)},
            {"to_min", to_decimals(row.to_min, 4)},
            {"area_m2", to_decimals(from_fixed_area(row.band->area), 1)},
            {"area_until_m2", to_decimals(from_fixed_area(row.area_until), 1)},
            {"share_until", to_decimals(static_cast<double>(row.area_until) / static_cast<double>(row.area_in_all), 6)},
            {"subareas", parts_json(result, row)},
            {"borders", border_words(*result.isochrones)},
            {"stated_above", text_or_null(stated_in_words(result, result.network.points[row.band->point - 1].stated_above))}};
    add_runoff(result, row, json);
    return json;
}

}  // namespace

std::string parts_in_words(const StudyResult& result, const IsochroneBand& band) {
    std::string text;
    for (const IsochronePart& part : band.parts) {
        text += (text.empty() ? "" : "; ") + point_name(result, part.subarea) + " " + fixed_decimals(from_fixed_area(part.area), 1);
    }
    return text;
}

std::string_view words(IsochroneScope scope) {
    switch (scope) {
        case IsochroneScope::subarea: return "subarea";
        case IsochroneScope::catchment: return "catchment";
    }
    return "";
}

std::string_view border_words(const IsochroneRules& rules) { return rules.smoothed ? "smoothed" : "cells"; }

std::string isochrone_description(const StudyResult& result) {
    const IsochroneRules& rules = *result.isochrones;
    std::string text = "where water takes between two times to the point, in bands of " + significant(in_minutes(rules.step), 6) + " min";
    if (rules.smoothed) text += "; borders are smoothed by cutting corners of cells off, less than half a cell; areas are those of the cells";
    if (has_stated_times(result)) text += "; " + std::string(ground_times_words);
    return text;
}

std::vector<Polygon> placed(std::vector<Polygon> in_cells, const Grid& grid) {
    for (Polygon& polygon : in_cells) {
        for (Line& ring : polygon.rings) {
            for (Place& at : ring) at = {grid.left + at.x * grid.cell_width, grid.top - at.y * grid.cell_height};
        }
    }
    return in_cells;
}

std::vector<Polygon> placed(const std::vector<CornerPolygon>& polygons, const Grid& grid) { return placed(in_cells(polygons), grid); }

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
    const auto runoffs = band_runoffs(regions.bands(), {.study = result.study, .rain = result.rain, .outlets = result.outlets, .peaks = result.peaks,
                                                        .step = regions.isochrones()->step});
    for (std::size_t i = 0; i < rows.size(); ++i) {
        rows[i].area_in_all = in_all[{rows[i].band->scope, rows[i].band->point}];
        rows[i].runoff = runoffs[i];
    }
    return rows;
}

std::string isochrones_geojson(const StudyResult& result, const StudyRegions& regions) {
    GeographicLines shapes(result.system);
    std::string features;
    for (const IsochroneRow& row : isochrone_rows(result, regions)) {
        const Json feature = {{"type", "Feature"}, {"properties", properties_of(result, row)},
                              {"geometry", shapes.geometry(placed(regions.outline(*row.band), result.grid))}};
        features += (features.empty() ? "" : ",\n") + feature.dump();
    }
    std::string text = "{\"type\":\"FeatureCollection\",\"description\":" + Json(isochrone_description(result)).dump() + ",";
    if (!features.empty()) text += "\"bbox\":" + shapes.bbox().dump() + ",";
    return text + "\"features\":[\n" + features + "\n]}\n";
}

}  // namespace rillclock
