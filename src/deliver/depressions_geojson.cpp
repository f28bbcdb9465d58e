#include "rillclock/deliver/depressions_geojson.hpp"

#include <nlohmann/json.hpp>

#include "feature_collection.hpp"
#include "geographic_lines.hpp"
#include "shown_depth.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

Json properties(const StudyResult& result, const OutlinedDepression& outlined) {
    const Depression& depression = outlined.depression;
    const double metres_per_unit = result.format.metres_per_stored_unit();
    return {{"depression", outlined.number},
            {"depth_m", rounded(shown_depth(depression.depth * metres_per_unit))},
            {"area_m2", rounded(from_fixed_area(depression.area))},
            {"volume_m3", rounded(depression.volume * metres_per_unit)},
            {"on_governing_path", depression.on_path}};
}

}  // namespace

std::string depressions_geojson(const StudyResult& result, std::span<const OutlinedDepression> depressions) {
    GeographicLines lines(result.system);
    Json features = Json::array();
    for (const OutlinedDepression& outlined : depressions) {
        features.push_back(feature(lines.area(outlined.outline), properties(result, outlined)));
    }
    return collection_text(features, lines);
}

}  // namespace rillclock
