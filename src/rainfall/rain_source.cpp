#include "rillclock/rainfall/rain_source.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/rainfall/atlas14_text.hpp"
#include "rillclock/rainfall/design_rain.hpp"
#include "rillclock/rainfall/rain_table_text.hpp"
#include "rillclock/rainfall/return_periods.hpp"

namespace rillclock {
namespace {

constexpr Duration day = hours(24);

std::string duration_words(Duration duration) {
    if (duration >= 2 * day) return significant(duration / day, 4) + " days";
    if (duration >= hours(2)) return significant(in_hours(duration), 4) + " h";
    return significant(in_minutes(duration), 4) + " min";
}

std::string range_words(const RainRange& range) {
    if (!range.last) return "all durations from " + duration_words(range.first);
    return duration_words(range.first) + " to " + duration_words(*range.last);
}

/// Formulas of one period each, rising; or the one for all.
using Formulas = std::vector<PeriodFormula>;

bool holds_for_all(const Formulas& formulas) {
    return formulas.front().formula.for_all_periods() || !formulas.front().return_period;
}

std::vector<double> periods_of(const Formulas& formulas) {
    std::vector<double> years;
    for (const PeriodFormula& each : formulas) years.push_back(*each.return_period);
    return years;
}

FormulatedRain of_period(const Formulas& formulas, double return_period, const std::string& source) {
    if (holds_for_all(formulas)) {
        if (!(return_period >= 1))
            throw input_error(source + " is asked for a return period of " + significant(return_period) +
                              " years; one year is the least");
        return {.parts = {{formulas.front().formula, return_period, 1.0}}};
    }
    const std::vector<double> years = periods_of(formulas);
    const BetweenPeriods between = between_periods(years, return_period, source);
    if (between.lower == between.upper)
        return {.parts = {{formulas[between.lower].formula, years[between.lower], 1.0}}};
    return {.parts = {{formulas[between.lower].formula, years[between.lower], 1 - between.weight_of_upper},
                      {formulas[between.upper].formula, years[between.upper], between.weight_of_upper}}};
}

void require_formulas(const Formulas& formulas, const std::string& subject) {
    if (formulas.empty()) throw input_error(subject + " states no formula; give one for each return period");
    for (const PeriodFormula& each : formulas) {
        if (each.return_period && !(*each.return_period > 0 && std::isfinite(*each.return_period)))
            throw input_error(subject + " has a formula for " + significant(*each.return_period) +
                              " years; a return period must be above zero");
        if (each.formula.for_all_periods() && each.return_period)
            throw input_error(subject + " has a formula with T for " + significant(*each.return_period) +
                              " years alone; state it without a return period");
        if (!each.return_period && formulas.size() > 1)
            throw input_error(subject +
                              " has several formulas of which one is without a return period; state it for "
                              "each, or one formula for all");
        if (!each.return_period && !each.formula.for_all_periods())
            throw input_error(subject + " has a formula without T and without a return period; say for which it is");
    }
}

void require_no_period_twice(const Formulas& sorted, const std::string& subject) {
    for (std::size_t i = 1; i < sorted.size(); ++i)
        if (!(*sorted[i].return_period > *sorted[i - 1].return_period))
            throw input_error(subject + " has two formulas for " + significant(*sorted[i].return_period) +
                              " years; leave one");
}

void require_range(const RainRange& range, const std::string& subject) {
    const bool good = range.first >= seconds(0) && (!range.last || *range.last > range.first);
    if (!good)
        throw input_error(subject +
                          " holds between two durations of which the first is below zero or not shorter than "
                          "the last; state them as in \"5 min\" and \"24 h\"");
}

std::string period_subject(const PeriodFormula& each, const std::string& subject) {
    return each.return_period ? subject + ", " + significant(*each.return_period) + " years," : subject;
}

/// The durations at which formulas of several return periods are held against one another.
constexpr std::array looked_at{minutes(5), minutes(10), minutes(15), minutes(30), hours(1),
                               hours(2),   hours(3),    hours(6),    hours(12),   hours(24)};

bool is_within(const RainRange& range, Duration duration) {
    return duration >= range.first && (!range.last || duration <= *range.last);
}

std::optional<Duration> first_crossing(const PeriodFormula& lower, const PeriodFormula& upper, const RainRange& range) {
    for (const Duration duration : looked_at)
        if (is_within(range, duration) && !(upper.formula(duration, 1.0) >= lower.formula(duration, 1.0)))
            return duration;
    return std::nullopt;
}

Notices crossing_notices(const Formulas& formulas, const RainRange& range, const std::string& subject) {
    Notices notices;
    for (std::size_t i = 1; i < formulas.size(); ++i)
        if (const auto at = first_crossing(formulas[i - 1], formulas[i], range))
            notices.push_back({.code = "rain-formulas-cross",
                               .text = subject + " gives less rain for " + significant(*formulas[i].return_period) +
                                       " years than for " + significant(*formulas[i - 1].return_period) + " years at " +
                                       duration_words(*at) + "; check the formulas or the durations they hold for"});
    return notices;
}

std::string_view unit_words(Intensity unit) {
    if (unit == inches_per_hour(1)) return "in/h";
    return unit == millimetres_per_hour(1) ? "mm/h" : "cm/h";
}

RainEcho echo_of(const Formulas& formulas, const RainRange& range, const std::string& subject) {
    return {.source = subject,
            .kind = "formula",
            .quantity = "intensity",
            .unit = std::string(unit_words(formulas.front().formula.intensity_unit)),
            .return_periods = holds_for_all(formulas) ? std::vector<double>{} : periods_of(formulas),
            .range = range};
}

bool reaches_two_years(const std::vector<double>& periods) {
    return periods.empty() || (periods.front() <= 2 && periods.back() >= 2);
}

}  // namespace

std::string sentence(const RainEcho& echo) {
    std::string text = echo.source + ": " + echo.kind;
    if (!echo.place.empty()) text += " (" + echo.place + ")";
    if (!echo.block.empty()) text += ", " + echo.block;
    text += ", " + echo.quantity + " in " + echo.unit;
    if (!echo.series.empty()) text += ", " + echo.series;
    const std::string years =
        echo.return_periods.empty() ? "all return periods" : list_of_years(echo.return_periods) + " years";
    return text + ", " + range_words(echo.range) + ", " + years;
}

RainCurve RainSource::curve(double return_period, Duration least_time) const {
    if (const auto* table = std::get_if<IntensityTable>(&law))
        return {table->of_period(return_period, echo.source), echo.range, least_time, echo.source};
    return {of_period(std::get<Formulas>(law), return_period, echo.source), echo.range, least_time, echo.source};
}

std::optional<Length> RainSource::two_year_24_hour() const {
    const bool reaches_a_day = echo.range.last && *echo.range.last >= day && echo.range.first <= day;
    if (!reaches_a_day || !reaches_two_years(echo.return_periods)) return std::nullopt;
    const Intensity intensity = curve(2, seconds(0)).at(day);
    return checked_two_year_24_hour(metres(intensity.si() * day.si()), echo.source + ": the 2-year 24-hour depth");
}

RainSource rain_from_formulas(std::vector<PeriodFormula> formulas, RainRange range, std::string_view subject) {
    const std::string name(subject);
    require_formulas(formulas, name);
    require_range(range, name);
    std::sort(formulas.begin(), formulas.end(), [](const PeriodFormula& a, const PeriodFormula& b) {
        return a.return_period.value_or(0) < b.return_period.value_or(0);
    });
    require_no_period_twice(formulas, name);
    Notices notices;
    for (const PeriodFormula& each : formulas)
        for (Notice& notice : notices_about(each.formula, period_subject(each, name)))
            notices.push_back(std::move(notice));
    for (Notice& notice : crossing_notices(formulas, range, name)) notices.push_back(std::move(notice));
    RainEcho echo = echo_of(formulas, range, name);
    return {.echo = std::move(echo), .law = std::move(formulas), .notices = std::move(notices)};
}

RainSource rain_from_text(std::string_view text, std::string_view file, std::optional<Atlas14Block> block) {
    if (is_atlas14_text(text)) return rain_from_atlas14(text, file, block.value_or(Atlas14Block::estimate));
    if (!block) return rain_from_table(text, file);
    throw input_error(std::string(file) +
                      " is no NOAA Atlas 14 point file, which alone has blocks; leave out block under [rain]");
}

}  // namespace rillclock
