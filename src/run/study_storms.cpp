#include "study_storms.hpp"

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace rillclock {
namespace {

std::string rounds_text(const StormTime& iteration) {
    const StormIteration& last = iteration.rows.back();
    return "after " + std::to_string(iteration.rows.size()) + " rounds " + significant(in_minutes(last.assumed), 4) +
           " min were assumed and " + significant(in_minutes(last.computed), 4) + " min computed";
}

/// Why the rain cannot be read at the time the rounds had come to.
std::string why_beyond(const StormTime& iteration, const RainCurve& rain) {
    try {
        (void)rain.at(iteration.rows.empty() ? seconds(0) : iteration.time());
    } catch (const Error& error) {
        return error.what();
    }
    return "the rain does not reach the time";
}

[[noreturn]] void refuse(const StormTime& iteration, const DesignPoint& point, const StudyStorm& storm) {
    const std::string subject =
        "the storm of " + significant(storm.return_period, 6) + " years at the point '" + point.name + "' ";
    if (iteration.end == StormEnd::beyond_the_rain) {
        throw input_error(subject + "outlasts the rain: " + why_beyond(iteration, storm.rain));
    }
    throw input_error(subject + "does not settle: " + rounds_text(iteration) +
                      "; look at the rain, whose intensity must fall with duration and its depth must not");
}

/// The storm factor that the 2-year 24-hour depth gives, where sheet flow hangs on nothing else.
std::optional<double> factor_of(const Study& study, const std::optional<Length>& two_year_24_hour) {
    if (study.timing.is_kinematic()) return std::nullopt;
    return nrcs_storm_factor(*two_year_24_hour);
}

}  // namespace

std::vector<IntensityOfDuration> intensities_of(const std::vector<StudyStorm>& storms) {
    std::vector<IntensityOfDuration> intensities;
    for (const StudyStorm& storm : storms) {
        intensities.emplace_back([&curve = storm.rain](Duration duration) { return curve.within(duration); });
    }
    return intensities;
}

std::optional<OwnStorms> own_storms_of(const Study& study, const TravelRules& rules, const StudyRain& rain) {
    if (!study.timing.is_kinematic() && rain.zones.empty()) return std::nullopt;
    OwnStorms storms{.rain = intensities_of(rain.storms),
                     .raster = rain.raster,
                     .duration = study.timing.storm.value_or(StormDuration::whole_path),
                     .reference_factor = rules.sheet.storm_factor,
                     .ignore_tail = study.timing.ignore_tail,
                     .search = {.start = rain.first_assumed()},
                     .storm_factor = factor_of(study, rain.two_year_24_hour),
                     .zones = {},
                     .is_everywhere = rain.is_everywhere};
    for (const ZoneRain& zone : rain.zones) {
        storms.zones.push_back({.rain = intensities_of(zone.storms), .storm_factor = factor_of(study, zone.two_year_24_hour)});
    }
    return storms;
}

void require_settled(const std::vector<PointHeads>& heads, const std::vector<DesignPoint>& points,
                     const StudyRain& rain) {
    for (std::size_t i = 0; i < heads.size(); ++i) {
        for (std::size_t period = 0; period < heads[i].storms.size(); ++period) {
            const StormTime& iteration = heads[i].storms[period].iteration;
            const StudyStorm& storm = rain.storms_of(heads[i].rain_zone.number)[period];
            if (iteration.end != StormEnd::settled) refuse(iteration, points[i], storm);
        }
    }
}

std::string storm_words(const Study& study, const StudyRain& rain) {
    if (!study.timing.is_kinematic() && !rain.zones.empty())
        return "2-year 24-hour depth of the rain zone of each last point; of the first zone where there is no point";
    if (!study.timing.is_kinematic() && study.timing.channel.design_storm)
        return "2-year 24-hour depth " + significant(in_millimetres(*rain.two_year_24_hour)) + " mm; in channels of " +
               significant(rain.raster_storm().return_period, 6) + " years, as long as the arrival at each";
    if (!study.timing.is_kinematic())
        return "2-year 24-hour depth " + significant(in_millimetres(*rain.two_year_24_hour)) + " mm";
    return "of " + significant(rain.raster_storm().return_period, 6) + " years, as long as the " +
           std::string(words(study.timing.storm.value_or(StormDuration::whole_path))) +
           " of each last point; of 5 min where there is no point";
}

std::string sheet_words(const Study& study) {
    if (!study.timing.is_kinematic()) return "NRCS";
    return "kinematic wave, constant " + significant(study.timing.sheet_constant.value_or(kinematic_constant_hec22)) +
           (study.timing.sheet_takes_runoff ? ", C i in place of i" : "");
}

}  // namespace rillclock
