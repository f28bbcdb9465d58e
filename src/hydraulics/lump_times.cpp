#include "lump_times.hpp"

#include <cmath>
#include <limits>
#include <string>
#include <string_view>

#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr double no_limit = std::numeric_limits<double>::infinity();

/// Gathers what a method needs and why it may not be used. A need that is not met leaves NaN behind and no time; a
/// range that is left only says so.
class Needs {
public:
    double number(std::optional<double> value, std::string_view what, double greatest = no_limit,
                  const std::string& reason = {}) {
        if (!value) return unknown(what, reason);
        if (!(*value > 0 && *value <= greatest && std::isfinite(*value)))
            return lacking(std::string(what) + " is " + significant(*value) + ", not above zero" +
                           (greatest < no_limit ? " and at most " + significant(greatest) : std::string()));
        return *value;
    }

    Length length(std::optional<Length> value, std::string_view what) {
        return metres(number(value ? std::optional(value->si()) : std::nullopt, what));
    }

    Area area(std::optional<Area> value) {
        return square_metres(number(value ? std::optional(value->si()) : std::nullopt, "the area"));
    }

    /// A share or coefficient, which may be 0.
    double share(std::optional<double> value, std::string_view what, const std::string& reason = {}) {
        if (!value) return unknown(what, reason);
        if (!(*value >= 0 && *value <= 1))
            return lacking(std::string(what) + " is " + significant(*value) + ", not 0 to 1");
        return *value;
    }

    void rain(const IntensityOfDuration& source) {
        if (!source) lacking("the study gives no rain by duration");
    }

    /// Says that a value lies outside the published range; NaN has been said already.
    void range(double value, double low, double high, std::string_view what) {
        if (value < low) outside(std::string(what) + " is " + significant(value, 4) + ", below " + significant(low, 4));
        if (value > high)
            outside(std::string(what) + " is " + significant(value, 4) + ", above " + significant(high, 4));
    }

    void outside(const std::string& why) { why_not_ += (why_not_.empty() ? "" : "; ") + why; }

    [[nodiscard]] bool are_met() const { return met_; }

    [[nodiscard]] LumpTime with(Duration time) const {
        if (met_ && std::isfinite(time.si())) return {.time = time, .why_not = why_not_};
        return {.why_not = why_not_.empty() ? "no finite time comes of these measures" : why_not_};
    }

private:
    double unknown(std::string_view what, const std::string& reason) {
        return lacking(std::string(what) + " is not known" + (reason.empty() ? "" : ": " + reason));
    }

    double lacking(const std::string& why) {
        met_ = false;
        outside(why);
        return std::numeric_limits<double>::quiet_NaN();
    }

    bool met_ = true;
    std::string why_not_ = {};
};

std::string_view words_of(StormEnd end) {
    switch (end) {
        case StormEnd::settled:
            return "";
        case StormEnd::beyond_the_rain:
            return "the time is longer than the rain's last duration";
        case StormEnd::not_settling:
            return "the iteration with the rain does not settle";
    }
    return "";
}

/// Solves for the time with the rain and hands the solution to `judge`, which may find it outside the method's range.
template <class Judge>
LumpTime solved(Needs needs, const TimeOfIntensity& time, const IntensityOfDuration& rain, const Judge& judge) {
    if (!needs.are_met()) return needs.with(seconds(0));
    StormTime solution = solve_storm_time(time, rain);
    const bool settled = solution.end == StormEnd::settled;
    if (settled) judge(needs, solution);
    if (!settled) needs.outside(std::string(words_of(solution.end)));
    LumpTime answer = needs.with(solution.time());
    if (!settled) answer.time.reset();
    answer.iterations = std::move(solution.rows);
    return answer;
}

void no_more_to_judge(Needs&, const StormTime&) {}

Length path_of(Needs& needs, const CatchmentMeasures& catchment) {
    return needs.length(catchment.longest_path, "the longest path");
}

double slope_of(Needs& needs, const CatchmentMeasures& catchment) {
    return needs.number(catchment.path_slope(), "the slope of the longest path");
}

double coefficient_of(Needs& needs, const CatchmentMeasures& catchment) {
    return needs.share(catchment.runoff_coefficient, "the runoff coefficient", catchment.no_runoff_coefficient);
}

double retardance_of(Needs& needs, const CatchmentMeasures& catchment) {
    return needs.number(catchment.kerby_retardance, "Kerby's retardance", 1, catchment.no_kerby_retardance);
}

constexpr double square_miles_of(Area v) {
    return v / square_miles(1);
}

KerbyKirpich kerby_kirpich_of(Needs& needs, const CatchmentMeasures& catchment) {
    KerbyKirpich measures{.main_channel = path_of(needs, catchment),
                          .channel_slope = slope_of(needs, catchment),
                          .overland = needs.length(catchment.overland_length, "the overland length"),
                          .overland_slope = needs.number(catchment.overland_slope, "the overland slope"),
                          .retardance = retardance_of(needs, catchment)};
    needs.range(square_miles_of(needs.area(catchment.area)), 0.25, 150, "the area in square miles");
    needs.range(measures.main_channel / miles(1), 1, 50, "the main channel in miles");
    needs.range(in_feet(measures.overland), 0, 1200, "the overland length in feet");
    if (measures.overland >= measures.main_channel) needs.outside("the overland part is no shorter than the path");
    return measures;
}

