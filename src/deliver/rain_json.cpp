#include "rain_json.hpp"

#include <cmath>
#include <variant>

namespace rillclock {
namespace {

Json points_json(const TabulatedRain& table) {
    Json points = Json::array();
    for (const RainPoint& point : table.points) {
        points.push_back({digits(in_minutes(point.duration), 10), digits(in_millimetres_per_hour(point.intensity), 10)});
    }
    return points;
}

/// Parts of i = Σ factor / (t^e + b)^c, each in its own units; the factor has the weight and the return period in it.
Json formula_parts_json(const FormulatedRain& formulas) {
    Json parts = Json::array();
    for (const FormulatedRain::Part& part : formulas.parts) {
        const IntensityFormula& formula = part.formula;
        parts.push_back({{"weighted_factor", digits(part.weight * formula.factor * std::pow(part.return_period, formula.period_exponent), 10)},
                         {"time_exponent", formula.time_exponent},
                         {"added", formula.added},
                         {"outer_exponent", formula.outer_exponent},
                         {"intensity_unit_mm_per_h", digits(in_millimetres_per_hour(formula.intensity_unit), 10)},
                         {"time_unit_min", digits(in_minutes(formula.time_unit), 10)}});
    }
    return parts;
}

Json curves_json(const std::vector<StudyStorm>& storms) {
    Json curves = Json::array();
    for (const StudyStorm& storm : storms) {
        Json curve = {{"return_period", storm.return_period}};
        if (const auto* table = std::get_if<TabulatedRain>(&storm.rain.law())) curve["points"] = points_json(*table);
        if (const auto* formulas = std::get_if<FormulatedRain>(&storm.rain.law())) curve["formula_parts"] = formula_parts_json(*formulas);
        curves.push_back(curve);
    }
    return curves;
}

Json echo_json(const RainEcho& echo) {
    return {{"source", echo.source},
            {"kind", echo.kind},
            {"block", text_or_null(echo.block)},
            {"quantity", echo.quantity},
            {"unit", echo.unit},
            {"series", text_or_null(echo.series)},
            {"place", text_or_null(echo.place)},
            {"source_return_periods", echo.return_periods},
            {"first_duration_min", in_minutes(echo.range.first)},
            {"last_duration_min", echo.range.last ? Json(in_minutes(*echo.range.last)) : Json(nullptr)}};
}

Json zones_json(const StudyRain& rain) {
    Json zones = Json::array();
    for (const ZoneRain& zone : rain.zones) {
        Json json = echo_json(zone.source.echo);
        json["rain_2_year_24_hour_mm"] =
            zone.two_year_24_hour ? digits(in_millimetres(*zone.two_year_24_hour)) : Json(nullptr);
        json["curves"] = curves_json(zone.storms);
        zones.push_back(json);
    }
    return zones;
}

}  // namespace

/// Without rain outside of the zones, what stands for it (that of the first zone) is no echo.
Json rain_json(const StudyResult& result) {
    Json periods = Json::array();
    for (const StudyStorm& storm : result.rain.storms) periods.push_back(storm.return_period);
    Json json = result.rain.is_everywhere ? echo_json(result.rain.source->echo) : Json::object();
    json["least_time_min"] = in_minutes(result.study.peaks.least_time.value_or(standard_least_time));
    json["return_periods"] = periods;
    json["raster_return_period"] = result.rain.raster_storm().return_period;
    if (result.rain.is_everywhere) json["curves"] = curves_json(result.rain.storms);
    if (!result.rain.zones.empty()) json["zones"] = zones_json(result.rain);
    return json;
}

}  // namespace rillclock
