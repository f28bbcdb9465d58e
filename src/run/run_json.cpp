#include "rillclock/core/error.hpp"
#include "rillclock/deliver/quoted_json.hpp"
#include "rillclock/run/run_study.hpp"

namespace rillclock {
namespace {

std::string scenario_json(const ScenarioOutcome& scenario) {
    std::string changes;
    for (const std::string& change : scenario.changes) changes += (changes.empty() ? "" : ", ") + quoted_json(change);
    return "{\"name\": " + quoted_json(scenario.name) + ",\n\"folder\": " + quoted_json(scenario.folder.string()) + ",\n\"comparison_folder\": " +
           quoted_json(scenario.comparison_folder.string()) + ",\n\"changes\": [" + changes + "],\n\"comparison\": " + scenario.comparison_json +
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
