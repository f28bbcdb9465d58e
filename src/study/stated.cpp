#include "stated.hpp"

#include <algorithm>
#include <charconv>
#include <chrono>
#include <variant>

#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/study/study_keys.hpp"

namespace rillclock {
namespace {

/// The form of a key, taken from its description, as an example in errors.
std::string form_of(std::string_view key) {
    for (const StudyKey& known : study_keys())
        if (known.key == key) return std::string(known.form);
    throw bug("no study key " + std::string(key));
}

std::string without_quotes(std::string form) {
    std::erase(form, '"');
    return form;
}

/// Whether a text is a day of the calendar, as year, month and day: "2026-05-01".
bool is_calendar_day(const std::string& text) {
    constexpr std::size_t parts_at[] = {0, 5, 8};
    int parts[3] = {0, 0, 0};
    if (text.size() != 10 || text[4] != '-' || text[7] != '-') return false;
    for (std::size_t i = 0; i < 3; ++i) {
        const char* end = text.data() + parts_at[i] + (i == 0 ? 4 : 2);
        const auto [last, error] = std::from_chars(text.data() + parts_at[i], end, parts[i]);
        if (error != std::errc() || last != end || parts[i] < 0) return false;
    }
    return (std::chrono::year(parts[0]) / parts[1] / parts[2]).ok();
}

}  // namespace

Stated::Stated(std::string_view key, const StudyValue& value) : form_(form_of(key)), value_(value) {}

const std::string& Stated::text() const {
    const auto* text = std::get_if<std::string>(&value_.value);
    if (text == nullptr) throw fault("is " + shown() + "; write a text in quotes, such as " + form_);
    if (text->empty()) throw fault("is empty; write for example " + form_ + ", or leave it out");
    return *text;
}

QuantityAsked Stated::asked(Sign sign) const {
    return {.subject = value_.subject, .example = without_quotes(form_), .sign = sign};
}

QuantityAsked Stated::one_of_range() const {
    std::string example = without_quotes(form_);
    return {.subject = value_.subject, .example = example.substr(0, example.find(" to "))};
}

double Stated::fraction(Sign sign) const {
    const double share = fraction_from_text(text(), asked(sign));
    if (!(share < 1)) throw fault("is \"" + text() + "\"; it must lie under 100 %, such as " + form_);
    return share;
}

double Stated::number(double least, double greatest) const {
    double number = std::numeric_limits<double>::quiet_NaN();
    if (const auto* real = std::get_if<double>(&value_.value)) number = *real;
    if (const auto* whole = std::get_if<std::int64_t>(&value_.value)) number = static_cast<double>(*whole);
    if (!(number >= least && number <= greatest))
        throw fault("is " + shown() + "; write a number from " + significant(least) + " to " +
                    significant(greatest) + " without quotes, such as " + form_);
    return number;
}

int Stated::whole_number(int least, int greatest) const {
    const auto* whole = std::get_if<std::int64_t>(&value_.value);
    const bool is_open = greatest == std::numeric_limits<int>::max();
    if (whole == nullptr || *whole < least || *whole > greatest)
        throw fault("is " + shown() + "; write a whole number, " + std::to_string(least) +
                    (is_open ? " or more" : " to " + std::to_string(greatest)) + ", without quotes, such as " + form_);
    return static_cast<int>(*whole);
}

std::size_t Stated::choice(const std::vector<std::string_view>& served) const {
    for (std::size_t place = 0; place < served.size(); ++place)
        if (text() == served[place]) return place;
    std::string list;
    for (const auto word : served) list += (list.empty() ? "" : " or ") + ("\"" + std::string(word) + "\"");
    throw fault("is \"" + text() + "\"; write " + list + did_you_mean(text(), served));
}

std::vector<double> Stated::return_periods() const {
    const auto* list = std::get_if<std::vector<double>>(&value_.value);
    const std::vector<double> years = list != nullptr ? *list : std::vector{number(1, greatest_return_period)};
    double last = 0.0;
    for (const double period : years) {
        if (!(period >= 1 && period <= greatest_return_period && period > last))
            throw fault("is not a list of return periods; write years from 1 on, rising, such as " + form_);
        last = period;
    }
    if (years.empty()) throw fault("is empty; write return periods in years, such as " + form_);
    return years;
}

std::vector<std::string> Stated::texts() const {
    if (is_text()) return {text()};
    const auto* list = std::get_if<std::vector<std::string>>(&value_.value);
    if (list == nullptr || list->empty()) throw fault("is " + shown() + "; write a list of texts in quotes, such as " + form_);
    if (std::any_of(list->begin(), list->end(), [](const std::string& text) { return text.empty(); }))
        throw fault("has an empty text in its list; write for example " + form_);
    return *list;
}

std::string Stated::date() const {
    if (!is_text() || !is_calendar_day(text())) throw fault("is " + shown() + "; write a day as year, month and day, such as " + form_);
    return text();
}

std::optional<double> Stated::entry_period() const {
    if (value_.entry.empty()) return std::nullopt;
    const double years = number_from_text(value_.entry, {.subject = value_.subject, .example = "10"});
    if (!(years >= 1 && years <= greatest_return_period))
        throw fault("stands under " + value_.entry + "; name it by its return period in years, from 1 on");
    return years;
}

int Stated::entry_class() const {
    int value = 0;
    const char* end = value_.entry.data() + value_.entry.size();
    const auto [last, error] = std::from_chars(value_.entry.data(), end, value);
    if (value_.entry.empty()) throw fault("is " + shown() + "; write a table, such as " + form_);
    if (error != std::errc() || last != end)
        throw fault("stands under " + value_.entry +
                    "; name it by the whole number the raster holds, such as " + form_);
    return value;
}

std::string Stated::shown() const {
    struct Show {
        std::string operator()(const std::string& text) const { return "\"" + text + "\""; }
        std::string operator()(std::int64_t whole) const { return std::to_string(whole); }
        std::string operator()(double real) const { return significant(real); }
        std::string operator()(bool truth) const { return truth ? "true" : "false"; }
        std::string operator()(const std::vector<double>&) const { return "a list"; }
        std::string operator()(const std::vector<std::string>&) const { return "a list of texts"; }
    };
    return std::visit(Show{}, value_.value);
}

}  // namespace rillclock
