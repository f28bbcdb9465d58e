#include "settings.hpp"

#include <algorithm>
#include <functional>
#include <limits>
#include <optional>
#include <string>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/run/travel_times.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

namespace py = pybind11;

std::string shown(const py::handle& value) { return std::string(py::repr(value)); }

/// A number of Python's or NumPy's; none for anything else.
std::optional<double> number_of(const py::handle& value) {
    if (PyNumber_Check(value.ptr()) == 0) return std::nullopt;
    const double number = PyFloat_AsDouble(value.ptr());
    if (PyErr_Occurred() == nullptr) return number;
    PyErr_Clear();
    return std::nullopt;
}

/// The numbers of a list; NaN for what is none, which whoever takes the list refuses.
std::vector<double> numbers(const py::handle& list) {
    std::vector<double> numbers;
    for (const py::handle item : list) {
        numbers.push_back(number_of(item).value_or(std::numeric_limits<double>::quiet_NaN()));
    }
    return numbers;
}

bool is_list_of_texts(const py::handle& list) {
    return py::len(list) > 0 && std::all_of(list.begin(), list.end(), [](const py::handle& item) { return py::isinstance<py::str>(item); });
}

std::vector<std::string> texts(const py::handle& list) {
    std::vector<std::string> texts;
    for (const py::handle item : list) texts.push_back(item.cast<std::string>());
    return texts;
}

decltype(StudyValue::value) value_of(const py::handle& value, const std::string& key) {
    if (py::isinstance<py::str>(value)) return value.cast<std::string>();
    if (py::isinstance<py::bool_>(value)) return value.cast<bool>();
    if (PyIndex_Check(value.ptr()) != 0) return value.cast<std::int64_t>();
    if (py::isinstance<py::list>(value) || py::isinstance<py::tuple>(value)) {
        if (is_list_of_texts(value)) return texts(value);
        return numbers(value);
    }
    if (const auto number = number_of(value)) return *number;
    if (PyObject_HasAttrString(value.ptr(), "__fspath__") != 0) return py::str(value).cast<std::string>();
    throw input_error("the setting " + key + " is " + shown(value) + "; give a text, a number, a boolean, or a list of numbers or texts");
}

using Use = std::function<void(const std::string& key, const StudyValue& value)>;

/// Calls `use` with every key and its value, sections joined to the names: as deep as sections lie in one another, since other names are refused.
void walk(Study& study, const py::dict& settings, const std::string& section, const Use& use) {   // NOLINT(misc-no-recursion)
    for (const auto& [name, value] : settings) {
        const std::string key = section.empty() ? std::string(py::str(name)) : section + "." + std::string(py::str(name));
        const std::string subject = "the setting " + key;
        if (value.is_none()) continue;
        if (is_study_section(key) && py::isinstance<py::dict>(value)) {
            if (key == "uncertainty" && !study.uncertainty) study.uncertainty.emplace();
            walk(study, py::reinterpret_borrow<py::dict>(value), key, use);
        } else if (takes_entries(key) && py::isinstance<py::dict>(value)) {
            for (const auto& [entry, entry_value] : py::reinterpret_borrow<py::dict>(value)) {
                const std::string entry_name = py::str(entry);
                use(key, {.value = value_of(entry_value, key), .subject = subject + "." + entry_name, .entry = entry_name});
            }
        } else if (is_study_key(key)) {
            use(key, {.value = value_of(value, key), .subject = subject});
        } else {
            refuse_study_key(key, "the settings");
        }
    }
}

}  // namespace

void state_settings(Study& study, const py::dict& settings) {
    walk(study, settings, {}, [&](const std::string& key, const StudyValue& value) { set_study_value(study, key, value); });
}

void state_travel_settings(Study& study, const py::dict& settings) {
    walk(study, settings, {}, [&](const std::string& key, const StudyValue& value) {
        const auto known = travel_time_keys();
        if (std::find(known.begin(), known.end(), key) == known.end()) {
            throw input_error("the setting " + key + " does not act on travel times from rasters in memory; leave it out, or run a study with "
                              "rillclock.run");
        }
        set_study_value(study, key, value);
    });
}

std::string travel_settings_text() {
    std::string text;
    for (const StudyKey& key : study_keys()) {
        const auto known = travel_time_keys();
        if (std::find(known.begin(), known.end(), key.key) == known.end()) continue;
        text += "    " + std::string(key.key) + " = " + std::string(key.form) + ": " + std::string(key.help) + "; default " + std::string(key.standard) + "\n";
    }
    return text;
}

}  // namespace rillclock
