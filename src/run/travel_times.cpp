#include "rillclock/run/travel_times.hpp"

#include <array>
#include <cmath>
#include <limits>
#include <optional>
#include <utility>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/raster_strips.hpp"
#include "rillclock/raster/elevation_check.hpp"
#include "rillclock/terrain/tiled_directions.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

constexpr auto void_number = std::numeric_limits<double>::quiet_NaN();
/// What stands for the files of a study that has none.
constexpr const char* in_memory = "in memory";

constexpr std::array<std::string_view, 22> keys{
    "terrain.elevation_unit", "terrain.slope_window", "terrain.vertical_step", "terrain.pond_depth", "terrain.pond_speed",
    "surface.book", "surface.fallback_class", "surface.path_length", "rain.two_year_24_hour", "timing.sheet", "timing.sheet_limit",
    "timing.sheet_limit_rule", "timing.shallow", "timing.velocity_chart", "timing.slope_floor.overland", "timing.slope_floor.channel",
    "timing.channel_from", "timing.channel.n", "timing.channel.region", "timing.channel.hydraulic_radius", "timing.channel.width",
    "timing.channel.depth"};

/// Elevations as they come, but for what cannot be one.
class CheckedElevations final : public BlockSource<double> {
public:
    CheckedElevations(BlockSource<double>& source, double metres_per_unit) : source_(source), check_(metres_per_unit) {}

    [[nodiscard]] const Grid& grid() const override { return source_.grid(); }
    void read(const Window& window, std::span<double> values) override {
        source_.read(window, values);
        for (double& value : values) value = check_.checked(value);
    }
    [[nodiscard]] Notices notices() const { return check_.notices("elevations"); }

private:
    BlockSource<double>& source_;
    ElevationCheck check_;
};

std::string shape_of(const Grid& grid) { return std::to_string(grid.rows) + " rows × " + std::to_string(grid.columns) + " columns"; }

void check_grids(const PlaneLand& land) {
    const Grid& grid = land.elevations.grid();
    const Grid& cover = land.cover.grid();
    if (grid.rows < 1 || grid.columns < 1) {
        throw input_error("the elevations have " + shape_of(grid) + "; give at least one cell");
    }
    if (grid.size() >= static_cast<std::int64_t>(no_cell)) {
        throw input_error("the elevations have " + shape_of(grid) + ", more than the 4 294 967 294 cells that are served; cut them");
    }
    if (grid.rows != cover.rows || grid.columns != cover.columns) {
        throw input_error("the elevations have " + shape_of(grid) + " and the land cover " + shape_of(cover) +
                          "; bring the cover onto the grid of the elevations, nearest class");
    }
    for (const Length side : {land.cell_width, land.cell_height}) {
        if (!(side > metres(0)) || !std::isfinite(in_metres(side))) {
            throw input_error("a cell size is " + significant(in_metres(side)) + " m; give lengths above 0, such as 5 m");
        }
    }
}

/// What needs files, points or rain by duration is said to be left out rather than passed over.
void check_plane_study(const Study& study) {
    const TerrainStudy& terrain = study.terrain;
    const char* asks = nullptr;
    if (terrain.channels.file || terrain.crossings.file || terrain.barriers.file || terrain.keep_water.file) asks = "mapped lines or kept water";
    if (study.surface.soil.file) asks = "a raster of soil groups";
    if (study.surface.cover_areas.file) asks = "polygons laid over the land cover";
    if (study.points.file || study.points.catchments.file || study.points.pipes || study.timing.overrides) {
        asks = "design points, drawn catchments, pipes or overrides";
    }
    if (study.rain.is_by_duration() || study.timing.is_kinematic() || study.timing.channel.design_storm) {
        asks = "rain by duration, kinematic sheet flow or channels by the design storm, whose times differ from point to point";
    }
    if (study.uncertainty) asks = "ranges of the inputs";
    if (!study.scenarios.empty()) asks = "scenarios";
    if (asks == nullptr) return check_study(study);
    throw input_error(std::string("travel times from rasters in memory do not know of ") + asks +
                      "; leave it out, or run a study with its files");
}

/// The study as it would be with files.
Study with_names(Study study) {
    if (study.terrain.elevation.empty()) study.terrain.elevation = in_memory;
    if (study.surface.cover.empty()) study.surface.cover = in_memory;
    check_plane_study(study);
    return study;
}

/// Everything that the answer is read from, made in this order.
class PlaneTravel {
public:
    PlaneTravel(const PlaneLand& land, const Study& study, unsigned threads, const Progress& progress)
        : study_(study), progress_(progress), grid_(land.elevations.grid()),
          metres_per_unit_(study.terrain.elevation_unit ? in_metres(*study.terrain.elevation_unit) : 1.0),
          ground_(Ground::planar(land.cell_width, land.cell_height)), executor_(threads),
          elevations_(grid_.rows, grid_.columns, land.wide ? ElevationStore::Width::eight_bytes : ElevationStore::Width::four_bytes) {
        const double quantum_m = land.whole_numbers ? metres_per_unit_ : 0.0;
        resolved_ = resolve(study, {.cell_side = ground_.cell_side(), .vertical_quantum = metres(quantum_m)});
        read_elevations_of(land);
        CoverReading cover = read_cover(study, read_book(study), land.cover, elevations_, Raster<std::uint8_t>(grid_.rows, grid_.columns), progress);
        add(cover.surface.notices);
        surface_ = std::move(cover.surface.table);
    }

