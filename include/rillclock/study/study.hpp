#pragma once

#include <cstdint>
#include <map>
#include <optional>
#include <string>
#include <vector>

#include "rillclock/catchment/point_network.hpp"
#include "rillclock/core/quantity.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/hydraulics/channel_size.hpp"
#include "rillclock/hydraulics/rational.hpp"
#include "rillclock/hydraulics/storm_time.hpp"
#include "rillclock/rainfall/rain_source.hpp"
#include "rillclock/study/lump_inputs.hpp"
#include "rillclock/study/study_value.hpp"
#include "rillclock/study/uncertainty_study.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "rillclock/surface/runoff_coefficients.hpp"

namespace rillclock {

/// The units in which results are reported; the computation is in SI either way.
enum class ReportUnits { us, si };
/// What ends sheet flow: the stated length or the index of McCuen and Spiess, whichever comes first; or the stated
/// length.
enum class SheetLimitRule { length_or_index, stated };
/// Which flow the velocity in pipes is for: when they run just full, or at the depth of the design flow.
enum class PipeFlow { full_bore, design_flow };
/// How shallow concentrated flow is told apart.
enum class ShallowRule { by_cover, paved_and_unpaved, chart };

/// A vector file of what is mapped beside the elevations.
struct MappedLayer {
    std::optional<std::string> file = {};    ///< relative to the study's folder
    std::optional<std::string> layer = {};   ///< needed only where the file has several
};

/// A study as stated: what a study file or the command line says, with the defaults that do not depend on the data.
/// What is absent here and depends on the data is settled by `resolve`.
struct TerrainStudy {
    std::string elevation = {};                 ///< raster; relative to the study's folder
    std::optional<int> band = {};               ///< from 1; needed only where the file has several
    std::optional<Length> elevation_unit = {};  ///< the length of one unit of elevation, where the study states it
    MappedLayer channels = {};
    MappedLayer crossings = {};
    MappedLayer barriers = {};
    MappedLayer keep_water = {};
    std::optional<Length> departure = {};
    std::optional<Length> slope_window = {};
    std::optional<Length> vertical_step = {};
    std::optional<Length> pond_depth = {};
    Speed pond_speed = metres_per_second(2);  ///< infinite for "unlimited"
};

/// A raster of soil groups, and what its values mean.
struct SoilStudy {
    std::optional<std::string> file = {};         ///< relative to the study's folder
    std::optional<int> band = {};                 ///< from 1; needed only where the file has several
    std::map<int, SoilGroup> classes = {};        ///< by value; 1 to 4 are A to D where empty
    std::optional<SoilGroup> fallback_group = {}; ///< for cells without one
};

/// Land cover and soil, as stated.
struct SurfaceStudy {
    std::string cover = {};                    ///< raster; relative to the study's folder
    std::optional<int> band = {};              ///< from 1; needed only where the file has several
    std::string book = {};                     ///< a built-in book's name, or a CSV file relative to the study's folder
    std::optional<SoilGroup> soil_group = {};  ///< of the whole study, for curve numbers and runoff coefficients
    SoilStudy soil = {};                       ///< or a raster of soil groups
    std::optional<int> fallback_class = {};    ///< for codes the book does not know and cells without cover
    MappedLayer cover_areas = {};              ///< polygons of classes, laid over the raster
    std::string cover_field = "cover";         ///< that names a polygon's class, by code or name
    bool unbiased_lengths = false;             ///< steps along the grid count with `unbiased_step_weight`
};

/// Design points, as stated.
struct PointStudy {
    std::optional<std::string> file =
        {};  ///< relative to the study's folder; without it points stand where flow leaves the data
    std::optional<std::string> name = {};   ///< field that names the points
    std::optional<std::string> layer = {};  ///< the file's first layer where absent
    std::optional<double> auto_area = {};   ///< share of the data's area from which a way out counts as a point, 0 to 1
    std::optional<Length> move_within = {};
    std::optional<std::string> area = {};   ///< field that holds surveyed areas
    std::optional<Area> area_unit = {};     ///< of areas that are bare numbers; each carries its own where absent
    MappedLayer catchments = {};            ///< hand-drawn polygons, in place of a file of points
    std::optional<std::string> pipes = {};  ///< CSV file, relative to the study's folder
};

/// A formula of rain as stated, for one return period or for all.
struct StatedRainFormula {
    PeriodFormula formula = {};
    std::string subject = {};  ///< where it stands: "rain.formula (study.toml, line 9, column 11)"
};

/// Polygons that name a rain file each.
struct ZoneStudy {
    std::optional<std::string> file = {};  ///< relative to the study's folder; so are the rain files that it names
    std::optional<std::string> layer = {};  ///< needed only where the file has several
    std::string field = "rain";            ///< that names a polygon's rain file
};

/// Rain, as stated: a depth, or by duration from a file, zones or formulas.
struct RainStudy {
    std::optional<Length> two_year_24_hour = {};
    std::optional<std::string> file = {};          ///< relative to the study's folder
    std::optional<Atlas14Block> block = {};        ///< of an Atlas 14 file; the estimate where absent
    ZoneStudy zones = {};
    std::vector<StatedRainFormula> formulas = {};  ///< in place of a file
    std::optional<Duration> formula_from = {};     ///< between which durations the formulas hold
    std::optional<Duration> formula_to = {};
    std::vector<double> return_periods = {};  ///< years, as listed; the default where empty

