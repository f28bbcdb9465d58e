#include "rillclock/run/run_study.hpp"

#include <algorithm>
#include <future>
#include <memory>
#include <tuple>
#include <utility>

#include "rillclock/catchment/outlet_notices.hpp"
#include "rillclock/catchment/tiled_outlets.hpp"
#include "rillclock/deliver/calculation_sheet.hpp"
#include "rillclock/deliver/depressions_table.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/raster_styles.hpp"
#include "rillclock/deliver/report.hpp"
#include "rillclock/deliver/result_json.hpp"
#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/deliver/tables.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/terrain/tiled_directions.hpp"
#include "design_channels.hpp"
#include "last_pass.hpp"
#include "depressions.hpp"
#include "mapped_flow.hpp"
#include "overview.hpp"
#include "sentences.hpp"
#include "study_data.hpp"
#include "study_storms.hpp"

namespace rillclock {
namespace {

/// What puts every figure in doubt comes before what has its own effect.
bool doubts_all(const Notice& notice) { return notice.code == "relief-cannot-be"; }

/// Everything that was noticed on the way, by effect on the time, the greatest first.
Notices all_notices(const TerrainData& terrain, const SurfaceData& surface, const StudyRain& rain,
                    const PlacedPoints& points, const std::vector<Outlet>& outlets) {
    Notices all;
    const auto add = [&](const Notices& more) { all.insert(all.end(), more.begin(), more.end()); };
    add(terrain.notices);
    add(surface.notices);
    add(rain.notices);
    add(points.notices);
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
    folder.write_text("tables/land.csv", land_table(result));
    folder.write_text("tables/review.csv", review_table(result));
    if (result.rain.source) folder.write_text("tables/storms.csv", storms_table(result));
    if (result.study.timing.is_kinematic()) folder.write_text("tables/iterations.csv", iterations_table(result));
    write_sheets(result, json, folder);
    folder.write_text("result.json", json);
}

std::vector<CellLabel> labels_of(const std::vector<DesignPoint>& points) {
    std::vector<CellLabel> labels;
    for (const DesignPoint& point : points) labels.push_back({point.cell, static_cast<std::uint32_t>(labels.size() + 1)});
    return labels;
}

std::vector<PointMethods> methods_of(const Study& study, const CoverBook& book, const StudyRain& rain,
                                     const std::vector<Outlet>& outlets) {
    const MethodGround ground{.book = book, .has_soil = study.surface.soil_group || study.surface.soil.file};
    const std::vector<IntensityOfDuration> intensities = intensities_of(rain);
    std::vector<PointMethods> methods;
    for (const Outlet& outlet : outlets) {
        methods.push_back(point_methods(outlet, ground, rain.source ? intensities[rain.raster] : IntensityOfDuration{}));
    }
    return methods;
}

/// What was read, for those who watch the run.
std::vector<std::string> facts_of(const StudyRain& rain) {
    if (!rain.source) return {};
    return {"rain: " + sentence(rain.source->echo)};
}

constexpr std::size_t most_overview_rows = 20;

}  // namespace

RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress) {
    check_study(study);
    const GdalSession session;
    ResultFolder folder(located(study, study.output.folder), options.replace ? Existing::replace : Existing::refuse);
    const Executor executor(options.threads);
    // Checksums are made while the work goes on; nothing else is left to do on one processor alone.
    std::future<std::vector<InputFile>> checksums = std::async(std::launch::async, [&study] { return input_files(study); });
    const StudyRain rain = read_rain(study);

    TerrainData terrain = read_terrain(study, executor, progress);
    const ResolvedStudy resolved = resolve(study, facts_of(terrain.format, terrain.ground));
    const TravelRules rules = rules_of(study, resolved, rain);
    const SurfaceData surface = read_surface(study, terrain, progress);
    const std::int64_t cells = terrain.grid.size();
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
                             .reaches = flow.reaches.empty() ? nullptr : &flow.reaches};
    ChannelReaches reaches;  // by the design storm; times refer to them
    const auto travelled = stage(progress, "travel times", cells, [&] {
        return std::make_unique<TiledTravel>(ground, rules, executor);
    });
    const TiledTravel& travel = *travelled;

    const PlacedPoints points = settle_points(study, resolved, travel, terrain);
    const TiledOwners owners(forest, labels_of(points.points), executor);
    const PointTree tree = point_tree(next_points(forest, owners, points.points, executor));
    std::optional<StudyRegions> regions;
    OverviewSampler overview(terrain.grid);
    const LastPass last{.study = study, .rain = rain, .terrain = terrain, .travel = travel, .owners = owners,
                        .points = points.points, .tree = tree, .folder = folder, .progress = progress,
                        .regions = regions, .overview = overview};
    const std::vector<PointHeads> heads =
        study.timing.channel.design_storm
            ? heads_under_design_flow(last, {.sections = flow.sections, .runoff = surface.runoff, .travel = *travelled, .reaches = reaches})
            : heads_and_rasters(last);
    const std::vector<Outlet> outlets = stage(progress, "design points", cells, [&] {
        return outlets_of(travel, points.points, tree, heads, outlet_rules_of(study, resolved));
    });
    const std::vector<PointMethods> methods = methods_of(study, surface.book, rain, outlets);
    const Depressions depressions = stage(progress, "depressions", cells, [&] { return depressions_of(travel, outlets); });
    const Notices left_out = notices_of(depressions, ground.metres_per_elevation_unit);
    terrain.notices.insert(terrain.notices.end(), left_out.begin(), left_out.end());
    const Notices notices = all_notices(terrain, surface, rain, points, outlets);
    const std::vector<InputFile> inputs = checksums.get();
    const DataSummary data{.cells = cells, .void_cells = terrain.void_cells, .classes = surface.classes, .soils = surface.soils};
    const StudyResult result{.study = study, .resolved = resolved, .rules = rules, .rain = rain, .grid = terrain.grid,
                             .system = terrain.system, .format = terrain.format, .book = surface.book, .sections = flow.sections,
                             .surface_classes = surface.table.classes, .outlets = outlets, .methods = methods, .notices = notices,
                             .inputs = inputs, .data = data};
    const std::string json = result_json(result);
    write_texts(result, json, folder);
    write_shapes(result, *regions, folder);
    const ReportOverview pictures = overview.take(terrain.elevations, ground.metres_per_elevation_unit, terrain.ground.cell_side());
    folder.write_text("report.html", report_html({.result = result, .regions = *regions, .overview = pictures, .sheets = SheetBook(json, "result.json"),
                                                  .ground_m = [&](Cell cell) { return terrain.elevations[cell] * ground.metres_per_elevation_unit; }}));
    folder.write_text("tables/depressions.csv", depressions_table(result, depressions.deepest_first));
    folder.commit();
    return {.folder = folder.target(), .facts = facts_of(rain), .headlines = headlines(result),
            .overview = outlets_overview(result, most_overview_rows), .notices = notices, .json = json};
}

}  // namespace rillclock