    [[nodiscard]] TravelTimes times() {
        const TileGrid tiles(grid_.rows, grid_.columns);
        const Raster<FlowCode> codes = stage(progress_, "flow directions", grid_.size(), [&] {
            return elevations_.visit([&](const auto& z) { return flow_codes(z, ground_, tiles, executor_); });
        });
        const TiledForest forest(codes, tiles, executor_);
        const Ground steps = study_.surface.unbiased_lengths ? ground_.with_steps_weighted(unbiased_step_weight) : ground_;
        const TiledGround ground{.forest = forest, .ground = steps, .elevations = elevations_,
                                 .metres_per_elevation_unit = metres_per_unit_, .surface = surface_};
        const StudyRain rain = study_rain(study_, {});
        add(rain.notices);
        const TiledTravel travel(ground, rules_of(study_, resolved_, rain), executor_);
        return read_out(travel);
    }

private:
    void add(const Notices& more) { notices_.insert(notices_.end(), more.begin(), more.end()); }

    void read_elevations_of(const PlaneLand& land) {
        CheckedElevations source(land.elevations, metres_per_unit_);
        void_cells_ = read_elevations(source, elevations_, progress_);
        if (void_cells_ == grid_.size()) throw input_error("the elevations hold no data: every cell is void (NaN); give at least one number");
        const std::string unit = length_unit_of(metres_per_unit_, "").name;
        add(source.notices());
        add(relief_notices({.grid = grid_, .ground = ground_, .elevations = elevations_, .metres_per_unit = metres_per_unit_, .unit = unit}, executor_));
    }

    [[nodiscard]] TravelTimes read_out(const TiledTravel& travel) {
        const auto [rows, columns] = std::pair(grid_.rows, grid_.columns);
        TravelTimes out{.minutes = {rows, columns}, .flow_azimuth = {rows, columns}, .contributing_area_m2 = {rows, columns},
                        .regime = {rows, columns}, .spill_elevation = {rows, columns}, .void_cells = void_cells_, .notices = std::move(notices_)};
        const TileGrid& tiles = travel.ground().forest.tiles();
        const auto across = static_cast<std::size_t>(tiles.tiles_across());
        Workspaces<TileDesk> desks;
        for (std::int64_t down = 0; down < tiles.tiles_down(); ++down) {
            const auto first = static_cast<Tile>(static_cast<std::size_t>(down) * across);
            progress_.tell({.stage = "travel times", .done = tiles.window(first).row * columns, .total = grid_.size()});
            executor_.for_each(across, [&](std::size_t column) {
                const auto desk = desks.lease();
                travel.read_tile(first + static_cast<Tile>(column), *desk);
                for (Local local = 0; local < desk->flow.size(); ++local) read_cell(travel, *desk, local, out);
            });
        }
        progress_.tell({.stage = "travel times", .done = grid_.size(), .total = grid_.size(), .finished = true});
        return out;
    }

    static void read_cell(const TiledTravel& travel, const TileDesk& desk, Local local, TravelTimes& out) {
        const Cell cell = desk.flow.cell(local);
        const FlowCode code = desk.flow.code(local);
        const bool is_void = code == flow_void;
        const Duration time = desk.time_to_root(local).under(travel.rules().sheet.storm_factor);
        out.minutes[cell] = static_cast<float>(is_void ? void_number : in_minutes(time));
        out.flow_azimuth[cell] = azimuth_of(code);
        out.contributing_area_m2[cell] = is_void ? void_number : from_fixed_area(desk.area[local]);
        out.regime[cell] = static_cast<std::uint8_t>(desk.regime[local]);
        out.spill_elevation[cell] = is_void ? void_number : desk.spill[local];
    }

    static std::uint16_t azimuth_of(FlowCode code) {
        if (is_direction(code)) return static_cast<std::uint16_t>(azimuth_degrees(static_cast<Direction>(code)));
        return static_cast<std::uint16_t>(code == flow_root ? azimuth_leaves : azimuth_void);
    }

    const Study& study_;
    const Progress& progress_;
    Grid grid_;
    double metres_per_unit_;
    Ground ground_;
    Executor executor_;
    ElevationStore elevations_;
    ResolvedStudy resolved_;
    SurfaceTable surface_;
    std::int64_t void_cells_ = 0;
    Notices notices_;
};

}  // namespace

TravelTimes travel_times(const PlaneLand& land, const Study& study, unsigned threads, const Progress& progress) {
    check_grids(land);
    const Study named = with_names(study);
    const MemoryTask task{.cells = land.elevations.grid().size(), .wide_elevations = land.wide, .results_kept = true};
    if (const auto lack = lack_of_memory(task, usable_memory())) throw machine_error(*lack);
    return PlaneTravel(land, named, threads, progress).times();
}

std::span<const std::string_view> travel_time_keys() { return keys; }

}  // namespace rillclock
