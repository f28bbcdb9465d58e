#include "rillclock/study/study_rain.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/rainfall/design_rain.hpp"
#include "rillclock/rainfall/return_periods.hpp"

namespace rillclock {
namespace {

constexpr double told_difference = 0.01;  // of the two depths

std::string name_of(const Study& study) {
    return study.file.empty() ? "the study" : study.file;
}

std::optional<RainSource> source_of(const Study& study, std::string_view file_text) {
    const RainStudy& rain = study.rain;
    if (rain.file) return rain_from_text(file_text, *rain.file);
    if (rain.formulas.empty()) return std::nullopt;
    std::vector<PeriodFormula> formulas;
    for (const StatedRainFormula& stated : rain.formulas) formulas.push_back(stated.formula);
    const RainRange range{.first = rain.formula_from.value_or(seconds(0)), .last = rain.formula_to};
    return rain_from_formulas(std::move(formulas), range, rain.formulas.front().subject);
}

std::vector<double> periods_of(const Study& study) {
    if (!study.rain.return_periods.empty()) return study.rain.return_periods;
    return {study.timing.raster_return_period.value_or(standard_return_period)};
}

/// The place of the rasters' return period among those listed.
std::size_t raster_place(const Study& study, const std::vector<double>& periods) {
    const double wanted = study.timing.raster_return_period.value_or(standard_return_period);
    const auto found = std::find(periods.begin(), periods.end(), wanted);
    if (found != periods.end()) return static_cast<std::size_t>(found - periods.begin());
    if (!study.timing.raster_return_period) return 0;
    throw input_error(name_of(study) + " states raster_return_period = " + significant(wanted) +
                      ", which is not among its return_periods " + list_of_years(periods) + "; add it to them");
}

void read_storms(const Study& study, StudyRain& rain) {
    const std::vector<double> periods = periods_of(study);
    rain.raster = raster_place(study, periods);
    for (const double period : periods)
        rain.storms.push_back(
            {period, rain.source->curve(period, study.peaks.least_time.value_or(standard_least_time))});
}

std::string depth_text(Length depth) {
    return significant(in_inches(depth), 4) + " in (" + significant(in_millimetres(depth), 4) + " mm)";
}

void tell_difference(Length stated, Length read, StudyRain& rain) {
    const double difference = std::abs(read / stated - 1.0);
    if (!(difference > told_difference)) return;
    rain.notices.push_back({.code = "rain-depths-differ",
                            .text = "two_year_24_hour is stated as " + depth_text(stated) + ", while " +
                                    rain.source->echo.source + " gives " + depth_text(read) +
                                    "; the stated depth was taken",
                            .value = difference,
                            .threshold = told_difference});
}

void settle_depth(const Study& study, StudyRain& rain) {
    rain.two_year_24_hour = study.rain.two_year_24_hour;
    const std::optional<Length> read = rain.source ? rain.source->two_year_24_hour() : std::nullopt;
    if (read && rain.two_year_24_hour) tell_difference(*rain.two_year_24_hour, *read, rain);
    if (read && !rain.two_year_24_hour) rain.two_year_24_hour = read;
    if (rain.two_year_24_hour || study.timing.is_kinematic()) return;
    if (!rain.source) throw input_error(rain_is_missing(name_of(study)));
    throw input_error(
        sentence(rain.source->echo) +
        ", so the 2-year 24-hour depth that NRCS sheet flow needs cannot be read from it; state it under [rain] as "
        "two_year_24_hour = \"3.6 in\" or as --rain \"3.6 in\"");
}

}  // namespace

Duration StudyRain::first_assumed() const {
    const std::optional<Duration> last = source ? source->echo.range.last : std::nullopt;
    return std::min(StormSearch{}.start, last.value_or(StormSearch{}.start));
}

StudyRain study_rain(const Study& study, std::string_view file_text) {
    StudyRain rain{.source = source_of(study, file_text)};
    if (rain.source) rain.notices = rain.source->notices;
    settle_depth(study, rain);
    if (rain.source) read_storms(study, rain);
    return rain;
}

}  // namespace rillclock
