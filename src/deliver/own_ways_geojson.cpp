#include "rillclock/deliver/own_ways_geojson.hpp"

#include <nlohmann/json.hpp>

#include "feature_collection.hpp"
#include "geographic_lines.hpp"

namespace rillclock {

std::string own_ways_geojson(const StudyResult& result, std::span<const OwnWay> ways) {
    using Json = nlohmann::ordered_json;
    GeographicLines lines(result.system);
    Json features = Json::array();
    for (const OwnWay& way : ways) {
        std::vector<Place> places;
        for (const Cell cell : way.cells) places.push_back(result.grid.centre(cell));
        features.push_back(feature(lines.geometry(places), {{"departure_m", rounded(in_metres(way.departure))}, {"comes_back", way.comes_back}}));
    }
    return collection_text(features, lines);
}

}  // namespace rillclock
