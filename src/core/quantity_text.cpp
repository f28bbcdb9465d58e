#include "rillclock/core/quantity_text.hpp"

#include <algorithm>
#include <array>
#include <charconv>
#include <cmath>
#include <optional>
#include <span>
#include <system_error>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/trimmed.hpp"

namespace rillclock {
namespace {

constexpr std::string_view line_blanks = " \t";   // a quantity stands on one line

enum class Dimension { none, fraction, length, area, duration, speed, intensity };

struct Unit {
    std::string_view name;
    Dimension dimension;
    double times;  ///< SI = number · times / over: dividing keeps "3 mm" the double nearest to 0.003
    double over = 1.0;
    bool listed = true;  ///< false for a second spelling
};

constexpr double square(double v) {
    return v * v;
}

constexpr std::array units{
    Unit{"m", Dimension::length, 1.0},
    Unit{"km", Dimension::length, 1000.0},
    Unit{"cm", Dimension::length, 1.0, 100.0},
    Unit{"mm", Dimension::length, 1.0, 1000.0},
    Unit{"ft", Dimension::length, metres_per_foot},
    Unit{"in", Dimension::length, metres_per_inch},
    Unit{"yd", Dimension::length, 0.9144},
    Unit{"mi", Dimension::length, metres_per_mile},
    Unit{"us survey ft", Dimension::length, metres_per_us_survey_foot},
    Unit{"m2", Dimension::area, 1.0},
    Unit{"m²", Dimension::area, 1.0, 1.0, false},
    Unit{"ha", Dimension::area, 1e4},
    Unit{"km2", Dimension::area, 1e6},
    Unit{"km²", Dimension::area, 1e6, 1.0, false},
    Unit{"ac", Dimension::area, square_metres_per_acre},
    Unit{"ft2", Dimension::area, square(metres_per_foot)},
    Unit{"ft²", Dimension::area, square(metres_per_foot), 1.0, false},
    Unit{"mi2", Dimension::area, square(metres_per_mile)},
    Unit{"mi²", Dimension::area, square(metres_per_mile), 1.0, false},
    Unit{"s", Dimension::duration, 1.0},
    Unit{"min", Dimension::duration, 60.0},
    Unit{"h", Dimension::duration, 3600.0},
    Unit{"m/s", Dimension::speed, 1.0},
    Unit{"ft/s", Dimension::speed, metres_per_foot},
    Unit{"mm/h", Dimension::intensity, 1.0, 3.6e6},
    Unit{"in/h", Dimension::intensity, metres_per_inch, 3600.0},
    Unit{"%", Dimension::fraction, 1.0, 100.0},
};

struct DimensionWords {
    std::string_view noun;
    std::string_view example;
};

DimensionWords words(Dimension dimension) {
    switch (dimension) {
        case Dimension::none:
            return {"a number", "0.05"};
        case Dimension::fraction:
            return {"a percentage", "0.5 %"};
        case Dimension::length:
            return {"a length", "100 ft"};
        case Dimension::area:
            return {"an area", "4 ha"};
        case Dimension::duration:
            return {"a duration", "5 min"};
        case Dimension::speed:
            return {"a speed", "2 m/s"};
        case Dimension::intensity:
            return {"a rainfall intensity", "1.2 in/h"};
    }
    throw bug("a dimension without words");
}

std::vector<std::string_view> unit_names(Dimension dimension) {
    std::vector<std::string_view> names;
    for (const Unit& unit : units)
        if (unit.dimension == dimension && unit.listed) names.push_back(unit.name);
    return names;
}

std::string joined(std::span<const std::string_view> names) {
    std::string list;
    for (const std::string_view name : names) list += (list.empty() ? "" : ", ") + std::string(name);
    return list;
}

/// One text that should be a quantity of one dimension, and the error sentences about it.
class QuantityReader {
public:
    QuantityReader(std::string_view text, Dimension dimension, const QuantityAsked& asked)
        : text_(text), dimension_(dimension), asked_(asked) {}

    [[nodiscard]] double in_si() const {
        std::string_view rest;
        const double number = number_before(rest);
        const Unit unit = unit_named(rest);
        const double value = number * unit.times / unit.over;
        require_sign(value);
        return value;
    }

