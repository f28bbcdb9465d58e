#include <nlohmann/json.hpp>

#include "rillclock/core/error.hpp"
#include "rillclock/run/run_study.hpp"

namespace rillclock {
namespace {

std::string quoted(const std::string& text) { return nlohmann::json(text).dump(-1, ' ', false, nlohmann::json::error_handler_t::replace); }

std::string scenario_json(const ScenarioOutcome& scenario) {
    std::string changes;
    for (const std::string& change : scenario.changes) changes += (changes.empty() ? "" : ", ") + quoted(change);
    return "{\"name\": " + quoted(scenario.name) + ",\n\"folder\": " + quoted(scenario.folder.string()) + ",\n\"comparison_folder\": " +
           quoted(scenario.comparison_folder.string()) + ",\n\"changes\": [" + changes + "],\n\"comparison\": " + scenario.comparison_json +
           ",\"result\": " + scenario.json + "}";
}

}  // namespace

/// Documents are put together as texts, so that each has the very numbers of its file.
std::string json_of(const RunOutcome& outcome) {
    if (outcome.scenarios.empty()) return outcome.json;
    const auto end = outcome.json.rfind('}');
    if (end == std::string::npos) throw bug("result.json is no object");
    std::string results;
    for (const ScenarioOutcome& scenario : outcome.scenarios) results += (results.empty() ? "" : ",\n") + scenario_json(scenario);
    return outcome.json.substr(0, end) + ",\"scenario_results\": [\n" + results + "]\n}\n";
}

}  // namespace rillclock
