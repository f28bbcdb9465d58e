#pragma once

#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <type_traits>

#include "rillclock/catchment/design_points.hpp"
#include "rillclock/catchment/outlet.hpp"
#include "rillclock/core/progress.hpp"
#include "rillclock/deliver/study_result.hpp"
#include "rillclock/io/elevation_file.hpp"
#include "rillclock/raster/grid_shapes.hpp"
#include "rillclock/raster/ground.hpp"
#include "rillclock/run/memory_need.hpp"
#include "rillclock/terrain/elevation_store.hpp"
#include "rillclock/study/study.hpp"
#include "rillclock/study/study_network.hpp"
#include "rillclock/study/study_rain.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "rillclock/travel/surface_table.hpp"
#include "rillclock/travel/tiled_travel.hpp"
#include "rillclock/travel/travel_rules.hpp"

namespace rillclock {

/// The elevations of a study, read.
struct TerrainData {
    Grid grid;
    ReferenceSystem system;
    ElevationFormat format;
    Ground ground;
    ElevationStore elevations;
    std::int64_t void_cells = 0;
    Notices notices;
};

/// The land cover of a study, on the grid of its elevations.
struct SurfaceData {
    CoverBook book;
    SurfaceTable table;
    std::vector<ClassCount> classes;
    std::vector<SoilCount> soils;   ///< where the study has a raster of them
    std::vector<double> runoff;     ///< coefficient of each class of the book and soil; only for channel flow by the design storm
    Notices notices;
};

/// Opens what a study says of its elevations; nothing is read but the header.
[[nodiscard]] ElevationFile open_elevation_of(const Study& study);
/// How elevations of a stored type are kept: four bytes a cell hold every value of most types exactly.
[[nodiscard]] ElevationStore::Width width_of(StoredType type);
/// What the memory of the study's run depends on; `stated_points` is how many points or catchments its file has, which counts where it names one.
[[nodiscard]] MemoryTask memory_task(const Study& study, const ElevationFile& elevations, std::size_t stated_points);
/// Reads all strips of a source into the store; returns how many cells are void.
std::int64_t read_elevations(BlockSource<double>& source, ElevationStore& store, const Progress& progress);
/// Elevations, and what makes slopes of them.
struct Relief {
    const Grid& grid;
    const Ground& ground;
    const ElevationStore& elevations;
    double metres_per_unit = 1.0;
    std::string unit;   ///< its name, for messages
};
/// A notice where ground is steeper than any can be.
[[nodiscard]] Notices relief_notices(const Relief& relief, const Executor& executor);
/// Throws a machine error with numbers where there is less memory than the run needs; reads the header of the elevations and the points.
void require_memory(const Study& study);
[[nodiscard]] TerrainData read_terrain(const Study& study, const Executor& executor, const Progress& progress);
[[nodiscard]] CoverBook read_book(const Study& study);
/// Throws an input error where the cover or its book cannot be used, from their headers alone.
void require_cover(const Study& study);
/// What the land cover of a study does to water: the classes of all cells and their hydraulics, on the grid of the elevations.
struct CoverReading {
    SurfaceData surface;           ///< without soils
    std::vector<bool> occurs;      ///< of each class of the book: whether any cell has it
};
/// Reads classes from `source`, which has the grid of the elevations; cells whose elevation is void do not count. Where something is laid
/// over the raster, `over` has 1 + its class's position in the book, else 0.
/// Throws an input error for classes that the book does not know, unless the study names one for them.
[[nodiscard]] CoverReading read_cover(const Study& study, CoverBook book, BlockSource<std::int32_t>& source, const ElevationStore& elevations,
                                      Raster<std::uint8_t> over, const Progress& progress);
[[nodiscard]] SurfaceData read_surface(const Study& study, const TerrainData& terrain, const Progress& progress);
/// A hand-drawn catchment, in the DEM's coordinates.
struct DrawnCatchment {
    std::string name;
    std::vector<Polygon> polygons;
};
/// Points of the study's file in the DEM's coordinates, and what was left out of it.
struct StatedPoints {
    std::vector<StatedPoint> points;
    std::map<std::string, PointLumpInputs> lump_inputs;   ///< by name: what fields of the file state for the lump methods
    std::vector<DrawnCatchment> drawn;   ///< in place of points: these get theirs where water leaves them
    Notices notices;

    /// Points, or catchments that get theirs.
    [[nodiscard]] std::size_t count() const { return drawn.empty() ? points.size() : drawn.size(); }
};
/// Nothing where the study names no file of points or catchments.
[[nodiscard]] std::optional<StatedPoints> read_stated_points(const Study& study, const ReferenceSystem& system);
[[nodiscard]] PlacedPoints settle_points(const std::optional<StatedPoints>& stated, const ResolvedStudy& resolved,
                                         const TiledTravel& travel, const TerrainData& terrain);
/// The numbers of the points that `output.isochrone_catchments` names, among points of these names. Throws an input error for a name that
/// none has.
[[nodiscard]] std::vector<PointNumber> isochrone_catchments(const Study& study, const std::vector<std::string>& names);
[[nodiscard]] DataFacts facts_of(const ElevationFormat& format, const Ground& ground);
/// Reads the rain of a study, from its file if it names one, and from those of its zones.
[[nodiscard]] StudyRain read_rain(const Study& study, const std::vector<std::string>& zone_files);
/// Reads the pipes and overrides of a study, where it names any.
[[nodiscard]] StatedEdits read_edits(const Study& study);
/// Finds the own times that follow from stated sheet lengths and roughness.
void restate_own_times(StatedEdits& stated, const TiledTravel& travel, const std::vector<Outlet>& outlets);
[[nodiscard]] TravelRules rules_of(const Study& study, const ResolvedStudy& resolved, const StudyRain& rain);
[[nodiscard]] OutletRules outlet_rules_of(const Study& study, const ResolvedStudy& resolved);
/// The files of a study with their checksums; those of files that are `known` by their path are not made again, and new ones are added there.
[[nodiscard]] std::vector<InputFile> input_files(const Study& study, const StudyRain& rain, std::map<std::string, std::string>& known);

/// Tells the caller that a stage begins, does it, tells that it is over, and hands its result on.
template <class Work>
auto stage(const Progress& progress, std::string_view name, std::int64_t cells, Work work) {
    const auto finish = [&] { progress.tell({.stage = name, .done = cells, .total = cells, .finished = true}); };
    progress.tell({.stage = name, .total = cells});
    if constexpr (std::is_void_v<decltype(work())>) {
        work();
        finish();
    } else {
        auto result = work();
        finish();
        return result;
    }
}

}  // namespace rillclock
