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

std::string file_name_of(const Study& study) {
    return study.file.empty() ? "the study" : study.file;
}

std::optional<RainSource> source_of(const Study& study, std::string_view file_text) {
    const RainStudy& rain = study.rain;
    if (rain.file) return rain_from_text(file_text, *rain.file, rain.block);
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
    throw input_error(file_name_of(study) + " states raster_return_period = " + significant(wanted) +
                      ", which is not among its return_periods " + list_of_years(periods) + "; add it to them");
}

std::vector<StudyStorm> storms_from(const Study& study, const RainSource& source) {
    std::vector<StudyStorm> storms;
    for (const double period : periods_of(study))
        storms.push_back({period, source.curve(period, study.peaks.least_time.value_or(standard_least_time))});
    return storms;
}

std::string depth_text(Length depth) {
    return significant(in_inches(depth), 4) + " in (" + significant(in_millimetres(depth), 4) + " mm)";
}

void tell_difference(Length stated, Length read, const RainSource& source, Notices& notices) {
    const double difference = std::abs(read / stated - 1.0);
    if (!(difference > told_difference)) return;
    notices.push_back({.code = "rain-depths-differ",
                       .text = "two_year_24_hour is stated as " + depth_text(stated) + ", while " +
                               source.echo.source + " gives " + depth_text(read) + "; the stated depth was taken",
                       .value = difference,
                       .threshold = told_difference});
}

/// The 2-year 24-hour depth as stated, else as the source has it.
std::optional<Length> settled_depth(const Study& study, const std::optional<RainSource>& source, Notices& notices) {
    const std::optional<Length> stated = study.rain.two_year_24_hour;
    const std::optional<Length> read = source ? source->two_year_24_hour() : std::nullopt;
    if (read && stated) tell_difference(*stated, *read, *source, notices);
    if (stated || read) return stated ? stated : read;
    if (study.timing.is_kinematic()) return std::nullopt;
    if (!source) throw input_error(rain_is_missing(file_name_of(study)));
    throw input_error(
        sentence(source->echo) +
        ", so the 2-year 24-hour depth that NRCS sheet flow needs cannot be read from it; state it under [rain] as "
        "two_year_24_hour = \"3.6 in\" or as --rain \"3.6 in\"");
}

ZoneRain zone_rain(const Study& study, const ZoneText& text, Notices& notices) {
    ZoneRain zone{.file = text.file, .source = rain_from_text(text.text, text.file, study.rain.block)};
    notices.insert(notices.end(), zone.source.notices.begin(), zone.source.notices.end());
    zone.two_year_24_hour = settled_depth(study, zone.source, notices);
    zone.storms = storms_from(study, zone.source);
    return zone;
}

/// What is told of the rain outside of all zones where there is none: that of the first zone.
void take_first_zone(StudyRain& rain) {
    rain.is_everywhere = false;
    rain.source = rain.zones.front().source;
    rain.two_year_24_hour = rain.zones.front().two_year_24_hour;
    rain.storms = rain.zones.front().storms;
}

}  // namespace

Duration StudyRain::first_assumed() const {
    Duration first = StormSearch{}.start;
    if (source) first = std::min(first, source->echo.range.last.value_or(first));
    for (const ZoneRain& zone : zones) first = std::min(first, zone.source.echo.range.last.value_or(first));
    return first;
}

StudyRain study_rain(const Study& study, std::string_view file_text, std::span<const ZoneText> zones) {
    StudyRain rain{.source = source_of(study, file_text)};
    if (rain.source) rain.notices = rain.source->notices;
    for (const ZoneText& zone : zones) rain.zones.push_back(zone_rain(study, zone, rain.notices));
    if (!zones.empty() && !rain.source) {
        take_first_zone(rain);
    } else {
        rain.two_year_24_hour = settled_depth(study, rain.source, rain.notices);
        if (rain.source) rain.storms = storms_from(study, *rain.source);
    }
    if (rain.source) rain.raster = raster_place(study, periods_of(study));
    return rain;
}

}  // namespace rillclock
