#include "uncertainty_json.hpp"

#include "json_values.hpp"

namespace rillclock {

Json uncertainty_json(const StudyResult& result) {
    const Uncertainty& found = *result.uncertainty;
    Json inputs = Json::array();
    for (const UncertainInput& input : found.inputs) {
        inputs.push_back({{"input", input.name},
                          {"unit", input.unit.empty() ? Json(nullptr) : Json(input.unit)},
                          {"low", digits(input.low, 9)},
                          {"typical", digits(input.typical, 9)},
                          {"high", digits(input.high, 9)},
                          {"range_from", input.source}});
    }
    return {{"draws", found.draws.size()},
            {"seed", found.seed},
            {"drawn_from", "triangles from low over typical to high, each input by itself; ponded speed by the time a metre takes"},
            {"left_out", uncertainty_leaves_out},
            {"kept_heads", found.kept_heads},
            {"inputs", inputs}};
}

Json point_uncertainty_json(const StudyResult& result, const Outlet& outlet) {
    const Uncertainty& found = *result.uncertainty;
    const PointUncertainty& point = found.points[outlet.number - 1];
    Json percentiles = Json::array();
    for (std::size_t i = 0; i < told_percentiles.size(); ++i) {
        percentiles.push_back({{"share_of_draws", told_percentiles[i]}, {"time_min", minutes_json(point.percentile_s[i])}});
    }
    Json effects = Json::array();
    for (const InputEffect& effect : point.effects) {
        effects.push_back({{"input", found.inputs[effect.input].name},
                           {"time_at_low_min", minutes_json(effect.low_s)},
                           {"time_at_high_min", minutes_json(effect.high_s)}});
    }
    Json last = Json::array();
    for (const LastShare& share : point.last) {
        last.push_back({{"subarea", result.outlets[share.subarea - 1].point.name}, {"draws", share.draws}});
    }
    return {{"all_fast_min", minutes_json(point.fast_s)},
            {"typical_min", minutes_json(point.typical_s)},
            {"all_slow_min", minutes_json(point.slow_s)},
            {"percentiles", percentiles},
            {"one_at_a_time", effects},
            {"arrives_last", last}};
}

}  // namespace rillclock