    [[nodiscard]] bool is_by_duration() const { return file || zones.file || !formulas.empty(); }
    /// Whether there is rain by duration for the whole land: what counts outside of all zones, where there are some.
    [[nodiscard]] bool is_everywhere() const { return file || !formulas.empty(); }
};

/// The section of channels: a stated hydraulic radius, or top width and mean depth by contributing area, of the study's own or of a
/// region. With neither, the sizes of the whole United States (`channel_sizes`).
struct ChannelStudy {
    double n = 0.045;
    std::optional<std::string> region = {};  ///< one of `channel_sizes()`
    std::optional<Length> hydraulic_radius = {};
    std::optional<PowerLaw> width = {};
    std::optional<PowerLaw> depth = {};
    bool design_storm = false;               ///< velocities by the flow of the design storm in place of a bankfull size
    std::optional<double> side_slope = {};   ///< run over rise, of channels under the design storm; 0 where absent

    /// The published set whose width and depth count; null where the study states its own size.
    [[nodiscard]] const ChannelSize* published_size() const;
};

/// How water is timed, as stated.
struct TimingStudy {
    std::string sheet = "nrcs";                       ///< or "kinematic"
    std::optional<double> sheet_constant = {};        ///< printed constant of the kinematic formula; 0.933 where absent
    bool sheet_takes_runoff = false;                  ///< kinematic sheet flow under C·i in place of i
    std::optional<StormDuration> storm = {};          ///< the whole path where absent
    std::optional<double> raster_return_period = {};  ///< years
    Length sheet_limit = feet(100);
    SheetLimitRule sheet_limit_rule = SheetLimitRule::length_or_index;
    ShallowRule shallow = ShallowRule::by_cover;
    std::optional<std::string> velocity_chart = {};  ///< CSV file relative to the study's folder, for ShallowRule::chart
    double slope_floor_overland = 0.001;             ///< rise over run; 0 is off
    double slope_floor_channel = 0.0001;             ///< rise over run; 0 is off
    std::optional<Area> channel_from = hectares(5);  ///< absent: only where channels are mapped
    ChannelStudy channel = {};
    double ignore_tail = 0.0;  ///< share of a point's area, the slowest, that is left out; 0 to below 1
    std::optional<Length> shortest_segment = {};
    std::optional<std::string> overrides = {};  ///< CSV file, relative to the study's folder
    std::optional<PipeFlow> pipe_flow = {};     ///< full-bore where absent

    [[nodiscard]] bool is_kinematic() const { return sheet == "kinematic"; }
};

/// How arrivals are binned where a study says nothing of it.
inline constexpr Duration standard_time_bin = seconds(5);

/// How peak flows are found, as stated.
struct PeakStudy {
    std::optional<Duration> least_time = {};  ///< no intensity is read below it; 5 min where absent
    std::optional<CoefficientSource> coefficient = {};       ///< the cover book where absent
    std::optional<RationalConversion> conversion = {};       ///< exact where absent
    std::optional<FrequencyFactors> frequency_factors = {};  ///< Wright-McLaughlin's where absent
    std::optional<Area> area_limit = {};                     ///< beyond it a notice; 200 ac where absent
    std::optional<Duration> time_bin = {};                   ///< by which arrivals are binned; 5 s where absent