    [[nodiscard]] Error fault(const std::string& what) const {
        const DimensionWords right = words(dimension_);
        const std::string example = asked_.example.empty() ? std::string(right.example) : asked_.example;
        const std::string list = joined(unit_names(dimension_));
        return input_error(asked_.subject + " is \"" + std::string(text_) + "\", " + what + "; write " +
                           std::string(right.noun) + " such as \"" + example + "\"" +
                           (list.empty() ? "" : " (units: " + list + ")"));
    }

private:
    double number_before(std::string_view& rest) const {
        const std::string_view text = trimmed(text_, line_blanks);
        double number = 0.0;
        const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), number);
        if (error == std::errc::result_out_of_range) throw fault("whose number is too large or too small to be held");
        if (error != std::errc()) throw fault("which does not begin with a number");
        if (!std::isfinite(number)) throw fault("which is not a finite number");
        rest = trimmed(text.substr(static_cast<std::size_t>(end - text.data())), line_blanks);
        if (rest.starts_with(',')) throw fault("which has a comma in its number where a decimal point is wanted");
        return number;
    }

    [[nodiscard]] Unit unit_named(std::string_view name) const {
        if (dimension_ == Dimension::none) {
            if (!name.empty()) throw fault("which has more than a number");
            return {name, Dimension::none, 1.0};
        }
        if (name.empty()) throw fault("which has no unit");
        const auto unit = std::find_if(units.begin(), units.end(), [&](const Unit& u) { return u.name == name; });
        if (unit == units.end()) throw fault("whose unit \"" + std::string(name) + "\" is not known");
        if (unit->dimension != dimension_)
            throw fault("but " + std::string(name) + " is the unit of " + std::string(words(unit->dimension).noun));
        return *unit;
    }

    void require_sign(double value) const {
        if (!std::isfinite(value)) throw fault("which is too large");
        if (asked_.sign == Sign::positive && !(value > 0)) throw fault("which must be above zero");
        if (asked_.sign == Sign::not_negative && !(value >= 0)) throw fault("which must not be negative");
    }

    std::string_view text_;
    Dimension dimension_;
    const QuantityAsked& asked_;
};

double in_si(std::string_view text, Dimension dimension, const QuantityAsked& asked) {
    return QuantityReader(text, dimension, asked).in_si();
}

std::optional<Area> area_unit(std::string_view name) {
    for (const Unit& unit : units)
        if (unit.dimension == Dimension::area && unit.name == name) return Area::from_si(unit.times / unit.over);
    return std::nullopt;
}

Error power_law_fault(std::string_view text, const QuantityAsked& asked, const std::string& what) {
    return input_error(asked.subject + " is \"" + std::string(text) + "\", " + what +
                       "; write a length times a unit of area to a power from 0 to 2, such as \"2.70 m * km2^0.352\"" +
                       " (units of area: " + joined(unit_names(Dimension::area)) + "), or a plain length");
}

}  // namespace

Length length_from_text(std::string_view text, const QuantityAsked& asked) {
    return Length::from_si(in_si(text, Dimension::length, asked));
}
Area area_from_text(std::string_view text, const QuantityAsked& asked) {
    return Area::from_si(in_si(text, Dimension::area, asked));
}
Duration duration_from_text(std::string_view text, const QuantityAsked& asked) {
    return Duration::from_si(in_si(text, Dimension::duration, asked));
}
Speed speed_from_text(std::string_view text, const QuantityAsked& asked) {
    return Speed::from_si(in_si(text, Dimension::speed, asked));
}
Intensity intensity_from_text(std::string_view text, const QuantityAsked& asked) {
    return Intensity::from_si(in_si(text, Dimension::intensity, asked));
}
double fraction_from_text(std::string_view text, const QuantityAsked& asked) {
    return in_si(text, Dimension::fraction, asked);
}
double number_from_text(std::string_view text, const QuantityAsked& asked) {
    return in_si(text, Dimension::none, asked);
}

Length PowerLaw::operator()(Area area) const {
    return coefficient * std::pow(area / unit, exponent);
}

PowerLaw power_law_from_text(std::string_view text, const QuantityAsked& asked) {
    const auto star = text.find('*');
    if (star == std::string_view::npos)
        return {.coefficient = length_from_text(text, asked), .unit = square_kilometres(1), .exponent = 0.0};
    const std::string_view power = trimmed(text.substr(star + 1), line_blanks);
    const auto caret = power.find('^');
    if (caret == std::string_view::npos) throw power_law_fault(text, asked, "which has no power after the *");
    const auto unit = area_unit(trimmed(power.substr(0, caret), line_blanks));
    if (!unit) throw power_law_fault(text, asked, "where no unit of area stands before the ^");
    const QuantityAsked part{.subject = asked.subject + " (the power)", .example = "0.352", .sign = Sign::not_negative};
    const double exponent = number_from_text(power.substr(caret + 1), part);
    if (!(exponent <= 2)) throw power_law_fault(text, asked, "whose power is above 2");
    return {.coefficient = length_from_text(text.substr(0, star), asked), .unit = *unit, .exponent = exponent};
}

}  // namespace rillclock
