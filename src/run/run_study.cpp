#include "rillclock/run/run_study.hpp"

#include <algorithm>
#include <functional>
#include <future>
#include <map>
#include <memory>
#include <optional>
#include <tuple>
#include <utility>

#include "rillclock/catchment/outlet_notices.hpp"
#include "rillclock/catchment/tiled_outlets.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/headlines.hpp"
#include "rillclock/deliver/paths_geojson.hpp"
#include "rillclock/deliver/study_geopackage.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "rillclock/io/gdal_threads.hpp"
#include "rillclock/run/review_words.hpp"
#include "rillclock/study/scenario.hpp"
#include "rillclock/terrain/tiled_directions.hpp"
#include "design_channels.hpp"
#include "drawn_points.hpp"
#include "last_pass.hpp"
#include "depressions.hpp"
#include "rain_zones.hpp"
#include "sentences.hpp"
#include "study_data.hpp"
#include "study_storms.hpp"
#include "study_uncertainty.hpp"
#include "two_results.hpp"
#include "write_result.hpp"

namespace rillclock {
namespace {

/// What puts every figure in doubt comes before what has its own effect.
bool doubts_all(const Notice& notice) { return notice.code == "relief-cannot-be"; }

Notices notices_of(const std::vector<Outlet>& outlets, const Grid& grid) {
    Notices all;
    for (const Outlet& outlet : outlets) {
        const Notices more = notices_of(outlet, grid);
        all.insert(all.end(), more.begin(), more.end());
    }
    return all;
}

Notices notices_of_files(const Study& study, std::size_t points) {
    Notices notices;
    const auto tell = [&](const char* code, const std::string& left_out, std::size_t most) {
        if (left_out.empty()) return;
        notices.push_back({.code = code, .text = left_out, .value = static_cast<double>(points), .threshold = static_cast<double>(most)});
    };
    tell("paths-left-out", words_on_left_out_paths(points), most_points_with_paths);
    tell("catchments-left-out", words_on_left_out_catchments(study, points), most_points_with_catchments);
    return notices;
}

/// Everything that was noticed on the way, by effect on the time, the greatest first.
Notices all_notices(const std::vector<Notices>& noticed) {
    Notices all;
    for (const Notices& more : noticed) all.insert(all.end(), more.begin(), more.end());
    std::stable_sort(all.begin(), all.end(), [](const Notice& a, const Notice& b) {
        return std::tie(b.effect_s, a.code, a.point) < std::tie(a.effect_s, b.code, b.point);
    });
    std::stable_partition(all.begin(), all.end(), doubts_all);
    return in_sentences(std::move(all));
}

/// Where nothing else says where it is, what was noticed of a point is at the point.
Notices at_their_points(Notices notices, const std::vector<Outlet>& outlets, const Grid& grid) {
    std::map<std::string, Cell> cells;
    for (const Outlet& outlet : outlets) cells.emplace(outlet.point.name, outlet.point.cell);
    for (Notice& notice : notices) {
        const auto at = cells.find(notice.point);
        if (notice.point.empty() || notice.place || at == cells.end()) continue;
        notice.place = grid.centre(at->second);
    }
    return notices;
}

std::vector<CellLabel> labels_of(const std::vector<DesignPoint>& points) {
    std::vector<CellLabel> labels;
    for (const DesignPoint& point : points) labels.push_back({point.cell, static_cast<std::uint32_t>(labels.size() + 1)});
    return labels;
}

std::vector<std::string> names_of(const std::vector<DesignPoint>& points) {
    std::vector<std::string> names;
    for (const DesignPoint& point : points) names.push_back(point.name);
    return names;
}

/// What the study states for a point's lump methods: for all points, or by a field of their file.
PointLumpInputs lump_inputs_at(const Study& study, const std::optional<StatedPoints>& stated, const std::string& point) {
    PointLumpInputs inputs;
    if (stated && stated->lump_inputs.contains(point)) inputs = stated->lump_inputs.at(point);
    for (const LumpInput input : all_lump_inputs) {
        if (study.methods[input].number) inputs[input] = study.methods[input].number;
    }
    return inputs;
}

std::vector<PointMethods> methods_of(const Study& study, const std::optional<StatedPoints>& stated, const CoverBook& book, const StudyRain& rain,
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

/// What was read, and what was settled by the data, for those who watch the run.
std::vector<std::string> facts_of(const Study& study, const StudyRain& rain, const CarriedWords& reviewed, const StudyRegions& regions) {
    std::vector<std::string> facts;
    if (const std::optional<int> bands = study.output.isochrones.bands) {
        facts.push_back("isochrones: every " + significant(in_minutes(regions.isochrones()->step)) + " min" + ", the shortest round step that gives at most " +
                        std::to_string(*bands) + (*bands == 1 ? " band" : " bands"));
    }
    if (rain.source && rain.is_everywhere) facts.push_back("rain: " + sentence(rain.source->echo));
    for (const ZoneRain& zone : rain.zones) facts.push_back("rain zone: " + sentence(zone.source.echo));
    const std::vector<std::string> words = sentences_on(reviewed);
    facts.insert(facts.end(), words.begin(), words.end());
    return facts;
}

constexpr std::size_t most_overview_rows = 20;

MappedFlow find_flow(const Study& study, const ResolvedStudy& resolved, TerrainData& terrain, const TileGrid& tiles, const Executor& executor) {
    return mapped_flow(study, resolved, terrain, [&](const ElevationStore& elevations) {
        return elevations.visit([&](const auto& z) { return flow_codes(z, terrain.ground, tiles, executor); });
    });
}

TiledGround ground_of(const TiledForest& forest, const Ground& steps, const TerrainData& terrain, const SurfaceData& surface,
                      const MappedFlow& flow, const RainZoneCells& zones) {
    return {.forest = forest, .ground = steps, .elevations = terrain.elevations,
            .metres_per_elevation_unit = terrain.format.metres_per_stored_unit(), .surface = surface.table,
            .mapped_channels = flow.line_cells,
            .reaches = flow.reaches.empty() ? nullptr : &flow.reaches,
            .rain_zones = zones.zone.size() > 0 ? &zones.zone : nullptr};
}

std::vector<PointHeads> heads_of_points(const LastPass& last, const DesignChannels& channels) {
    return last.study.timing.channel.design_storm ? heads_under_design_flow(last, channels) : heads_and_rasters(last);
}

std::optional<Uncertainty> uncertainty_if_asked(const UncertaintyParts& parts, std::int64_t cells, const Progress& progress) {
    if (!parts.study.uncertainty) return std::nullopt;
    return stage(progress, "uncertainty", cells, [&] { return uncertainty_of_study(parts, progress); });
}

/// A study, or one of its scenarios, with what is read before the rasters.
struct Task {
    const Study& study;
    std::filesystem::path part;   ///< of the result folder; empty for the study itself
    RainZoneShapes zone_shapes;
    StudyRain rain;
    StatedEdits edits;
};

Task read_task(const Study& study, std::filesystem::path part) {
    RainZoneShapes shapes = read_rain_zones(study);
    StudyRain rain = read_rain(study, shapes.files);
    return {.study = study, .part = std::move(part), .zone_shapes = std::move(shapes), .rain = std::move(rain), .edits = read_edits(study)};
}

/// What a study lays on its terrain.
struct LaidOn {
    ResolvedStudy resolved;
    TravelRules rules;
    SurfaceData surface;
    RainZoneCells zones;
    std::optional<StatedPoints> stated;
};

LaidOn lay_on(const Task& task, const TerrainData& terrain, const Progress& progress) {
    const ResolvedStudy resolved = resolve(task.study, facts_of(terrain.format, terrain.ground));
    return {.resolved = resolved,
            .rules = rules_of(task.study, resolved, task.rain),
            .surface = read_surface(task.study, terrain, progress),
            .zones = rain_zone_cells(task.study, task.zone_shapes, terrain),
            .stated = read_stated_points(task.study, terrain.system)};
}

/// What a study and its scenarios have in common.
struct CommonWork {
    const TerrainData& terrain;
    const MappedFlow& flow;
    const TiledForest& forest;
    const Executor& executor;
    ResultFolder& folder;
};

/// The points on their cells, and how they follow one another.
struct PlacedTree {
    PlacedPoints points;
    TiledOwners owners;
    PointTree tree;
};

PlacedTree place(const LaidOn& laid, const TiledTravel& travel, const TerrainData& terrain) {
    PlacedPoints placed = settle_points(laid.stated, laid.resolved, travel, terrain);
    const TiledForest& forest = travel.ground().forest;
    TiledOwners owners(forest, labels_of(placed.points), travel.executor());
    PointTree tree = point_tree(next_points(forest.codes(), owners, placed.points, travel.executor()));
    return {.points = std::move(placed), .owners = std::move(owners), .tree = std::move(tree)};
}

StudyPeaks peaks_of(const PeakInputs& inputs, HistogramTally* histograms, std::int64_t cells, const Progress& progress) {
    if (histograms == nullptr) return no_peaks(inputs.study, inputs.rain);
    return stage(progress, "peaks", cells, [&] { return study_peaks(inputs, histograms->take()); });
}

using InputFiles = std::function<std::vector<InputFile>()>;

/// A task worked out, its part of the result written but for the report.
struct WorkedOut {
    RunOutcome outcome;
    ReportText report;
};

WorkedOut work_out(Task& task, const LaidOn& laid, const CommonWork& common, const InputFiles& inputs_of, const Progress& progress) {
    const Study& study = task.study;
    const StudyRain& rain = task.rain;
    const TerrainData& terrain = common.terrain;
    const SurfaceData& surface = laid.surface;
    const std::int64_t cells = terrain.grid.size();
    common.folder.begin_part(task.part);
    const std::vector<ReviewWord> words = review_words(common.folder.part_target());
    const Ground steps = study.surface.unbiased_lengths ? terrain.ground.with_steps_weighted(unbiased_step_weight) : terrain.ground;
    const TiledGround ground = ground_of(common.forest, steps, terrain, surface, common.flow, laid.zones);
    ChannelReaches reaches;  // by the design storm; times refer to them
    const auto travel = stage(progress, "travel times", cells, [&] { return std::make_unique<TiledTravel>(ground, laid.rules, common.executor); });

    const auto [points, owners, tree] = stage(progress, "placing points", cells, [&] { return place(laid, *travel, terrain); });
    const std::vector<PointNumber> traced = isochrone_catchments(study, names_of(points.points));
    const HistogramRules binned = histogram_rules(study, surface.book, laid.rules.sheet.storm_factor);
    const auto histograms = gives_peaks(study, rain, surface.book)
                                ? std::make_unique<HistogramTally>(*travel, points.points.size(), binned) : nullptr;
    std::optional<StudyRegions> regions;
    OverviewSampler overview(terrain.grid);
    const LastPass last{.study = study, .rain = rain, .terrain = terrain, .travel = *travel, .owners = owners,
                        .points = points.points, .tree = tree, .folder = common.folder, .progress = progress,
                        .regions = regions, .overview = overview, .isochrone_catchments = traced, .histograms = histograms.get()};
    const std::vector<PointHeads> heads = heads_of_points(
        last, {.sections = common.flow.sections, .runoff = surface.runoff, .travel = *travel, .reaches = reaches});
    const std::vector<Outlet> outlets = stage(progress, "design points", cells, [&] {
        return outlets_of(*travel, points.points, tree, heads, outlet_rules_of(study, laid.resolved));
    });
    const std::optional<Uncertainty> uncertainty = uncertainty_if_asked(
        {.study = study, .rain = rain, .surface = surface, .travel = *travel, .owners = owners, .points = points.points, .tree = tree, .heads = heads},
        cells, progress);
    require_rain(rain, outlets);
    const std::vector<PointMethods> methods = methods_of(study, laid.stated, surface.book, rain, outlets);
    restate_own_times(task.edits, *travel, outlets);
    const StudyNetwork network = study_network({.study = study, .rain = rain, .book = surface.book, .outlets = outlets, .stated = task.edits});
    const StudyPeaks peaks = peaks_of({.study = study, .rain = rain, .book = surface.book, .outlets = outlets, .network = network, .binned = binned},
                                      histograms.get(), cells, progress);
    const Depressions depressions = stage(progress, "depressions", cells, [&] { return depressions_of(*travel, outlets); });
    const std::vector<DrawnDifference> drawn = drawn_differences(laid.stated, points.points, *regions, *travel, terrain);
    const Notices notices = at_their_points(all_notices({terrain.notices, notices_of(depressions, ground.metres_per_elevation_unit), laid.zones.notices,
                                         zone_notices(rain, outlets, terrain.grid), notices_of_ranges(study, surface), surface.notices,
                                         rain.notices, points.notices, notices_of(drawn, points.points), network.notices, peaks.notices, notices_of(outlets, terrain.grid), notices_of_files(study, outlets.size())}), outlets, terrain.grid);
    const CarriedWords reviewed = carry_over(words, notices);
    const std::vector<InputFile> inputs = inputs_of();
    const DataSummary data{.cells = cells, .void_cells = terrain.void_cells, .classes = surface.classes, .soils = surface.soils};
    const StudyResult result{.study = study, .resolved = laid.resolved, .rules = laid.rules, .rain = rain, .grid = terrain.grid,
                             .system = terrain.system, .format = terrain.format, .book = surface.book, .sections = common.flow.sections,
                             .surface_classes = surface.table.classes, .outlets = outlets, .methods = methods, .network = network,
                             .peaks = peaks, .notices = notices, .inputs = inputs, .data = data,
                             .reviewed = reviewed.by_notice, .drawn = drawn, .uncertainty = uncertainty ? &*uncertainty : nullptr,
                             .isochrones = regions->isochrones() ? &*regions->isochrones() : nullptr};
    ResultTexts texts = stage(progress, "writing files", cells, [&] {
        return write_result({.result = result, .terrain = terrain, .travel = *travel, .flow = common.flow,
                             .depressions = depressions.deepest_first, .regions = *regions, .overview = overview}, common.folder);
    });
    RunOutcome outcome{.folder = common.folder.part_target(), .facts = facts_of(study, rain, reviewed, *regions), .headlines = headlines(result),
            .overview = outlets_overview(result, most_overview_rows), .notices = notices, .json = std::move(texts.json), .scenarios = {}};
    return {.outcome = std::move(outcome), .report = std::move(texts.report)};
}

/// Reports with the scenario's name before each stage.
Progress told_of(const std::string& scenario, const Progress& progress) {
    return Progress([scenario, &progress](const StageProgress& report) {
        const std::string stage = scenario + ": " + std::string(report.stage);
        progress.tell({.stage = stage, .done = report.done, .total = report.total, .finished = report.finished});
        return true;
    });
}

/// What a scenario tells the caller of the run, and the study's report.
struct ScenarioWorked {
    ScenarioOutcome outcome;
    ScenarioBeside beside;
};

std::vector<std::string> words_of(const ScenarioStudy& scenario) {
    std::vector<std::string> changes;
    for (const StatedChange& change : scenario.changes) changes.push_back(words(change));
    return changes;
}

/// Works a scenario out and compares it with the study, whose part of the result has been written.
ScenarioWorked work_out_scenario(const ScenarioStudy& scenario, Task& task, const CommonWork& common,
                                 const InputFiles& inputs_of, const Progress& whole) {
    const Progress progress = told_of(scenario.name, whole);
    ResultFolder& folder = common.folder;
    const WorkedOut worked = work_out(task, lay_on(task, common.terrain, progress), common, inputs_of, progress);
    folder.write_text("report.html", worked.report.before + worked.report.after);
    folder.begin_part(comparison_folder(scenario));
    const ComparedResults compared = compare_two({folder.making(), folder.target()}, {folder.making() / task.part, worked.outcome.folder},
                                                 CompareOptions{}.tolerance, &folder, progress);
    ScenarioOutcome outcome{.name = scenario.name, .folder = worked.outcome.folder, .comparison_folder = folder.part_target(),
                            .facts = worked.outcome.facts, .comparison = compared.outcome.text, .worse = compared.outcome.worse,
                            .changes = words_of(scenario), .json = worked.outcome.json, .comparison_json = compared.outcome.json};
    return {.outcome = std::move(outcome),
            .beside = {.name = scenario.name, .folder = task.part.string(), .comparison_folder = comparison_folder(scenario),
                       .changes = words_of(scenario), .comparison = compared.comparison}};
}

std::vector<Study> scenario_studies(const Study& study) {
    std::vector<Study> studies;
    for (const ScenarioStudy& scenario : study.scenarios) studies.push_back(scenario_study(study, scenario));
    return studies;
}

/// The study itself first.
std::vector<Task> read_tasks(const Study& study, const std::vector<Study>& scenarios) {
    std::vector<Task> tasks;
    tasks.push_back(read_task(study, {}));
    for (std::size_t i = 0; i < scenarios.size(); ++i) {
        require_cover(scenarios[i]);
        tasks.push_back(read_task(scenarios[i], scenario_folder(study.scenarios[i])));
    }
    return tasks;
}

std::vector<std::vector<InputFile>> all_input_files(const std::vector<Task>& tasks) {
    std::map<std::string, std::string> known;
    std::vector<std::vector<InputFile>> files;
    for (const Task& task : tasks) files.push_back(input_files(task.study, task.rain, known));
    return files;
}

}  // namespace

RunOutcome run(const Study& study, const RunOptions& options, const Progress& progress) {
    check_study(study);
    const GdalSession session;
    require_memory(study);
    ResultFolder folder(located(study, study.output.folder), options.replace ? Existing::replace : Existing::refuse);
    (void)review_words(folder.target());   // a table that cannot be read is told of before the work
    const Executor executor(options.threads != 0 ? options.threads : gdal_threads().value_or(0));
    const GdalThreadLimit limit(executor.threads());
    const std::vector<Study> scenarios = scenario_studies(study);
    std::vector<Task> tasks = read_tasks(study, scenarios);
    // Checksums are made while the work goes on; nothing else is left to do on one processor alone.
    const std::shared_future<std::vector<std::vector<InputFile>>> checksums = std::async(std::launch::async, [&] { return all_input_files(tasks); });
    const auto inputs_of = [&](std::size_t task) { return [&, task] { return checksums.get()[task]; }; };
    TerrainData terrain = read_terrain(study, executor, progress);
    std::optional<LaidOn> laid(lay_on(tasks.front(), terrain, progress));
    const TileGrid tiles(terrain.grid.rows, terrain.grid.columns, options.tile_side);

    const MappedFlow flow = stage(progress, "flow directions", terrain.grid.size(),
                                  [&] { return find_flow(study, laid->resolved, terrain, tiles, executor); });
    const TiledForest forest(flow.codes, tiles, executor);
    const CommonWork common{.terrain = terrain, .flow = flow, .forest = forest, .executor = executor, .folder = folder};
    WorkedOut worked = work_out(tasks.front(), *laid, common, inputs_of(0), progress);
    laid.reset();   // a scenario has a surface of its own in its place
    std::vector<ScenarioBeside> beside;
    for (std::size_t i = 0; i < scenarios.size(); ++i) {
        ScenarioWorked scenario = work_out_scenario(study.scenarios[i], tasks[i + 1], common, inputs_of(i + 1), progress);
        worked.outcome.scenarios.push_back(std::move(scenario.outcome));
        beside.push_back(std::move(scenario.beside));
    }
    folder.begin_part({});
    folder.write_text("report.html", worked.report.before + scenarios_section(beside) + worked.report.after);
    stage(progress, "keeping files", terrain.grid.size(), [&] { folder.commit(); });
    return std::move(worked.outcome);
}

}  // namespace rillclock
