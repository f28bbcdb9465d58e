#include "rillclock/run/run_study.hpp"

#include <algorithm>
#include <memory>
#include <tuple>
#include <utility>

#include "rillclock/catchment/arrival_tally.hpp"
#include "rillclock/catchment/outlet_notices.hpp"
#include "rillclock/catchment/tiled_outlets.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/raster_strips.hpp"
#include "rillclock/deliver/result_json.hpp"
#include "rillclock/deliver/tables.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/terrain/tiled_directions.hpp"
#include "sentences.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

/// What puts every figure in doubt comes before what has its own effect.
bool doubts_all(const Notice& notice) { return notice.code == "relief-cannot-be"; }

/// Everything that was noticed on the way, by effect on the time, the greatest first.
Notices all_notices(const TerrainData& terrain, const SurfaceData& surface, const PlacedPoints& points,
                    const std::vector<Outlet>& outlets) {
    Notices all;
    const auto add = [&](const Notices& more) { all.insert(all.end(), more.begin(), more.end()); };
    add(terrain.notices);
    add(surface.notices);
    add(points.notices);
    for (const Outlet& outlet : outlets) add(notices_of(outlet, terrain.grid));
    std::stable_sort(all.begin(), all.end(), [](const Notice& a, const Notice& b) {
        return std::tie(b.effect_s, a.code, a.point) < std::tie(a.effect_s, b.code, b.point);
    });
    std::stable_partition(all.begin(), all.end(), doubts_all);
    return in_sentences(std::move(all));
}

void write_texts(const StudyResult& result, ResultFolder& folder) {
    folder.write_text("governing_paths.geojson", paths_geojson(result, PathKind::governing));
    folder.write_text("longest_paths.geojson", paths_geojson(result, PathKind::longest));
    folder.write_text("tables/outlets.csv", outlets_table(result));
    folder.write_text("tables/segments.csv", segments_table(result));
    folder.write_text("tables/review.csv", review_table(result));
    folder.write_text("result.json", result_json(result));
}

std::vector<CellLabel> labels_of(const std::vector<DesignPoint>& points) {
    std::vector<CellLabel> labels;
    for (const DesignPoint& point : points) labels.push_back({point.cell, static_cast<std::uint32_t>(labels.size() + 1)});
    return labels;
}

RasterStory story_of(const Study& study, const TerrainData& terrain, const TiledTravel& travel,
                     const std::vector<DesignPoint>& points, const PointTree& tree) {
    std::vector<Cell> cells;
    for (const DesignPoint& point : points) cells.push_back(point.cell);
    const auto found = path_cells_at(travel, cells);
    std::vector<StepTime> times;
    for (const PointNumber last : tree.last_points()) {
        times.push_back(last == 0 ? StepTime{} : found.at(points[last - 1].cell).time_to_root);
    }
    return {.grid = terrain.grid, .system = terrain.system, .format = terrain.format,
            .two_year_24_hour = *study.rain.two_year_24_hour, .storm_factor = travel.rules().sheet.storm_factor,
            .has_voids = terrain.void_cells > 0, .points = points, .last_point_times = std::move(times)};
}

/// The last pass over the raster: makes everything about each tile once more, for the arrivals at the points and the rasters.
void work_all_tiles(const TiledTravel& travel, const TiledOwners& owners, ArrivalTally& tally, RasterStrips& rasters,
                    const Progress& progress) {
    const TileGrid& tiles = travel.ground().forest.tiles();
    const auto across = static_cast<std::size_t>(tiles.tiles_across());
    Workspaces<TileDesk> desks;
    for (std::int64_t down = 0; down < tiles.tiles_down(); ++down) {
        const auto first = static_cast<Tile>(static_cast<std::size_t>(down) * across);
        progress.tell({.stage = "writing rasters", .done = tiles.window(first).row * tiles.columns(), .total = tiles.rows() * tiles.columns()});
        travel.executor().for_each(across, [&](std::size_t column) {
            const auto desk = desks.lease();
            const Tile tile = first + static_cast<Tile>(column);
            travel.read_tile(tile, *desk);
            owners.read_tile(tile, *desk);
            tally.add(*desk);
            rasters.fill(*desk);
        });
        rasters.write(tiles.window(first).row, tiles.window(first).rows);
    }
    rasters.close();
    progress.tell({.stage = "writing rasters", .done = tiles.rows() * tiles.columns(), .total = tiles.rows() * tiles.columns(), .finished = true});
}

constexpr std::size_t most_overview_rows = 20;

}  // namespace

RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress) {
    check_study(study);
    const GdalSession session;
    ResultFolder folder(located(study, study.output.folder), options.replace ? Existing::replace : Existing::refuse);
    const Executor executor(options.threads);

    const TerrainData terrain = read_terrain(study, progress);
    const ResolvedStudy resolved = resolve(study, facts_of(terrain.format, terrain.ground));
    const TravelRules rules = rules_of(study, resolved);
    const SurfaceData surface = read_surface(study, terrain, progress);
    const std::int64_t cells = terrain.grid.size();
    const TileGrid tiles(terrain.grid.rows, terrain.grid.columns, options.tile_side);

    const Raster<FlowCode> codes = stage(progress, "flow directions", cells, [&] {
        return terrain.elevations.visit([&](const auto& z) { return flow_codes(z, terrain.ground, tiles, executor); });
    });
    const TiledForest forest(codes, tiles, executor);
    const TiledGround ground{.forest = forest, .ground = terrain.ground, .elevations = terrain.elevations,
                             .metres_per_elevation_unit = terrain.format.metres_per_stored_unit(), .surface = surface.table};
    const auto travelled = stage(progress, "travel times", cells, [&] {
        return std::make_unique<TiledTravel>(ground, rules, executor);
    });
    const TiledTravel& travel = *travelled;

    const PlacedPoints points = settle_points(study, resolved, travel, terrain);
    const TiledOwners owners(forest, labels_of(points.points), executor);
    const PointTree tree = point_tree(next_points(forest, owners, points.points, executor));
    ArrivalTally tally(travel, points.points.size(), rules.sheet.storm_factor);
    RasterStrips rasters(story_of(study, terrain, travel, points.points, tree), travel, folder);
    work_all_tiles(travel, owners, tally, rasters, progress);

    const std::vector<Outlet> outlets = stage(progress, "design points", cells, [&] {
        return outlets_of(travel, points.points, tree,
                          heads_of(tally.take(), tree, rules.sheet.storm_factor, study.timing.ignore_tail),
                          outlet_rules_of(study, resolved));
    });
    const Notices notices = all_notices(terrain, surface, points, outlets);
    const std::vector<InputFile> inputs = input_files(study);
    const DataSummary data{.cells = cells, .void_cells = terrain.void_cells, .classes = surface.classes};
    const StudyResult result{.study = study, .resolved = resolved, .rules = rules, .grid = terrain.grid,
                             .system = terrain.system, .format = terrain.format, .book = surface.book,
                             .surface_classes = surface.table.classes, .outlets = outlets, .notices = notices,
                             .inputs = inputs, .data = data};
    write_texts(result, folder);
    folder.commit();
    return {.folder = folder.target(), .headlines = headlines(result),
            .overview = outlets_overview(result, most_overview_rows), .notices = notices, .json = result_json(result)};
}

}  // namespace rillclock
