#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/io/ground_of.hpp"
#include "rillclock/terrain/relief.hpp"
#include "rillclock/tiles/read_ahead.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

constexpr std::int64_t strip_rows = 512;
/// No ground is as steep between neighbouring cells.
constexpr double impossible_slope = 20.0;

/// How many points there are at most. Where none are stated, each way out with a share of the area counts: they cannot be more than the shares
/// that go into the whole, and as they differ in size they are not half as many; nor more than twice the cells of the edge.
std::int64_t most_points(const Study& study, const ElevationFile& elevations, std::size_t stated) {
    if (study.points.file || study.points.catchments.file) return static_cast<std::int64_t>(stated);
    const Grid& grid = elevations.grid();
    const double share = resolve(study, facts_of(elevations.format, ground_of(grid, elevations.system))).auto_area;
    return static_cast<std::int64_t>(std::ceil(std::min(0.5 / share, 4.0 * static_cast<double>(grid.rows + grid.columns))));
}

}  // namespace

std::int64_t read_elevations(BlockSource<double>& source, ElevationStore& store, const Progress& progress) {
    const Grid& grid = source.grid();
    std::int64_t voids = 0;
    read_ahead(source, strip_rows, [&](const Window& window, std::span<const double> strip) {
        progress.tell({.stage = "reading elevations", .done = window.row * grid.columns, .total = grid.size()});
        voids += std::count_if(strip.begin(), strip.end(), [](double z) { return std::isnan(z); });
        store.write(window, strip);
    });
    progress.tell({.stage = "reading elevations", .done = grid.size(), .total = grid.size(), .finished = true});
    return voids;
}

Notices relief_notices(const Relief& relief, const Executor& executor) {
    const SteepestPair pair = steepest_pair(relief.elevations, relief.ground, relief.metres_per_unit, executor);
    if (!(pair.slope > impossible_slope)) return {};
    const RowColumn at = relief.grid.row_column(pair.cell);
    return {{.code = "relief-cannot-be",
             .text = "the ground falls " + significant(pair.slope, 3) + " times as far as it runs at row " + std::to_string(at.row) +
                     ", column " + std::to_string(at.column) + "; check the vertical unit first (elevations are taken to be in " +
                     relief.unit + "), then look for spikes in the data",
             .value = pair.slope, .threshold = impossible_slope, .place = relief.grid.centre(pair.cell)}};
}

ElevationStore::Width width_of(StoredType type) {
    const bool wide = type == StoredType::int32 || type == StoredType::uint32 || type == StoredType::float64;
    return wide ? ElevationStore::Width::eight_bytes : ElevationStore::Width::four_bytes;
}

ElevationFile open_elevation_of(const Study& study) {
    ElevationOptions options;
    options.band = study.terrain.band;
    if (study.terrain.elevation_unit) options.unit = length_unit_of(in_metres(*study.terrain.elevation_unit), "").name;
    return open_elevation(located(study, study.terrain.elevation), options);
}

MemoryTask memory_task(const Study& study, const ElevationFile& elevations, std::size_t stated_points) {
    return {.cells = elevations.grid().size(),
            .rows = elevations.grid().rows,
            .columns = elevations.grid().columns,
            .wide_elevations = width_of(elevations.format.stored) == ElevationStore::Width::eight_bytes,
            .soil_raster = study.surface.soil.file.has_value(),
            .rain_zones = study.rain.zones.file.has_value(),
            .own_storms = study.timing.is_kinematic() || study.rain.zones.file.has_value(),
            .points = most_points(study, elevations, stated_points),
            .draws = study.uncertainty ? study.uncertainty->draws : 0,
            .rain_by_duration = study.rain.is_by_duration(),
            .isochrones = study.output.isochrones.are_asked(),
            .scenarios = static_cast<std::int64_t>(study.scenarios.size())};
}

void require_memory(const Study& study) {
    const ElevationFile elevations = open_elevation_of(study);
    const std::optional<StatedPoints> stated = read_stated_points(study, elevations.system);
    const auto lack = lack_of_memory(memory_task(study, elevations, stated ? stated->count() : 0), usable_memory());
    if (lack) throw machine_error(*lack);
}

TerrainData read_terrain(const Study& study, const Executor& executor, const Progress& progress) {
    ElevationFile file = open_elevation_of(study);
    TerrainData data{.grid = file.grid(), .system = file.system, .format = file.format,
                     .ground = ground_of(file.grid(), file.system), 
                     .elevations = ElevationStore(file.grid().rows, file.grid().columns, width_of(file.format.stored)),
                     .notices = file.notices};
    data.void_cells = read_elevations(*file.source, data.elevations, progress);
    if (data.void_cells == data.grid.size()) {
        throw input_error("the elevations in '" + study.terrain.elevation + "' hold no data: every cell is void; check the file's " +
                          "nodata value, for instance with gdalinfo -stats");
    }
    const Relief relief{.grid = data.grid, .ground = data.ground, .elevations = data.elevations,
                        .metres_per_unit = data.format.metres_per_stored_unit(), .unit = data.format.unit.name};
    for (const Notices& more : {file.source->notices(), relief_notices(relief, executor)}) {
        data.notices.insert(data.notices.end(), more.begin(), more.end());
    }
    return data;
}

DataFacts facts_of(const ElevationFormat& format, const Ground& ground) {
    return {.cell_side = ground.cell_side(), .vertical_quantum = metres(format.quantum_m())};
}

}  // namespace rillclock
