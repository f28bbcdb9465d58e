#pragma once

#include <functional>
#include <map>
#include <sstream>
#include <string>

namespace rillclock {

/// The inputs of a line, by name.
class Inputs {
public:
    explicit Inputs(const std::string& text) {
        std::istringstream words(text);
        for (std::string word; words >> word;) {
            const auto equals = word.find('=');
            values_[word.substr(0, equals)] = std::stod(word.substr(equals + 1));
        }
    }
    double operator[](const std::string& name) const { return values_.at(name); }

private:
    std::map<std::string, double> values_;
};

/// What a table's second column may name.
using Formulas = std::map<std::string, std::function<double(const Inputs&)>>;

Formulas flow_formulas();
Formulas lump_formulas();
Formulas rain_formulas();
Formulas surface_formulas();

}  // namespace rillclock
