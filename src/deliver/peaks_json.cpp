#include "peaks_json.hpp"

namespace rillclock {
namespace {

Json flow_json(Discharge flow) { return digits(in_cubic_metres_per_second(flow), 7); }
Json rain_json(Intensity intensity) { return digits(in_millimetres_per_hour(intensity), 9); }

Json makers_json(const StudyResult& result, const PointPeak& peak) {
    Json makers = Json::array();
    for (const SubareaShare& share : peak.makers) {
        makers.push_back({{"subarea", point_name(result, share.subarea)},
                          {"share_of_window", digits(share.of_window)},
                          {"share_of_runoff", digits(share.of_runoff)}});
    }
    return makers;
}

/// Ten digits, so that what is read at that time has seven.
Json exact_minutes(Duration time) { return digits(in_minutes(time), 10); }

/// When the stretch that makes the peak begins, after the first water.
Json window_begins(const PointPeak& peak) {
    for (const TimeAreaRow& row : peak.rows) {
        if (row.duration == peak.window.duration) return exact_minutes(row.window_begins);
    }
    return nullptr;
}

Json whole_json(const PointPeak& peak) {
    return {{"time_min", exact_minutes(peak.whole_time)},
            {"intensity_mm_per_h", rain_json(peak.whole_intensity)},
            {"flow_m3_per_s", flow_json(peak.whole)}};
}

Json partial_json(const StudyResult& result, const PointPeak& peak) {
    return {{"duration_min", exact_minutes(peak.window.duration)},
            {"begins_min", window_begins(peak)},
            {"intensity_mm_per_h", rain_json(peak.peak_intensity)},
            {"flow_m3_per_s", flow_json(peak.partial)},
            {"flow_unbinned_at_least_m3_per_s", flow_json(peak.partial_at_least)},
            {"flow_unbinned_at_most_m3_per_s", flow_json(peak.partial_at_most)},
            {"runoff_area_m2", number(from_fixed_area(peak.window.runoff), 4)},
            {"share_of_area", digits(peak.window_share)},
            {"subareas_in_window", peak.subareas_in_window},
            {"subareas", makers_json(result, peak)}};
}

Json handbook_json(const PointPeak& peak) {
    return {{"part_alone_m3_per_s", flow_json(peak.cases.part_alone)},
            {"part_and_share_m3_per_s", flow_json(peak.cases.part_and_share)},
            {"time_min", minutes_json(in_seconds(peak.cases.time_of_part))}};
}

template <class Get>
Json by_period(const RunoffLand& land, Get get) {
    Json values = Json::array();
    for (const RunoffLand::Figures& figures : land.periods) values.push_back(digits(get(figures), 10));
    return values;
}

Json land_name(const StudyResult& result, const RunoffLand& land) {
    const auto classes = result.book.classes();
    if (land.is_rest()) return nullptr;
    return land.kind.cover < classes.size() ? Json(classes[land.kind.cover].name) : Json("stated in the overrides");
}

Json runoff_land_json(const StudyResult& result, const Outlet& outlet) {
    using Figures = RunoffLand::Figures;
    Json rows = Json::array();
    for (const RunoffLand& land : result.peaks.land[outlet.number - 1]) {
        rows.push_back({{"cover", land_name(result, land)},
                        {"soil_group", land.by_soil ? text_or_null(letter_of(land.kind.soil)) : Json(nullptr)},
                        {"land_slope", land.by_slope ? Json(words(land.kind.slope)) : Json(nullptr)},
                        {"kinds", land.rows},
                        {"area_m2", number(from_fixed_area(land.area), 4)},
                        {"runoff_coefficients", by_period(land, [](const Figures& f) { return f.plain; })},
                        {"frequency_factors", land.is_rest() ? Json(nullptr) : by_period(land, [](const Figures& f) { return f.factor; })},
                        {"coefficients_uncut", by_period(land, [](const Figures& f) { return f.uncut; })},
                        {"coefficients_with_factor", by_period(land, [](const Figures& f) { return f.used; })}});
    }
    return rows;
}

Json peaks_json(const StudyResult& result, const Outlet& outlet) {
    Json periods = Json::array();
    const std::vector<PointPeak>& peaks = result.peaks.points[outlet.number - 1];
    for (std::size_t i = 0; i < peaks.size(); ++i) {
        const PointPeak& peak = peaks[i];
        Json json = {{"return_period", result.rain.storms[i].return_period}, {"why_not", text_or_null(peak.why_not)}};
        if (peak.is_there()) {
            json["runoff_coefficient_before_factor"] = digits(peak.coefficient.plain, 8);
            json["runoff_coefficient"] = digits(peak.coefficient.value, 8);
            json["frequency_factor"] = digits(peak.coefficient.frequency_factor);
            json["coefficient_uncut"] = digits(peak.coefficient.uncapped, 8);
            json["runoff_area_m2"] = number(from_fixed_area(peak.coefficient.runoff), 4);
            json["whole_area"] = whole_json(peak);
            json["partial_area"] = partial_json(result, peak);
            json["handbook_cases"] = handbook_json(peak);
        }
        periods.push_back(json);
    }
    return periods;
}

}  // namespace

void add_peaks(const StudyResult& result, const Outlet& outlet, Json& json) {
    json["runoff_land"] = runoff_land_json(result, outlet);
    json["peaks"] = peaks_json(result, outlet);
}

Json peak_parameters_json(const Study& study) {
    const PeakStudy& peaks = study.peaks;
    const bool exact = peaks.conversion.value_or(RationalConversion::exact) == RationalConversion::exact;
    return {{"coefficient", words(peaks.coefficient.value_or(CoefficientSource::book))},
            {"conversion", exact ? "exact" : "rounded"},
            {"frequency_factors", words(peaks.frequency_factors.value_or(FrequencyFactors::wright_mclaughlin))},
            {"area_limit_m2", digits(in_square_metres(peaks.area_limit.value_or(rational_area_limit)))},
            {"time_bin_s", digits(in_seconds(peaks.time_bin.value_or(standard_time_bin)))}};
}

}  // namespace rillclock