    [[nodiscard]] bool is_stated() const {
        return least_time || coefficient || conversion || frequency_factors || area_limit || time_bin;
    }
};

/// What is stated for methods that time a catchment as one lump; what is not comes from the cover book, where it can.
using MethodStudy = ByLumpInput<LumpValue>;

/// Isochrones, as stated.
struct IsochroneStudy {
    std::optional<Duration> step = {};          ///< between them
    std::optional<int> bands = {};              ///< or at most so many, the step then being a round one
    std::vector<std::string> catchments = {};   ///< points whose whole catchment has bands besides those of the last points
    bool smoothed = false;                      ///< borders with the corners of cells cut off

    [[nodiscard]] bool are_asked() const { return step || bands; }
};

/// Where the result goes and what is in it, as stated.
struct OutputStudy {
    std::string folder = "result";  ///< relative to the study's folder
    SubareasListed subareas = SubareasListed::least_slacks;
    bool cloud_optimized = false;  ///< rasters as Cloud-Optimized GeoTIFF
    IsochroneStudy isochrones = {};
    std::optional<bool> all_catchments = {};  ///< whole catchments of all points in study.gpkg, or of the last points; unstated: of all unless they are many
};

/// A value that a scenario has in place of the study's own.
struct StatedChange {
    std::string key;    ///< with its section: "surface.cover"
    StudyValue value;
};

/// A variant of a study on the same terrain and at the same points: see scenario.hpp.
struct ScenarioStudy {
    std::string name;
    std::vector<StatedChange> changes = {};  ///< in the order of the file
};

/// A whole study as stated.
struct Study {
    std::string file = {};  ///< the study file as named by the user; empty where the command line is the study
    std::string title = {};
    std::string date = {};  ///< that the study is of, "2026-05-01"; empty where it states none
    ReportUnits report_units = ReportUnits::us;
    TerrainStudy terrain = {};
    SurfaceStudy surface = {};
    PointStudy points = {};
    RainStudy rain = {};
    TimingStudy timing = {};
    PeakStudy peaks = {};
    MethodStudy methods = {};
    std::optional<UncertaintyStudy> uncertainty = {};  ///< absent: not asked for
    OutputStudy output = {};
    std::vector<ScenarioStudy> scenarios = {};  ///< in the order of the file
    std::string scenario = {};                  ///< the name of the scenario that this is; empty for a study itself
};

/// A name from the study as a path that can be opened: relative ones are taken from the study file's folder; absolute
/// ones and names of GDAL's virtual files ("/vsi…", "NETCDF:…", "https://…") stay as they are.
[[nodiscard]] std::string located(const Study& study, const std::string& name);

/// Throws an input error for what a study lacks (elevation, cover, book, rain) and for statements that exclude one
/// another.
void check_study(const Study& study);

/// What is true of the data and settles defaults.
struct DataFacts {
    Length cell_side = {};         ///< shorter side of a cell on the ground
    Length vertical_quantum = {};  ///< least difference of two elevations where they are whole numbers; else 0
};

/// The figures a run works with: those stated, else the defaults for these data.
struct ResolvedStudy {
    Length slope_window = {};      ///< default the larger of 20 m and 3 cells
    Length vertical_step = {};     ///< default the largest of 0.2 m, the quantum and a tenth of a cell
    Length pond_depth = {};        ///< default the larger of 0.3 m and the vertical step
    Length departure = {};         ///< default the larger of 20 m and 5 cells
    Length move_within = {};       ///< default the larger of 5 m and one cell
    Length shortest_segment = {};  ///< default the larger of 50 m and 5 cells (and then of a fiftieth of the path)
    double auto_area = 0.01;       ///< default 1 % of the data's area
    double channel_n = 0.0;
    std::optional<Length> hydraulic_radius = {};  ///< where stated; else the two below count
    PowerLaw channel_width = {};
    PowerLaw channel_depth = {};
};

/// Settles what the study leaves to the data.
[[nodiscard]] ResolvedStudy resolve(const Study& study, const DataFacts& facts);

/// Hydraulic radius of a channel that drains this area: the stated one, or W·D/(W + 2D) of the two power laws.
[[nodiscard]] Length channel_radius(const ResolvedStudy& resolved, Area contributing);

}  // namespace rillclock
