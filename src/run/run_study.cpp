#include "rillclock/run/run_study.hpp"

#include <algorithm>
#include <tuple>
#include <utility>

#include "rillclock/catchment/outlet_notices.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/rasters.hpp"
#include "rillclock/deliver/result_json.hpp"
#include "rillclock/deliver/tables.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/terrain/flow_directions.hpp"
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

void write_result(const StudyResult& result, ResultFolder& folder, const Progress& progress) {
    write_rasters(result, folder, progress);
    folder.write_text("governing_paths.geojson", paths_geojson(result, PathKind::governing));
    folder.write_text("longest_paths.geojson", paths_geojson(result, PathKind::longest));
    folder.write_text("tables/outlets.csv", outlets_table(result));
    folder.write_text("tables/segments.csv", segments_table(result));
    folder.write_text("tables/review.csv", review_table(result));
    folder.write_text("result.json", result_json(result));
}

constexpr std::size_t most_overview_rows = 20;

}  // namespace

RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress) {
    check_study(study);
    const GdalSession session;
    ResultFolder folder(located(study, study.output.folder), options.replace ? Existing::replace : Existing::refuse);

    const TerrainData terrain = read_terrain(study, progress);
    const ResolvedStudy resolved = resolve(study, facts_of(terrain.format, terrain.ground));
    const TravelRules rules = rules_of(study, resolved);
    const SurfaceData surface = read_surface(study, terrain, progress);
    const std::int64_t cells = terrain.grid.size();

    const FlowForest forest = stage(progress, "flow directions", cells, [&] {
        return flow_forest_of(terrain.elevations, terrain.ground);
    });
    const TravelInputs ground{.forest = forest, .ground = terrain.ground, .elevations = terrain.elevations,
                              .metres_per_elevation_unit = terrain.format.metres_per_stored_unit(), .surface = surface.table};
    const TravelField field = stage(progress, "travel times", cells, [&] { return travel_field(ground, rules); });

    const PlacedPoints points = settle_points(study, resolved,
                                              {.forest = forest, .ground = terrain.ground, .grid = terrain.grid,
                                               .contributing_area = field.contributing_area},
                                              terrain.system);
    const PointTree tree = point_tree(forest, points.points);
    const ArrivalInputs arrivals{.travel = ground, .field = field, .tree = tree, .storm_factor = rules.sheet.storm_factor};
    const std::vector<Outlet> outlets = stage(progress, "design points", cells, [&] {
        return outlets_of(arrivals, rules, points.points, outlet_rules_of(study, resolved));
    });

    const Notices notices = all_notices(terrain, surface, points, outlets);
    const std::vector<InputFile> inputs = input_files(study);
    const DataSummary data{.cells = cells, .void_cells = terrain.void_cells, .classes = surface.classes};
    const StudyResult result{.study = study, .resolved = resolved, .rules = rules, .grid = terrain.grid,
                             .system = terrain.system, .format = terrain.format, .book = surface.book, .terrain = ground,
                             .field = field, .tree = tree, .outlets = outlets, .notices = notices, .inputs = inputs,
                             .data = data};
    write_result(result, folder, progress);
    folder.commit();
    return {.folder = folder.target(), .headlines = headlines(result),
            .overview = outlets_overview(result, most_overview_rows), .notices = notices, .json = result_json(result)};
}

}  // namespace rillclock
