#include "feature_collection.hpp"

#include <algorithm>
#include <utility>

#include "rillclock/core/number_text.hpp"

namespace rillclock {

using Json = nlohmann::ordered_json;

double rounded(double value, int digits) { return std::stod(significant(value, digits)); }

double to_decimals(double value, int decimals) { return std::stod(fixed_decimals(value, decimals)); }

Json feature(Json geometry, Json properties) {
    return {{"type", "Feature"}, {"properties", std::move(properties)}, {"geometry", std::move(geometry)}};
}

std::string collection_text(const Json& features, const GeographicLines& lines) {
    Json collection = {{"type", "FeatureCollection"}};
    const bool has_shapes = std::any_of(features.begin(), features.end(), [](const Json& f) { return !f["geometry"].is_null(); });
    if (has_shapes) collection["bbox"] = lines.bbox();
    std::string text = collection.dump();
    text.pop_back();
    text += ",\"features\":[\n";
    for (std::size_t i = 0; i < features.size(); ++i) text += features[i].dump() + (i + 1 < features.size() ? ",\n" : "\n");
    return text + "]}\n";
}

}  // namespace rillclock
