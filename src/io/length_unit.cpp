#include "rillclock/io/length_unit.hpp"

#include <algorithm>
#include <array>
#include <cctype>
#include <cmath>

#include "rillclock/core/quantity.hpp"

namespace rillclock {
namespace {

struct Known {
    const char* name;
    double metres;
};

constexpr std::array<Known, 7> known_units = {{{"metre", 1.0},
                                               {"foot", metres_per_foot},
                                               {"US survey foot", metres_per_us_survey_foot},
                                               {"decimetre", 0.1},
                                               {"centimetre", 0.01},
                                               {"millimetre", 0.001},
                                               {"kilometre", 1000.0}}};

/// Spellings without blanks and marks, in lower case; the number is the place in `known_units`.
struct Spelling {
    const char* text;
    std::size_t unit;
};

constexpr std::array<Spelling, 37> spellings = {{{"m", 0},
                                                 {"metre", 0},
                                                 {"metres", 0},
                                                 {"meter", 0},
                                                 {"meters", 0},
                                                 {"mtr", 0},
                                                 {"ft", 1},
                                                 {"foot", 1},
                                                 {"feet", 1},
                                                 {"internationalfoot", 1},
                                                 {"internationalfeet", 1},
                                                 {"footinternational", 1},
                                                 {"ftint", 1},
                                                 {"intft", 1},
                                                 {"usft", 2},
                                                 {"ftus", 2},
                                                 {"footus", 2},
                                                 {"feetus", 2},
                                                 {"usfoot", 2},
                                                 {"ussurveyft", 2},
                                                 {"ussurveyfoot", 2},
                                                 {"ussurveyfeet", 2},
                                                 {"surveyfoot", 2},
                                                 {"surveyfeet", 2},
                                                 {"footussurvey", 2},
                                                 {"dm", 3},
                                                 {"decimetre", 3},
                                                 {"decimetres", 3},
                                                 {"decimeters", 3},
                                                 {"cm", 4},
                                                 {"centimetre", 4},
                                                 {"centimetres", 4},
                                                 {"centimeters", 4},
                                                 {"mm", 5},
                                                 {"millimetres", 5},
                                                 {"millimeters", 5},
                                                 {"km", 6}}};

std::string letters_of(std::string_view text) {
    std::string letters;
    for (const char c : text)
        if (std::isalpha(static_cast<unsigned char>(c)) != 0)
            letters.push_back(static_cast<char>(std::tolower(static_cast<unsigned char>(c))));
    return letters;
}

/// Digits would be lost by `letters_of`: "0.1 m" is no unit.
bool has_digit(std::string_view text) {
    return std::any_of(text.begin(), text.end(), [](char c) { return c >= '0' && c <= '9'; });
}

}  // namespace

bool LengthUnit::is_foot() const {
    return metres_per_unit == metres_per_foot || metres_per_unit == metres_per_us_survey_foot;
}

bool LengthUnit::contradicts(const LengthUnit& other) const {
    return !(std::abs(metres_per_unit / other.metres_per_unit - 1.0) <= 1e-5);
}

std::optional<LengthUnit> length_unit_named(std::string_view text) {
    if (has_digit(text)) return std::nullopt;
    const std::string letters = letters_of(text);
    const auto found =
        std::find_if(spellings.begin(), spellings.end(), [&](const Spelling& s) { return letters == s.text; });
    if (found == spellings.end()) return std::nullopt;
    return LengthUnit{known_units[found->unit].name, known_units[found->unit].metres};
}

LengthUnit length_unit_of(double metres_per_unit, const std::string& name) {
    for (const Known& known : known_units)
        if (std::abs(metres_per_unit / known.metres - 1.0) <= 1e-9) return {known.name, known.metres};
    return {name, metres_per_unit};
}

}  // namespace rillclock
