#include <algorithm>
#include <array>
#include <cctype>
#include <charconv>
#include <cmath>
#include <map>
#include <set>

#include "rillclock/core/error.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/core/trimmed.hpp"
#include "rillclock/rainfall/intensity_formula.hpp"

namespace rillclock {
namespace {

constexpr std::string_view right_form =
    "write it with its units, as in \"i[in/h] = 94.9 / (t[min]^0.88 + 9.04)\" or \"i[mm/h] = a / (t[min] + b)^c; "
    "a = 900, b = 10, c = 0.8\"";
constexpr std::string_view blanks = " \t";

bool is_letter(char c) {
    return std::isalpha(static_cast<unsigned char>(c)) != 0;
}

/// A formula's text, taken apart from front to back.
class FormulaReader {
public:
    FormulaReader(std::string_view text, std::string_view subject) : text_(text), subject_(subject) {
        const auto semicolon = text.find(';');
        rest_ = text.substr(0, semicolon);
        if (semicolon != std::string_view::npos) read_letters(text.substr(semicolon + 1));
    }

    IntensityFormula read() {
        IntensityFormula formula;
        require("i", "does not begin with i[unit] =");
        formula.intensity_unit = intensity_unit();
        require("=", "has no = after i[unit]");
        formula.factor = positive("the factor");
        read_period(formula);
        require("/", "has no / after its factor");
        read_denominator(formula);
        if (!blanks_skipped().empty()) throw fault("goes on with \"" + std::string(rest_) + "\" after its end");
        require_all_letters_used();
        return formula;
    }

private:
    void read_period(IntensityFormula& formula) {
        const bool starred = take("*");
        if (!take("T")) {
            if (starred) throw fault("has a * that is not followed by T^m");
            return;
        }
        require("^", "has no ^ after T");
        formula.period_exponent = positive("the power of T");
    }

    void read_denominator(IntensityFormula& formula) {
        if (!take("(")) {
            read_time(formula);
            return;
        }
        if (!blanks_skipped().starts_with('t')) {
            formula.added = not_negative("the number added to t");
            require("+", "has no + between the number and t");
            read_time(formula);
        } else {
            read_time(formula);
            if (take("+")) formula.added = not_negative("the number added to t");
        }
        require(")", "has no ) where its denominator should end");
        if (take("^")) formula.outer_exponent = positive("the power of the denominator");
    }

    void read_time(IntensityFormula& formula) {
        require("t", "has no t[unit] where the duration should stand");
        formula.time_unit = time_unit();
        if (take("^")) formula.time_exponent = positive("the power of t");
    }

    /// The text between brackets.
    std::string_view bracketed(std::string_view symbol) {
        const std::string lacking = "has no unit in brackets after " + std::string(symbol);
        require("[", lacking);
        const auto close = rest_.find(']');
        if (close == std::string_view::npos) throw fault(lacking);
        const std::string_view unit = trimmed(rest_.substr(0, close), blanks);
        rest_.remove_prefix(close + 1);
        return unit;
    }

    Intensity intensity_unit() {
        const std::string_view unit = bracketed("i");
        if (unit == "in/h") return inches_per_hour(1);
        if (unit == "mm/h") return millimetres_per_hour(1);
        if (unit == "cm/h") return millimetres_per_hour(10);
        throw fault("has the unit \"" + std::string(unit) + "\" for i, where in/h, mm/h or cm/h is wanted");
    }

    Duration time_unit() {
        const std::string_view unit = bracketed("t");
        if (unit == "min") return minutes(1);
        if (unit == "h") return hours(1);
        throw fault("has the unit \"" + std::string(unit) + "\" for t, where min or h is wanted");
    }

    double positive(const std::string& what) {
        const double number = value(what);
        if (!(number > 0)) throw fault("has " + what + " not above zero");
        return number;
    }

    double not_negative(const std::string& what) {
        const double number = value(what);
        if (!(number >= 0)) throw fault("has " + what + " below zero");
        return number;
    }

    /// A number, or the number a letter stands for.
    double value(const std::string& what) {
        const std::string_view text = blanks_skipped();
        if (!text.empty() && is_letter(text.front())) return value_of_letter();
        double number = 0.0;
        const auto [end, error] = std::from_chars(text.data(), text.data() + text.size(), number);
        if (error != std::errc() || !std::isfinite(number))
            throw fault("has no number where " + what + " should stand");
        rest_.remove_prefix(static_cast<std::size_t>(end - text.data()));
        return number;
    }

    double value_of_letter() {
        const std::string name(1, rest_.front());
        rest_.remove_prefix(1);
        const auto letter = letters_.find(name);
        if (letter == letters_.end()) throw fault("gives no value for its letter " + name);
        used_.insert(name);
        return letter->second;
    }

    void read_letters(std::string_view list) {
        while (true) {
            const auto comma = list.find(',');
            read_letter(list.substr(0, comma));
            if (comma == std::string_view::npos) return;
            list.remove_prefix(comma + 1);
        }
    }

    void read_letter(std::string_view text) {
        const auto equals = text.find('=');
        const std::string name(trimmed(text.substr(0, equals), blanks));
        if (equals == std::string_view::npos || name.size() != 1 || !is_letter(name.front()) || name == "t" ||
            name == "T")
            throw fault("has \"" + std::string(trimmed(text, blanks)) + "\" after its semicolon, where \"a = 900\" is wanted");
        const double number = number_from_text(
            text.substr(equals + 1),
            {.subject = std::string(subject_) + ", letter " + name, .example = "0.8", .sign = Sign::not_negative});
        if (!letters_.emplace(name, number).second) throw fault("gives its letter " + name + " two values");
    }

    void require_all_letters_used() const {
        for (const auto& [name, number] : letters_)
            if (!used_.contains(name)) throw fault("gives a value for " + name + ", which does not stand in it");
    }

    std::string_view blanks_skipped() {
        rest_.remove_prefix(std::min(rest_.find_first_not_of(blanks), rest_.size()));
        return rest_;
    }

    bool take(std::string_view wanted) {
        if (!blanks_skipped().starts_with(wanted)) return false;
        rest_.remove_prefix(wanted.size());
        return true;
    }

    void require(std::string_view wanted, const std::string& otherwise) {
        if (!take(wanted)) throw fault(otherwise);
    }

    [[nodiscard]] Error fault(const std::string& what) const {
        return input_error(std::string(subject_) + " is \"" + std::string(text_) + "\", which " + what + "; " +
                           std::string(right_form));
    }

    std::string_view text_;
    std::string_view subject_;
    std::string_view rest_ = {};
    std::map<std::string, double> letters_ = {};
    std::set<std::string> used_ = {};
};

}  // namespace

IntensityFormula intensity_formula_from_text(std::string_view text, std::string_view subject) {
    return FormulaReader(text, subject).read();
}

}  // namespace rillclock
