#include "rillclock/deliver/result_json.hpp"

#include <vector>

#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/cautions.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/version.hpp"
#include "rillclock/io/library_versions.hpp"
#include "isochrone_rows.hpp"
#include "json_text.hpp"
#include "json_values.hpp"
#include "network_words.hpp"
#include "peaks_json.hpp"
#include "rain_json.hpp"
#include "segment_rows.hpp"
#include "uncertainty_json.hpp"

namespace rillclock {
namespace {

Json versions() {
    return {{"rillclock", version_text}, {"gdal", gdal_version()}, {"proj", proj_version()}};
}

Json inputs_json(const StudyResult& result) {
    Json files = Json::array();
    for (const InputFile& file : result.inputs) {
        files.push_back({{"role", file.role}, {"file", file.name}, {"sha256", file.sha256}});
    }
    return files;
}

Json data_json(const StudyResult& result) {
    Json classes = Json::array();
    for (const ClassCount& count : result.data.classes) {
        const CoverClass* known = result.book.find(count.code);
        classes.push_back({{"code", count.code},
                           {"name", known == nullptr ? "" : known->name},
                           {"cells", count.cells},
                           {"source", known == nullptr ? "" : known->source},
                           {"from_memory", known != nullptr && known->from_memory}});
    }
    Json soils = Json::array();
    for (const SoilCount& count : result.data.soils) {
        soils.push_back({{"group", text_or_null(letter_of(count.soil))}, {"cells", count.cells}});
    }
    return {{"reference_system", result.system.name()},
            {"rows", result.grid.rows},
            {"columns", result.grid.columns},
            {"cell_width", result.grid.cell_width},
            {"cell_height", result.grid.cell_height},
            {"cells", result.data.cells},
            {"void_cells", result.data.void_cells},
            {"elevation_unit", result.format.unit.name},
            {"metres_per_stored_elevation_unit", result.format.metres_per_stored_unit()},
            {"cover_classes", classes},
            {"soil_groups", soils}};
}

Json terrain_parameters(const StudyResult& result) {
    const TravelRules& rules = result.rules;
    return {{"slope_window_m", in_metres(rules.slope.window)},
            {"vertical_step_m", in_metres(rules.slope.vertical_step)},
            {"slope_floor_overland", rules.slope.overland_floor},
            {"slope_floor_channel", rules.slope.channel_floor},
            {"pond_depth_m", in_metres(rules.pond.depth)},
            {"pond_speed_m_per_s", number(in_metres_per_second(rules.pond.speed), 6)},
            {"departure_m", in_metres(result.resolved.departure)}};
}

Json sheet_parameters(const StudyResult& result) {
    const SheetRules& sheet = result.rules.sheet;
    const TimingStudy& timing = result.study.timing;
    Json json = {{"method", timing.sheet}, {"coefficient", sheet.formula.coefficient}, {"exponent", sheet.formula.exponent}};
    if (timing.is_kinematic()) {
        json["constant"] = timing.sheet_constant.value_or(kinematic_constant_hec22);
        json["rain"] = timing.sheet_takes_runoff ? "runoff" : "rainfall";
        json["storm"] = words(timing.storm.value_or(StormDuration::whole_path));
        json["reference_storm_factor"] = sheet.storm_factor;
        json["tolerance_s"] = in_seconds(StormSearch{}.tolerance);
    } else {
        json["storm_factor"] = sheet.storm_factor;
        json["rain_2_year_24_hour_mm"] = digits(in_millimetres(*result.rain.two_year_24_hour));
    }
    json["limit_m"] = in_metres(sheet.limit);
    json["index_limit_m"] = number(in_metres(sheet.index_limit), 6);
    return json;
}

Json power_law(const PowerLaw& law) {
    return {{"coefficient_m", in_metres(law.coefficient)}, {"per_m2", in_square_metres(law.unit)}, {"exponent", law.exponent}};
}

const char* shallow_words(ShallowRule rule) {
    switch (rule) {
        case ShallowRule::by_cover: return "by cover";
        case ShallowRule::paved_and_unpaved: return "paved and unpaved";
        case ShallowRule::chart: return "chart";
    }
    return "";
}

Json channel_parameters(const StudyResult& result) {
    const ChannelRules& channel = result.rules.channel;
    const ChannelSize* published = result.study.timing.channel.published_size();
    Json json = {{"n", channel.n}};
    json["from_area_m2"] = channel.from_area ? Json(in_square_metres(*channel.from_area)) : Json(nullptr);
    if (channel.hydraulic_radius) {
        json["hydraulic_radius_m"] = in_metres(*channel.hydraulic_radius);
    } else {
        json["region"] = published == nullptr ? Json(nullptr) : Json(published->region);
        json["width"] = power_law(channel.width);
        json["depth"] = power_law(channel.depth);
    }
    json["flow"] = result.study.timing.channel.design_storm ? "design storm" : "bankfull";
    if (result.study.timing.channel.design_storm) json["side_slope"] = result.study.timing.channel.side_slope.value_or(0.0);
    if (!result.sections.empty()) json["mapped_sections"] = result.sections.size();
    return json;
}

Json soil_parameters(const SurfaceStudy& surface) {
    if (surface.soil_group) return letter_of(cell_soil(*surface.soil_group));
    return surface.soil.file ? Json("raster") : Json(nullptr);
}

Json isochrone_parameters(const StudyResult& result) {
    const IsochroneStudy& stated = result.study.output.isochrones;
    return {{"step_min", in_minutes(result.isochrones->step)},
            {"bands_at_most", stated.bands ? Json(*stated.bands) : Json(nullptr)},
            {"catchments", stated.catchments},
            {"borders", border_words(*result.isochrones)}};
}

Json parameters_json(const StudyResult& result) {
    Json json = {{"terrain", terrain_parameters(result)},
            {"sheet", sheet_parameters(result)},
            {"shallow", shallow_words(result.study.timing.shallow)},
            {"channel", channel_parameters(result)},
            {"path_length", {{"rule", result.study.surface.unbiased_lengths ? "unbiased" : "grid"}, {"step_weight", step_weight(result)}}},
            {"book", result.book.name()},
            {"soil_group", soil_parameters(result.study.surface)},
            {"ignore_tail", result.study.timing.ignore_tail},
            {"move_within_m", in_metres(result.resolved.move_within)},
            {"shortest_segment_m", in_metres(result.resolved.shortest_segment)}};
    if (result.rain.source) json["rain"] = rain_json(result);
    if (result.peaks.are_there()) json["peaks"] = peak_parameters_json(result.study);
    if (result.isochrones != nullptr) json["isochrones"] = isochrone_parameters(result);
    return json;
}

/// Where a channel's hydraulic radius comes from.
std::string section_words(const StudyResult& result, const Segment& segment) {
    const MappedSection* mapped = section_of(result, segment);
    const SectionShape shape = mapped == nullptr ? SectionShape::by_area : mapped->shape;
    switch (shape) {
        case SectionShape::trapezoid: return "trapezoid";
        case SectionShape::gutter: return "gutter";
        case SectionShape::by_area: break;
    }
    return result.rules.channel.hydraulic_radius ? "stated" : "by area";
}

Json design_flow_json(const DesignFlow& flow) {
    return {{"arrival_min", minutes_json(flow.arrival_s)},
            {"intensity_mm_per_h", digits(in_millimetres_per_hour(flow.intensity), 8)},
            {"runoff_area_m2", digits(flow.runoff_area_m2)},
            {"flow_m3_per_s", digits(flow.m3_per_s)},
            {"slope", digits(flow.slope)},
            {"bottom_width_m", digits(flow.bottom_width_m)},
            {"side_slope", digits(flow.side_slope)},
            {"depth_m", digits(flow.depth_m)}};
}

/// What the formula of the segment's regime needs beside its length and slope.
void add_formula_numbers(const StudyResult& result, const Segment& s, Json& json) {
    switch (s.regime) {
        case Regime::none: return;
        case Regime::sheet:
            json["n"] = digits(cover_of(result, s)->n_typical);
            if (result.study.timing.sheet_takes_runoff) json["runoff_coefficient"] = digits(*cover_of(result, s)->coefficient(result.study.surface.soil_group));
            return;
        case Regime::shallow:
            json["k_m_per_s"] = digits(s.shallow_k_m_per_s);
            json["slope_exponent"] = digits(s.shallow_exponent);
            return;
        case Regime::channel:
            json["n"] = digits(s.channel_n);
            json["hydraulic_radius_m"] = digits(s.radius_equivalent_m);
            json["section"] = section_words(result, s);
            if (s.reach_to != nullptr && s.reach_to->flow.m3_per_s > 0) json["flow_at_end"] = design_flow_json(s.reach_to->flow);
            return;
        case Regime::water: json["water_depth_m"] = digits(in_metres(*cover_of(result, s)->water_depth)); return;
    }
}

Json segment_json(const StudyResult& result, const SegmentRow& row) {
    const Segment& s = *row.segment;
    const CoverClass* cover = cover_of(result, s);
    Json json = {{"regime", name_of(s.regime)},
                 {"cover", cover == nullptr ? Json(nullptr) : Json(cover->name)},
                 {"length_m", digits(s.length_m)},
                 {"ponded_length_m", digits(s.pond_length_m)},
                 {"slope_equivalent", digits(s.slope_equivalent)},
                 {"fall_m", digits(s.fall_m)},
                 {"time_s", number(row.time_s, 6)},
                 {"ponded_time_s", number(row.pond_time_s, 6)}};
    if (s.regime == Regime::sheet) {
        const char* place = result.study.timing.is_kinematic() ? "sheet_distance_m" : "sheet_index_m";
        json[place] = {number(s.index_from_m, 6), number(s.index_to_m, 6)};
    }
    add_formula_numbers(result, s, json);
    return json;
}

Json path_json(const StudyResult& result, const Outlet& outlet, const PointPath& path) {
    Json segments = Json::array();
    for (const SegmentRow& row : segment_rows(outlet, path, "")) segments.push_back(segment_json(result, row));
    const PathSummary& summary = path.summary;
    return {{"head", place_json(result.grid.centre(path.cells.front()))},
            {"time_s", number(path.seconds, 6)},
            {"time_min", minutes_json(path.seconds)},
            {"length_m", number(from_fixed(summary.length), 3)},
            {"fall_m", digits(summary.fall_m)},
            {"fall_ratio", digits(summary.fall_ratio(), 4)},
            {"ponded_share", digits(summary.share_of_length(summary.ponded_length_m), 4)},
            {"slope_floor_share", digits(summary.share_of_length(summary.floor_length_m), 4)},
            {"end_to_end_time_min", minutes_json(path.end_to_end_s)},
            {"segments", segments}};
}

Json arrivals_json(const Outlet& outlet) {
    Json json = Json::array();
    for (std::size_t i = 0; i < told_shares.size(); ++i) {
        json.push_back({{"share_of_area", told_shares[i]}, {"time_min", minutes_json(outlet.arrival_s[i])}});
    }
    return json;
}

Json iteration_json(const std::vector<StormIteration>& rounds) {
    Json rows = Json::array();
    for (const StormIteration& row : rounds) {
        rows.push_back({{"assumed_min", minutes_json(in_seconds(row.assumed))},
                        {"intensity_mm_per_h", digits(in_millimetres_per_hour(row.intensity), 8)},
                        {"computed_min", minutes_json(in_seconds(row.computed))}});
    }
    return rows;
}

Json storms_json(const StudyResult& result, const Outlet& outlet) {
    Json storms = Json::array();
    for (std::size_t i = 0; i < outlet.storms.size(); ++i) {
        const PointStorm& storm = outlet.storms[i];
        const bool is_read = !storm.iteration.rows.empty();
        Json json = {{"return_period", result.rain.storms[i].return_period},
                     {"intensity_mm_per_h", is_read ? digits(in_millimetres_per_hour(storm.iteration.intensity()), 8) : Json(nullptr)},
                     {"time_s", number(storm.seconds(), 6)},
                     {"sheet_time_s", number(storm.sheet_seconds(), 6)},
                     {"governing_head", place_json(result.grid.centre(storm.governing.cell))},
                     {"path_length_m", number(from_fixed(storm.length), 3)}};
        if (result.study.timing.is_kinematic()) json["iteration"] = iteration_json(storm.iteration.rows);
        storms.push_back(json);
    }
    return storms;
}

Json measures_json(const CatchmentMeasures& measures) {
    const auto in_m = [](const std::optional<Length>& length) { return length ? digits(in_metres(*length)) : Json(nullptr); };
    return {{"area_m2", digits(in_square_metres(*measures.area))},
            {"longest_path_m", in_m(measures.longest_path)},
            {"fall_m", in_m(measures.fall)},
            {"path_slope", or_null(measures.path_slope())},
            {"equal_area_slope", or_null(measures.equal_area_slope)},
            {"land_slope", or_null(measures.land_slope)},
            {"mean_height_m", in_m(measures.mean_height)},
            {"curve_number", or_null(measures.curve_number)},
            {"runoff_coefficient", or_null(measures.runoff_coefficient)},
            {"overland_n", or_null(measures.overland_n)},
            {"overland_length_m", in_m(measures.overland_length)},
            {"overland_slope", or_null(measures.overland_slope)},
            {"kerby_n", or_null(measures.kerby_retardance)},
            {"izzard_c", or_null(measures.izzard_retardance)},
            {"impervious", or_null(measures.impervious)},
            {"undeveloped_coefficient", or_null(measures.undeveloped_coefficient)},
            {"county_k", or_null(measures.county_factor)},
            {"kirpich_factor", digits(measures.kirpich_adjustment)}};
}

Json land_json(const StudyResult& result, const Outlet& outlet) {
    Json land = Json::array();
    for (const LandShare& share : outlet.ground.land().shares()) {
        land.push_back({{"cover", result.book.classes()[share.kind.cover].code},
                        {"soil_group", text_or_null(letter_of(share.kind.soil))},
                        {"land_slope", words(share.kind.slope)},
                        {"cells", share.cells},
                        {"area_m2", number(from_fixed_area(share.area), 4)}});
    }
    return land;
}

Json methods_json(const PointMethods& methods) {
    Json times = Json::array();
    for (const MethodTime& time : methods.times) {
        times.push_back({{"method", time.method->about.id},
                         {"applicable", time.answer.is_applicable()},
                         {"why_not", text_or_null(time.answer.why_not)},
                         {"time_min", time.answer.time ? minutes_json(in_seconds(*time.answer.time)) : Json(nullptr)},
                         {"ratio_to_segments", or_null(time.ratio)}});
        if (!time.answer.iterations.empty()) times.back()["iteration"] = iteration_json(time.answer.iterations);
    }
    Json spread = nullptr;
    if (methods.spread) {
        spread = {{"applicable", methods.spread->methods},
                  {"lowest_min", minutes_json(in_seconds(methods.spread->lowest))},
                  {"median_min", minutes_json(in_seconds(methods.spread->median))},
                  {"highest_min", minutes_json(in_seconds(methods.spread->highest))}};
    }
    return {{"measures", measures_json(methods.measures)}, {"spread", spread}, {"times", times}};
}

Json way_json(const Outlet& outlet) {
    if (outlet.next == 0) return nullptr;
    Json shares = Json::object();
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        shares[std::string(name_of(regime))] = digits(outlet.way.share(regime), 4);
    }
    return {{"length_m", number(from_fixed(outlet.way.length), 3)},
            {"fall_m", digits(outlet.way.fall_m)},
            {"time_s", number(in_seconds(outlet.way.time.under(outlet.storm_factor)), 6)},
            {"fixed_time_s", number(from_fixed(outlet.way.time.fixed), 6)},
            {"storm_time_per_factor_s", number(from_fixed(outlet.way.time.storm), 6)},
            {"share_of_length", shares}};
}

Json network_json(const StudyResult& result, const PointNetwork& network) {
    Json storms = Json::array();
    for (std::size_t i = 0; i < network.storms.size(); ++i) {
        const NetworkStorm& storm = network.storms[i];
        storms.push_back({{"return_period", result.rain.storms.empty() ? Json(nullptr) : Json(result.rain.storms[i].return_period)},
                          {"time_s", number(from_fixed(storm.time), 6)},
                          {"subareas", storm.subareas_above},
                          {"storm_factor", digits(storm.storm_factor, 12)},
                          {"last_subarea", point_name(result, storm.last)},
                          {"lead_s", storm.lead ? number(from_fixed(*storm.lead), 6) : Json(nullptr)},
                          {"critical_way", way_in_words(result, storm.critical_way)}});
    }
    return storms;
}

/// A hand-drawn catchment beside that of the elevations.
void add_drawn(const StudyResult& result, const Outlet& outlet, Json& json) {
    for (const DrawnDifference& d : result.drawn) {
        if (d.point != outlet.number) continue;
        json["drawn_catchment"] = {{"area_m2", number(from_fixed_area(d.drawn), 4)},
                                   {"in_both_m2", number(from_fixed_area(d.both), 4)},
                                   {"drawn_only_m2", number(from_fixed_area(d.drawn_only_area()), 4)},
                                   {"elevations_only_m2", number(from_fixed_area(d.found_only_area()), 4)},
                                   {"overlap", number(d.overlap(), 6)}};
    }
}

Json outlet_json(const StudyResult& result, const Outlet& outlet) {
    Json json = {{"number", outlet.number},
            {"name", outlet.point.name},
            {"place", place_json(result.grid.centre(outlet.point.cell))},
            {"moved_m", digits(in_metres(outlet.point.moved))},
            {"next_point", outlet.next == 0 ? Json(nullptr) : Json(result.outlets[outlet.next - 1].point.name)},
            {"area_m2", number(from_fixed_area(outlet.area), 4)},
            {"own_area_m2", number(from_fixed_area(outlet.own_area), 4)},
            {"network_area_m2", number(from_fixed_area(result.network.points[outlet.number - 1].area), 4)},
            {"touches_edge", outlet.touches_edge()},
            {"time_used_s", number(time_shown_s(result, outlet), 6)},
            {"stated_acts", is_stated_felt(result.network, outlet)},
            {"time_of_concentration_s", number(outlet.time_of_concentration_s(), 6)},
            {"time_of_concentration_min", minutes_json(outlet.time_of_concentration_s())},
            {"greatest_time_min", minutes_json(outlet.greatest_s)},
            {"arrivals", arrivals_json(outlet)},
            {"governing_path", path_json(result, outlet, outlet.governing)},
            {"longest_path", path_json(result, outlet, outlet.longest)}};
    json["way_to_next_point"] = way_json(outlet);
    json["network"] = network_json(result, result.network.points[outlet.number - 1]);
    json["stated"] = text_or_null(marks_of(result.network.edits[outlet.number - 1]));
    json["stated_above"] = text_or_null(stated_in_words(result, result.network.points[outlet.number - 1].stated_above));
    json["land"] = land_json(result, outlet);
    if (outlet.point.surveyed) json["surveyed_area_m2"] = number(from_fixed_area(*outlet.point.surveyed), 4);
    add_drawn(result, outlet, json);
    if (!result.rain.zones.empty()) {
        json["rain_zone"] = {{"rain", result.rain.zone_name(outlet.rain_zone.number)},
                             {"share_of_area", digits(outlet.rain_zone.share)}};
    }
    json["methods"] = methods_json(result.methods[outlet.number - 1]);
    if (!outlet.storms.empty()) json["storms"] = storms_json(result, outlet);
    if (result.peaks.are_there()) add_peaks(result, outlet, json);
    if (result.uncertainty != nullptr) json["uncertainty"] = point_uncertainty_json(result, outlet);
    return json;
}

Json notices_json(const StudyResult& result) {
    Json json = Json::array();
    for (const Notice& notice : result.notices) {
        json.push_back({{"point", notice.point.empty() ? Json(nullptr) : Json(notice.point)},
                        {"notice", notice.code},
                        {"text", notice.text},
                        {"value", or_null(notice.value)},
                        {"threshold", or_null(notice.threshold)},
                        {"return_period", or_null(notice.return_period)},
                        {"place", notice.place ? place_json(*notice.place) : Json(nullptr)},
                        {"effect_min", minutes_json(notice.effect_s)}});
    }
    return json;
}

/// Names of the scenarios whose results stand beside.
Json scenarios_json(const Study& study) {
    Json names = Json::array();
    for (const ScenarioStudy& scenario : study.scenarios) names.push_back(scenario.name);
    return names;
}

std::vector<std::string> outlet_texts(const StudyResult& result, const Executor& executor) {
    std::vector<std::string> texts(result.outlets.size());
    executor.for_each(texts.size(), [&](std::size_t i) { texts[i] = member_text(outlet_json(result, result.outlets[i])); });
    return texts;
}

}  // namespace

std::string ResultText::whole() const { return with_members(frame, "outlets", outlets) + "\n"; }

ResultText result_json(const StudyResult& result, const Executor& executor) {
    Json json = {{"title", result.study.title},
                       {"date", text_or_null(result.study.date)},
                       {"scenario", text_or_null(result.study.scenario)},
                       {"scenarios", scenarios_json(result.study)},
                       {"report_units", result.study.report_units == ReportUnits::us ? "us" : "si"},
                       {"versions", versions()},
                       {"headlines", headlines(result)},
                       {"cautions", cautions},
                       {"inputs", inputs_json(result)},
                       {"data", data_json(result)},
                       {"parameters", parameters_json(result)},
                       {"outlets", Json::array()},
                       {"notices", notices_json(result)}};
    if (result.uncertainty != nullptr) json["uncertainty"] = uncertainty_json(result);
    return {.frame = json_text(json), .outlets = outlet_texts(result, executor)};
}

}  // namespace rillclock
