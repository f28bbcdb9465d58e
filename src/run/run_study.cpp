#include "rillclock/run/run_study.hpp"

#include <algorithm>
#include <future>
#include <memory>
#include <optional>
#include <tuple>
#include <utility>

#include "rillclock/catchment/outlet_notices.hpp"
#include "rillclock/catchment/tiled_outlets.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/deliver/depressions_table.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/own_ways_geojson.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/raster_styles.hpp"
#include "rillclock/deliver/report.hpp"
#include "rillclock/deliver/result_json.hpp"
#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/deliver/tables.hpp"
#include "rillclock/deliver/uncertainty_tables.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/run/review_words.hpp"
#include "rillclock/terrain/tiled_directions.hpp"
#include "design_channels.hpp"
#include "last_pass.hpp"
#include "depressions.hpp"
#include "mapped_flow.hpp"
#include "overview.hpp"
#include "rain_zones.hpp"
#include "sentences.hpp"
#include "study_data.hpp"
#include "study_storms.hpp"
#include "study_uncertainty.hpp"

namespace rillclock {
namespace {

/// What puts every figure in doubt comes before what has its own effect.
bool doubts_all(const Notice& notice) { return notice.code == "relief-cannot-be"; }

/// Everything that was noticed on the way, by effect on the time, the greatest first.
Notices all_notices(const TerrainData& terrain, const SurfaceData& surface, const StudyRain& rain,
                    const PlacedPoints& points, const StudyNetwork& network, const StudyPeaks& peaks, const std::vector<Outlet>& outlets) {
    Notices all;
    const auto add = [&](const Notices& more) { all.insert(all.end(), more.begin(), more.end()); };
    add(terrain.notices);
    add(surface.notices);
    add(rain.notices);
    add(points.notices);
    add(network.notices);
    add(peaks.notices);
    for (const Outlet& outlet : outlets) add(notices_of(outlet, terrain.grid));
    std::stable_sort(all.begin(), all.end(), [](const Notice& a, const Notice& b) {
        return std::tie(b.effect_s, a.code, a.point) < std::tie(a.effect_s, b.code, b.point);
    });
    std::stable_partition(all.begin(), all.end(), doubts_all);
    return in_sentences(std::move(all));
}

/// The sheets of the points with the largest catchments, if there are too many for all.
void write_sheets(const StudyResult& result, const std::string& json, ResultFolder& folder) {
    const SheetBook book(json, "result.json");
    std::vector<std::size_t> order = by_area(result);
    order.resize(std::min(order.size(), most_sheets));
    for (const std::size_t i : order) {
        folder.write_text("tables/sheets/" + sheet_file_name(i + 1, result.outlets[i].point.name), sheet_markdown(book.sheet(i)));
    }
}

void write_shapes(const StudyResult& result, const StudyRegions& regions, ResultFolder& folder) {
    write_study_geopackage(folder.path("study.gpkg"), result, regions);
    folder.write_text("rasters/travel_time.sld", travel_time_sld(result));
    folder.write_text("rasters/regime.sld", regime_sld());
    if (regions.isochrones()) folder.write_text("isochrones.geojson", isochrones_geojson(result, regions));
}

void write_texts(const StudyResult& result, const std::string& json, ResultFolder& folder) {
    folder.write_text("governing_paths.geojson", paths_geojson(result, PathKind::governing));
    folder.write_text("longest_paths.geojson", paths_geojson(result, PathKind::longest));
    folder.write_text("tables/outlets.csv", outlets_table(result));
    folder.write_text("tables/segments.csv", segments_table(result));
    folder.write_text("tables/methods.csv", methods_table(result));
    folder.write_text("tables/subareas.csv", subareas_table(result));
    folder.write_text("tables/land.csv", land_table(result));
    folder.write_text("tables/review.csv", review_table(result));
    if (result.rain.source) folder.write_text("tables/storms.csv", storms_table(result));
    if (result.peaks.are_there()) {
        folder.write_text("tables/peaks.csv", peaks_table(result));
        folder.write_text("tables/time_area.csv", time_area_table(result));
    }
    folder.write_text("tables/handover.csv", handover_table(result));
    if (!result.network.pipes.empty()) folder.write_text("tables/pipes.csv", pipes_table(result));
    if (result.study.timing.is_kinematic()) folder.write_text("tables/iterations.csv", iterations_table(result));
    if (result.uncertainty != nullptr) {
        folder.write_text("tables/uncertainty.csv", uncertainty_table(result));
        folder.write_text("tables/uncertain_times.csv", uncertain_times_table(result));
        folder.write_text("tables/last_subareas.csv", last_subareas_table(result));
        folder.write_text("tables/draws.csv", draws_table(result));
    }
    write_sheets(result, json, folder);
    folder.write_text("result.json", json);
}

std::vector<CellLabel> labels_of(const std::vector<DesignPoint>& points) {
    std::vector<CellLabel> labels;
    for (const DesignPoint& point : points) labels.push_back({point.cell, static_cast<std::uint32_t>(labels.size() + 1)});
    return labels;
}

/// What the study states for a point's lump methods: for all points, or by a field of their file.
PointLumpInputs lump_inputs_at(const Study& study, const StatedPoints& stated, const std::string& point) {
    PointLumpInputs inputs;
    if (const auto found = stated.lump_inputs.find(point); found != stated.lump_inputs.end()) inputs = found->second;
    for (const LumpInput input : all_lump_inputs) {
        if (study.methods[input].number) inputs[input] = study.methods[input].number;
    }
    return inputs;
}

std::vector<PointMethods> methods_of(const Study& study, const StatedPoints& stated, const CoverBook& book, const StudyRain& rain,
                                     const std::vector<Outlet>& outlets) {
    std::vector<PointMethods> methods;
    for (const Outlet& outlet : outlets) {
        const MethodGround ground{.book = book, .has_soil = study.surface.soil_group || study.surface.soil.file,
                                  .stated = lump_inputs_at(study, stated, outlet.point.name)};
        const std::vector<IntensityOfDuration> rains = intensities_of(rain.storms_of(outlet.rain_zone.number));
        methods.push_back(point_methods(outlet, ground, rain.source ? rains[rain.raster] : IntensityOfDuration{}));
    }
    return methods;
}

/// What was read, for those who watch the run.
std::vector<std::string> facts_of(const StudyRain& rain, const CarriedWords& reviewed) {
    std::vector<std::string> facts;
    if (rain.source && rain.is_everywhere) facts.push_back("rain: " + sentence(rain.source->echo));
    for (const ZoneRain& zone : rain.zones) facts.push_back("rain zone: " + sentence(zone.source.echo));
    const std::vector<std::string> words = sentences_on(reviewed);
    facts.insert(facts.end(), words.begin(), words.end());
    return facts;
}

constexpr std::size_t most_overview_rows = 20;

}  // namespace

RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress) {
    check_study(study);
    const GdalSession session;
    require_memory(study);
    ResultFolder folder(located(study, study.output.folder), options.replace ? Existing::replace : Existing::refuse);
    const std::vector<ReviewWord> words = review_words(folder.target());
    const Executor executor(options.threads);
    const StudyRain rain = read_rain(study);
    // Checksums are made while the work goes on; nothing else is left to do on one processor alone.
    std::future<std::vector<InputFile>> checksums = std::async(std::launch::async, [&] { return input_files(study, rain); });
    StatedEdits stated = read_edits(study);

    TerrainData terrain = read_terrain(study, executor, progress);
    const ResolvedStudy resolved = resolve(study, facts_of(terrain.format, terrain.ground));
    const TravelRules rules = rules_of(study, resolved, rain);
    const SurfaceData surface = read_surface(study, terrain, progress);
    const std::int64_t cells = terrain.grid.size();
    const RainZoneCells zones = rain_zone_cells(study, terrain);
    const TileGrid tiles(terrain.grid.rows, terrain.grid.columns, options.tile_side);

    const MappedFlow flow = stage(progress, "flow directions", cells, [&] {
        return mapped_flow(study, resolved, terrain, [&](const ElevationStore& elevations) {
            return elevations.visit([&](const auto& z) { return flow_codes(z, terrain.ground, tiles, executor); });
        });
    });
    const TiledForest forest(flow.codes, tiles, executor);
    const Ground steps = study.surface.unbiased_lengths ? terrain.ground.with_steps_weighted(unbiased_step_weight) : terrain.ground;
    const TiledGround ground{.forest = forest, .ground = steps, .elevations = terrain.elevations,
                             .metres_per_elevation_unit = terrain.format.metres_per_stored_unit(), .surface = surface.table,
                             .mapped_channels = flow.line_cells,
                             .reaches = flow.reaches.empty() ? nullptr : &flow.reaches,
                             .rain_zones = study.rain.zones.file ? &zones.zone : nullptr};
    ChannelReaches reaches;  // by the design storm; times refer to them
    const auto travelled = stage(progress, "travel times", cells, [&] {
        return std::make_unique<TiledTravel>(ground, rules, executor);
    });
    const TiledTravel& travel = *travelled;

    const PlacedPoints points = settle_points(study, resolved, travel, terrain);
    const TiledOwners owners(forest, labels_of(points.points), executor);
    const PointTree tree = point_tree(next_points(forest, owners, points.points, executor));
    const HistogramRules binned = histogram_rules(study, surface.book, rules.sheet.storm_factor);
    const auto histograms = gives_peaks(study, rain, surface.book)
                                ? std::make_unique<HistogramTally>(travel, points.points.size(), binned) : nullptr;
    std::optional<StudyRegions> regions;
    OverviewSampler overview(terrain.grid);
    const LastPass last{.study = study, .rain = rain, .terrain = terrain, .travel = travel, .owners = owners,
                        .points = points.points, .tree = tree, .folder = folder, .progress = progress,
                        .regions = regions, .overview = overview, .histograms = histograms.get()};
    const std::vector<PointHeads> heads =
        study.timing.channel.design_storm
            ? heads_under_design_flow(last, {.sections = flow.sections, .runoff = surface.runoff, .travel = *travelled, .reaches = reaches})
            : heads_and_rasters(last);
    const std::vector<Outlet> outlets = stage(progress, "design points", cells, [&] {
        return outlets_of(travel, points.points, tree, heads, outlet_rules_of(study, resolved));
    });
    const std::optional<Uncertainty> uncertainty = study.uncertainty ? stage(progress, "uncertainty", cells, [&] {
        return uncertainty_of_study({.study = study, .rain = rain, .surface = surface, .travel = travel, .owners = owners,
                                     .points = points.points, .tree = tree, .heads = heads});
    }) : std::nullopt;
    require_rain(rain, outlets);
    const StatedPoints stated_points = study.points.file ? read_stated_points(study, terrain.system) : StatedPoints{};
    const std::vector<PointMethods> methods = methods_of(study, stated_points, surface.book, rain, outlets);
    restate_own_times(stated, travel, outlets);
    const StudyNetwork network = study_network({.study = study, .rain = rain, .book = surface.book, .outlets = outlets, .stated = stated});
    const StudyPeaks peaks = histograms ? stage(progress, "peaks", cells, [&] {
        return study_peaks({.study = study, .rain = rain, .book = surface.book, .outlets = outlets, .network = network, .binned = binned},
                           histograms->take());
    }) : no_peaks(study, rain);
    const Depressions depressions = stage(progress, "depressions", cells, [&] { return depressions_of(travel, outlets); });
    const Notices left_out = notices_of(depressions, ground.metres_per_elevation_unit);
    for (const Notices& more : {left_out, zones.notices, zone_notices(rain, outlets, terrain.grid), notices_of_ranges(study, surface)}) {
        terrain.notices.insert(terrain.notices.end(), more.begin(), more.end());
    }
    const Notices notices = all_notices(terrain, surface, rain, points, network, peaks, outlets);
    const CarriedWords reviewed = carry_over(words, notices);
    const std::vector<InputFile> inputs = checksums.get();
    const DataSummary data{.cells = cells, .void_cells = terrain.void_cells, .classes = surface.classes, .soils = surface.soils};
    const StudyResult result{.study = study, .resolved = resolved, .rules = rules, .rain = rain, .grid = terrain.grid,
                             .system = terrain.system, .format = terrain.format, .book = surface.book, .sections = flow.sections,
                             .surface_classes = surface.table.classes, .outlets = outlets, .methods = methods, .network = network, .peaks = peaks, .notices = notices,
                             .inputs = inputs, .data = data,
                             .reviewed = reviewed.by_notice, .uncertainty = uncertainty ? &*uncertainty : nullptr};
    const std::string json = result_json(result);
    write_texts(result, json, folder);
    write_shapes(result, *regions, folder);
    const ReportOverview pictures = overview.take(terrain.elevations, ground.metres_per_elevation_unit, terrain.ground.cell_side());
    folder.write_text("report.html", report_html({.result = result, .regions = *regions, .overview = pictures, .sheets = SheetBook(json, "result.json"),
                                                  .ground_m = [&](Cell cell) { return terrain.elevations[cell] * ground.metres_per_elevation_unit; }}));
    folder.write_text("tables/depressions.csv", depressions_table(result, depressions.deepest_first));
    if (!flow.line_cells.empty()) folder.write_text("own_paths.geojson", own_ways_geojson(result, flow.own_ways));
    folder.write_text("depressions.geojson", depressions_geojson(result, outlined(travel, terrain.grid, depressions.deepest_first)));
    folder.commit();
    return {.folder = folder.target(), .facts = facts_of(rain, reviewed), .headlines = headlines(result),
            .overview = outlets_overview(result, most_overview_rows), .notices = notices, .json = json};
}

}  // namespace rillclock
