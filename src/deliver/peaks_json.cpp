#include "peaks_json.hpp"

namespace rillclock {
namespace {

Json flow_json(Discharge flow) { return digits(in_cubic_metres_per_second(flow), 7); }
Json rain_json(Intensity intensity) { return digits(in_millimetres_per_hour(intensity), 8); }

Json makers_json(const StudyResult& result, const PointPeak& peak) {
    Json makers = Json::array();
    for (const SubareaShare& share : peak.makers) {
        makers.push_back({{"subarea", point_name(result, share.subarea)},
                          {"share_of_window", digits(share.of_window)},
                          {"share_of_runoff", digits(share.of_runoff)}});
    }
    return makers;
}

Json whole_json(const PointPeak& peak) {
    return {{"time_min", minutes_json(in_seconds(peak.whole_time))},
            {"intensity_mm_per_h", rain_json(peak.whole_intensity)},
            {"flow_m3_per_s", flow_json(peak.whole)}};
}

Json partial_json(const StudyResult& result, const PointPeak& peak) {
    return {{"duration_min", minutes_json(in_seconds(peak.window.duration))},
            {"intensity_mm_per_h", rain_json(peak.peak_intensity)},
            {"flow_m3_per_s", flow_json(peak.partial)},
            {"flow_unbinned_at_least_m3_per_s", flow_json(peak.partial_at_least)},
            {"flow_unbinned_at_most_m3_per_s", flow_json(peak.partial_at_most)},
            {"runoff_area_m2", digits(from_fixed_area(peak.window.runoff), 8)},
            {"share_of_area", digits(peak.window_share)},
            {"subareas_in_window", peak.subareas_in_window},
            {"subareas", makers_json(result, peak)}};
}

Json handbook_json(const PointPeak& peak) {
    return {{"part_alone_m3_per_s", flow_json(peak.cases.part_alone)},
            {"part_and_share_m3_per_s", flow_json(peak.cases.part_and_share)},
            {"time_min", minutes_json(in_seconds(peak.cases.time_of_part))}};
}

}  // namespace

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
            json["runoff_area_m2"] = digits(from_fixed_area(peak.coefficient.runoff), 9);
            json["whole_area"] = whole_json(peak);
            json["partial_area"] = partial_json(result, peak);
            json["handbook_cases"] = handbook_json(peak);
        }
        periods.push_back(json);
    }
    return periods;
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
