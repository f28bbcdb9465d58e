#include "rillclock/study/scenario.hpp"

#include <algorithm>
#include <array>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

/// What a stated value has to do away with first: the other ways of saying the same.
struct GivesWay {
    std::string_view key;
    void (*clear)(Study&);
};

void clear_formulas(Study& s) {
    s.rain.formulas.clear();
    s.rain.formula_from.reset();
    s.rain.formula_to.reset();
}

void clear_channel_size(Study& s) {
    s.timing.channel.region.reset();
    s.timing.channel.hydraulic_radius.reset();
    s.timing.channel.width.reset();
    s.timing.channel.depth.reset();
}

void clear_soil(Study& s) {
    s.surface.soil_group.reset();
    s.surface.soil = {};
}

constexpr std::array rivals{
    GivesWay{"rain.file", clear_formulas},
    GivesWay{"rain.formula",
             [](Study& s) {
                 clear_formulas(s);
                 s.rain.file.reset();
                 if (!s.rain.zones.file) s.rain.block.reset();
             }},
    GivesWay{"surface.cover", [](Study& s) { s.surface.band.reset(); }},
    GivesWay{"surface.cover_areas", [](Study& s) { s.surface.cover_areas.layer.reset(); }},
    GivesWay{"surface.soil_group", clear_soil},
    GivesWay{"surface.soil_classes", [](Study& s) { s.surface.soil.classes.clear(); }},
    GivesWay{"rain.zones", [](Study& s) { s.rain.zones.layer.reset(); }},
    GivesWay{"timing.channel.region", clear_channel_size},
    GivesWay{"timing.channel.hydraulic_radius", clear_channel_size},
    GivesWay{"timing.channel.width", clear_channel_size},
    GivesWay{"timing.channel.depth", clear_channel_size},
};

struct ShowValue {
    std::string operator()(const std::string& text) const { return text; }
    std::string operator()(std::int64_t whole) const { return std::to_string(whole); }
    std::string operator()(double real) const { return significant(real); }
    std::string operator()(bool truth) const { return truth ? "true" : "false"; }
    template <class T>
    std::string operator()(const std::vector<T>& list) const {
        std::string text;
        for (const T& one : list) text += (text.empty() ? "" : ", ") + (*this)(one);
        return text;
    }
};

bool is_under(std::string_view key, std::string_view section) {
    return key.starts_with(section) && key.substr(section.size()).starts_with('.');
}

void clear_lump_input(Study& study, std::string_view key) {
    for (const LumpInput input : all_lump_inputs) {
        if (key == "methods." + std::string(name_of(input))) study.methods[input] = {};
    }
}

void make_room(Study& study, const ScenarioStudy& scenario) {
    for (const GivesWay& rival : rivals) {
        const bool stated = std::any_of(scenario.changes.begin(), scenario.changes.end(), [&](const StatedChange& c) { return c.key == rival.key; });
        if (stated) rival.clear(study);
    }
    for (const StatedChange& change : scenario.changes) clear_lump_input(study, change.key);
}

}  // namespace

bool may_differ(std::string_view key) {
    constexpr std::array<std::string_view, 5> sections{"surface", "rain", "timing", "peaks", "methods"};
    if (key == "title" || key == "points.pipes") return true;
    return std::any_of(sections.begin(), sections.end(), [&](std::string_view section) { return is_under(key, section); });
}

void check_scenario_name(std::string_view name, std::string_view where) {
    constexpr std::size_t longest = 60;
    constexpr std::string_view others = "-_";
    const auto is_plain = [&](char c) {
        return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || others.find(c) != std::string_view::npos;
    };
    if (!name.empty() && name.size() <= longest && std::all_of(name.begin(), name.end(), is_plain)) return;
    throw input_error(std::string(where) + ": a scenario cannot be called \"" + std::string(name) +
                      "\", since a folder is named after it; write up to 60 letters, digits, - and _, such as [scenario.after]");
}

Study scenario_study(const Study& base, const ScenarioStudy& scenario) {
    Study study = base;
    study.scenarios.clear();
    study.scenario = scenario.name;
    study.title = base.title.empty() ? "scenario " + scenario.name : base.title + " (scenario " + scenario.name + ")";
    study.output.folder = base.output.folder + "/" + scenario_folder(scenario);
    make_room(study, scenario);
    for (const StatedChange& change : scenario.changes) set_study_value(study, change.key, change.value);
    return study;
}

std::string words(const StatedChange& change) {
    const std::string entry = change.value.entry.empty() ? "" : "." + change.value.entry;
    return change.key + entry + " = " + std::visit(ShowValue{}, change.value.value);
}

std::string scenario_folder(const ScenarioStudy& scenario) { return "scenario-" + scenario.name; }

std::string comparison_folder(const ScenarioStudy& scenario) { return "comparison-" + scenario.name; }

}  // namespace rillclock
