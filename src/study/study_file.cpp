#include "rillclock/study/study_file.hpp"

#include <toml++/toml.h>

#include <limits>
#include <optional>
#include <sstream>

#include "rillclock/core/error.hpp"
#include "rillclock/study/scenario.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

std::string place(const std::string& file, const toml::source_position& position) {
    return file + ", line " + std::to_string(position.line) + ", column " + std::to_string(position.column);
}

toml::table parsed(std::string_view text, const std::string& file) {
    try {
        return toml::parse(text, std::string_view(file));
    } catch (const toml::parse_error& error) {
        throw input_error(place(file, error.source().begin) + ": the study cannot be read as TOML (" +
                          std::string(error.description()) +
                          "); write key = value under [section], texts in quotes, and each key once");
    }
}

std::string joined(const std::string& section, std::string_view key) {
    return section.empty() ? std::string(key) : section + "." + std::string(key);
}

/// Walks the tables of a study file and sets what each value stands for. As deep as sections lie in one another; other names are refused.
class StudyReader {
public:
    /// `scenario`: where the values of a scenario are kept, in place of the study's own; null for those.
    StudyReader(Study& study, const std::string& file, ScenarioStudy* scenario = nullptr) : study_(study), file_(file), scenario_(scenario) {}

    void read(const toml::table& table, const std::string& section) {   // NOLINT(misc-no-recursion)
        for (const auto& [name, node] : table) {
            const std::string key = joined(section, name.str());
            const std::string where = place(file_, name.source().begin) + (scenario_ == nullptr ? "" : ", scenario." + scenario_->name);
            if (is_study_section(key)) {
                read_section(node, key, where);
            } else if (takes_entries(key) && node.is_table()) {
                read_entries(*node.as_table(), key);
            } else if (is_study_key(key)) {
                take(key, {.value = scalar(node, key), .subject = called(key) + " (" + value_place(node) + ")"});
            } else if (key == "scenario" && scenario_ == nullptr) {
                read_scenarios(node, where);
            } else {
                refuse_study_key(first_key_of(node, key), where);
            }
        }
    }

private:
    void read_section(const toml::node& node, const std::string& key, const std::string& where) {   // NOLINT(misc-no-recursion)
        const toml::table* inner = node.as_table();
        if (inner == nullptr)
            throw input_error(where + ": " + key + " holds keys of its own; write them under [" + key + "] or as " +
                              key + " = { key = value }");
        // The section asks for it even where it states nothing.
        if (key == "uncertainty" && scenario_ == nullptr && !study_.uncertainty) study_.uncertainty.emplace();
        read(*inner, key);
    }

    /// A table whose names are the user's own.
    void read_entries(const toml::table& table, const std::string& key) {
        for (const auto& [name, node] : table) {
            const std::string entry(name.str());
            const std::string subject = called(key) + "." + entry + " (" + value_place(node) + ")";
            take(key, {.value = scalar(node, key), .subject = subject, .entry = entry});
        }
    }

    /// A table for each scenario, by its name.
    void read_scenarios(const toml::node& node, const std::string& where) {   // NOLINT(misc-no-recursion)
        const toml::table* scenarios = node.as_table();
        if (scenarios == nullptr)
            throw input_error(where + ": scenario holds scenarios by name; write what differs under one, such as [scenario.after]");
        for (const auto& [name, inner] : *scenarios) {
            const std::string at = place(file_, name.source().begin);
            check_scenario_name(name.str(), at);
            ScenarioStudy scenario{.name = std::string(name.str())};
            const toml::table* changes = inner.as_table();
            if (changes == nullptr || changes->empty())
                throw input_error(at + ": scenario." + scenario.name + " states nothing that differs from the study; write keys under it, such as " +
                                  "surface.cover = \"cover-plan.tif\", or leave it out");
            Study tried{.file = file_};   // values are looked at here, and set when the whole study is known
            StudyReader(tried, file_, &scenario).read(*changes, {});
            study_.scenarios.push_back(std::move(scenario));
        }
    }

    /// Sets a value of the study, or keeps it for the scenario.
    void take(const std::string& key, StudyValue value) {
        if (scenario_ != nullptr && !may_differ(key))
            throw input_error(value.subject + " cannot differ in a scenario, which runs over the study's own terrain to its own points; write " +
                              "a study of its own, and lay the two results side by side with rillclock compare");
        set_study_value(study_, key, value);
        if (scenario_ != nullptr) scenario_->changes.push_back({key, std::move(value)});
    }

    [[nodiscard]] std::string called(const std::string& key) const {
        return scenario_ == nullptr ? key : "scenario." + scenario_->name + "." + key;
    }

    /// An unknown section is told of by its first key, which says more about what was meant.
    [[nodiscard]] static std::string first_key_of(const toml::node& node, const std::string& key) {
        const toml::table* table = node.as_table();
        if (table == nullptr || table->empty()) return key;
        return joined(key, table->begin()->first.str());
    }

    [[nodiscard]] std::string value_place(const toml::node& node) const { return place(file_, node.source().begin); }

    /// The numbers of a list; NaN for what is none, which whoever takes the list refuses.
    [[nodiscard]] static std::vector<double> numbers(const toml::array& list) {
        std::vector<double> numbers;
        for (const toml::node& node : list)
            numbers.push_back(node.value<double>().value_or(std::numeric_limits<double>::quiet_NaN()));
        return numbers;
    }

    [[nodiscard]] static std::vector<std::string> texts(const toml::array& list) {
        std::vector<std::string> texts;
        for (const toml::node& node : list) texts.push_back(node.value<std::string>().value_or(""));
        return texts;
    }

    [[nodiscard]] static std::string day(const toml::date& date) {
        std::ostringstream text;
        text << date;
        return text.str();
    }

    [[nodiscard]] decltype(StudyValue::value) scalar(const toml::node& node, const std::string& key) const {
        if (const auto* list = node.as_array()) return !list->empty() && list->front().is_string() ? decltype(StudyValue::value)(texts(*list)) : numbers(*list);
        if (const auto* date = node.as_date(); date != nullptr && key == "date") return day(date->get());
        if (const auto* text = node.as_string()) return text->get();
        if (const auto* whole = node.as_integer()) return whole->get();
        if (const auto* real = node.as_floating_point()) return real->get();
        if (const auto* truth = node.as_boolean()) return truth->get();
        throw input_error(key + " (" + value_place(node) + ") is a table or a date; write one value, such as " +
                          form_of(key));
    }

    [[nodiscard]] static std::string form_of(const std::string& key) {
        for (const StudyKey& known : study_keys())
            if (known.key == key) return std::string(known.form);
        return {};
    }

    Study& study_;
    const std::string& file_;
    ScenarioStudy* scenario_;
};

}  // namespace

Study read_study(std::string_view text, const std::string& file) {
    Study study{.file = file};
    const toml::table table = parsed(text, file);
    StudyReader(study, file).read(table, {});
    return study;
}

Study parse_study(std::string_view text, const std::string& file) {
    Study study = read_study(text, file);
    check_study(study);
    return study;
}

}  // namespace rillclock