LumpTime bransby_williams_with(const CatchmentMeasures& catchment, double slope, Needs needs, BransbyWilliams printed) {
    const Length path = path_of(needs, catchment);
    return needs.with(bransby_williams(path, needs.area(catchment.area), slope, printed));
}

}  // namespace

LumpTime nrcs_lag_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double curve_number =
        needs.number(catchment.curve_number, "the curve number", 100, catchment.no_curve_number);
    const double land_slope = needs.number(catchment.land_slope, "the slope of the land");
    needs.range(curve_number, 50, 95, "the curve number");
    needs.range(square_miles_of(needs.area(catchment.area)), 0.002, 19, "the area in square miles");
    return needs.with(nrcs_lag_concentration(path, curve_number, land_slope));
}

LumpTime kirpich_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double adjustment = needs.number(catchment.kirpich_adjustment, "Kirpich's adjustment");
    needs.range(in_acres(needs.area(catchment.area)), 1.25, 112, "the area in acres");
    needs.range(slope, 0.03, 0.10, "the slope of the longest path");
    return needs.with(kirpich(path, slope) * adjustment);
}

LumpTime california_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    return needs.with(california_culvert_practice(path, needs.length(catchment.fall, "the fall of the longest path")));
}

LumpTime kerby_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double retardance = retardance_of(needs, catchment);
    needs.range(in_feet(path), 0, 1200, "the longest path in feet");
    return needs.with(kerby(path, retardance, slope));
}

LumpTime kerby_kirpich_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const KerbyKirpich measures = kerby_kirpich_of(needs, catchment);
    needs.range(measures.channel_slope, 0.002, 0.02, "the slope of the main channel");
    return needs.with(kerby_kirpich(measures));
}

LumpTime kerby_kirpich_low_slope_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    KerbyKirpich measures = kerby_kirpich_of(needs, catchment);
    needs.range(measures.channel_slope, 0, 0.003, "the slope of the main channel");
    measures.channel_slope = texas_low_slope(measures.channel_slope);
    measures.overland_slope = texas_low_slope(measures.overland_slope);
    return needs.with(kerby_kirpich(measures));
}

LumpTime faa_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double coefficient = coefficient_of(needs, catchment);
    needs.range(in_feet(path), 0, 500, "the longest path in feet");
    return needs.with(faa(path, coefficient, slope));
}

LumpTime izzard_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double retardance = needs.number(catchment.izzard_retardance, "Izzard's retardance", 1, catchment.no_izzard_retardance);
    needs.rain(rain);
    const auto time = [&](Intensity intensity) { return izzard(path, slope, retardance, intensity); };
    return solved(needs, time, rain, [&](Needs& judged, const StormTime& solution) {
        judged.range(in_inches_per_hour(solution.intensity()) * in_feet(path), 0, izzard_greatest_in_h_ft,
                     "intensity times length in in/h and ft");
    });
}

LumpTime papadakis_kazan_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double n = needs.number(catchment.overland_n, "the overland n");
    needs.rain(rain);
    const auto time = [&](Intensity intensity) { return papadakis_kazan(path, slope, n, intensity); };
    return solved(needs, time, rain, no_more_to_judge);
}

LumpTime bransby_williams_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const double slope = slope_of(needs, catchment);
    return bransby_williams_with(catchment, slope, needs, BransbyWilliams::us);
}

LumpTime bransby_williams_equal_area_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const double slope = needs.number(catchment.equal_area_slope, "the equal-area slope");
    return bransby_williams_with(catchment, slope, needs, BransbyWilliams::australian);
}

LumpTime giandotti_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Area area = needs.area(catchment.area);
    const Length path = path_of(needs, catchment);
    const Length height = needs.length(catchment.mean_height, "the mean height above the outlet");
    needs.range(in_square_kilometres(area), 170, 70000, "the area in km2");
    return needs.with(giandotti(area, path, height));
}

LumpTime los_angeles_time(const CatchmentMeasures& catchment, const IntensityOfDuration& rain) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const double slope = slope_of(needs, catchment);
    const double coefficient =
        los_angeles_coefficient(needs.share(catchment.impervious, "the impervious share", catchment.no_impervious),
                                needs.share(catchment.undeveloped_coefficient, "the undeveloped coefficient",
                                            catchment.no_undeveloped_coefficient));
    needs.range(in_acres(needs.area(catchment.area)), 0, 40, "the area in acres");
    if (coefficient == 0) needs.number(coefficient, "the developed coefficient");
    needs.rain(rain);
    const auto time = [&](Intensity intensity) { return los_angeles(path, slope, coefficient, intensity); };
    return solved(needs, time, rain, [](Needs& judged, const StormTime& solution) {
        judged.range(in_minutes(solution.time()), 5, 30, "the time in minutes");
    });
}

LumpTime county_initial_time(const CatchmentMeasures& catchment, const IntensityOfDuration&) {
    Needs needs;
    const Length path = path_of(needs, catchment);
    const Length fall = needs.length(catchment.fall, "the fall of the longest path");
    const double k = needs.number(catchment.county_factor, "the county's K", no_limit, catchment.no_county_factor);
    needs.range(in_acres(needs.area(catchment.area)), 0, 10, "the area in acres");
    needs.range(in_feet(path), 0, 1000, "the longest path in feet");
    return needs.with(county_initial(path, fall, k));
}

}  // namespace rillclock
