#include "rillclock/deliver/rasters.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

#include "rillclock/core/number_text.hpp"
#include "rillclock/io/raster_output.hpp"

namespace rillclock {
namespace {

constexpr std::int64_t strip_rows = 512;
constexpr double no_time = -9999.0;
constexpr double no_number = 4294967295.0;

class Writing {
public:
    Writing(const StudyResult& result, ResultFolder& folder, const Progress& progress)
        : result_(result), folder_(folder), progress_(progress) {}

    /// Writes one raster strip by strip; `value(cell)` gives what each cell holds.
    template <class T, class Value>
    void write(const char* name, const RasterDescription& description, Value value) {
        const Grid& grid = result_.grid;
        auto sink = create_raster<T>(folder_.path(std::string("rasters/") + name), grid, result_.system, description);
        std::vector<T> strip;
        for (std::int64_t row = 0; row < grid.rows; row += strip_rows) {
            const Window window{.row = row, .rows = std::min(strip_rows, grid.rows - row), .columns = grid.columns};
            strip.resize(static_cast<std::size_t>(window.size()));
            const auto first = static_cast<Cell>(row * grid.columns);
            for (std::size_t i = 0; i < strip.size(); ++i) strip[i] = value(first + static_cast<Cell>(i));
            sink->write(window, strip);
            progress_.tell({.stage = "writing rasters", .done = done_ * grid.size() + row * grid.columns, .total = 6 * grid.size()});
        }
        sink->close();
        ++done_;
    }

private:
    const StudyResult& result_;
    ResultFolder& folder_;
    const Progress& progress_;
    std::int64_t done_ = 0;
};

/// Time from a cell to the last point on its way down, or to its root where there is none.
class TimeToLastPoint {
public:
    explicit TimeToLastPoint(const StudyResult& result) : result_(result), last_(result.tree.last_points()) {}

    float operator()(Cell cell) const {
        if (result_.terrain.forest.is_void(cell)) return static_cast<float>(no_time);
        StepTime time = result_.field.time_to_root(cell);
        const PointNumber last = last_[result_.tree.owner[cell]];
        if (last != 0) time = time - result_.field.time_to_root(result_.outlets[last - 1].point.cell);
        return static_cast<float>(in_minutes(time.under(result_.rules.sheet.storm_factor)));
    }

private:
    const StudyResult& result_;
    std::vector<PointNumber> last_;
};

RasterDescription travel_time_description(const StudyResult& result) {
    return {.stored = StoredType::float32,
            .description = "travel time to the last design point on the way down, or to where water leaves the data",
            .unit = "min",
            .nodata = no_time,
            .metadata = {{"STORM", "2-year 24-hour depth " + significant(in_millimetres(*result.study.rain.two_year_24_hour)) + " mm"},
                         {"SHEET_FLOW", "NRCS"}}};
}

void write_travel_time(const StudyResult& result, Writing& writing) {
    writing.write<float>("travel_time.tif", travel_time_description(result), TimeToLastPoint(result));
}

void write_flow_azimuth(const StudyResult& result, Writing& writing) {
    const RasterDescription description{.stored = StoredType::uint16,
                                        .description = "azimuth of flow, clockwise from grid north; 65534 water leaves the data here",
                                        .unit = "degree",
                                        .nodata = azimuth_void,
                                        .overviews = OverviewKind::nearest};
    writing.write<std::uint16_t>("flow_azimuth.tif", description, [&](Cell cell) {
        const FlowForest& forest = result.terrain.forest;
        if (forest.is_void(cell)) return static_cast<std::uint16_t>(azimuth_void);
        if (forest.is_root(cell)) return static_cast<std::uint16_t>(azimuth_leaves);
        return static_cast<std::uint16_t>(azimuth_degrees(forest.direction(cell)));
    });
}

void write_contributing_area(const StudyResult& result, Writing& writing) {
    const RasterDescription description{.stored = StoredType::float64, .description = "contributing area, own cell included",
                                        .unit = "m2", .nodata = no_time};
    writing.write<double>("contributing_area.tif", description, [&](Cell cell) {
        return result.terrain.forest.is_void(cell) ? no_time : from_fixed_area(result.field.contributing_area[cell]);
    });
}

void write_catchment(const StudyResult& result, Writing& writing) {
    RasterDescription description{.stored = StoredType::uint32,
                                  .description = "number of the nearest design point on the way down; 0 none",
                                  .nodata = no_number,
                                  .overviews = OverviewKind::nearest};
    description.categories.emplace_back(0, "none");
    if (result.outlets.size() <= 65535) {
        for (const Outlet& outlet : result.outlets) {
            description.categories.emplace_back(static_cast<int>(outlet.number), outlet.point.name);
        }
    }
    writing.write<std::uint32_t>("catchment.tif", description, [&](Cell cell) {
        return result.terrain.forest.is_void(cell) ? static_cast<std::uint32_t>(no_number) : result.tree.owner[cell];
    });
}

void write_regime(const StudyResult& result, Writing& writing) {
    RasterDescription description{.stored = StoredType::uint8,
                                  .description = "how water moves through the cell",
                                  .nodata = 0.0,
                                  .overviews = OverviewKind::nearest};
    for (const Regime regime : {Regime::none, Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        description.categories.emplace_back(static_cast<int>(regime), name_of(regime));
    }
    writing.write<std::uint8_t>("regime.tif", description, [&](Cell cell) {
        return static_cast<std::uint8_t>(result.field.regime[cell]);
    });
}

/// What stands for a void in spill_elevation.tif: the DEM's own nodata; else NaN, or a whole number no elevation has.
double spill_nodata(const StudyResult& result) {
    if (result.format.nodata) return *result.format.nodata;
    if (!is_integer(result.format.stored)) return std::numeric_limits<double>::quiet_NaN();
    const auto occurs = [&](double value) {
        const auto values = result.terrain.elevations.values();
        return std::find(values.begin(), values.end(), value) != values.end();
    };
    double candidate = 0.0;
    while (occurs(candidate)) ++candidate;
    return candidate;
}

void write_spill_elevation(const StudyResult& result, Writing& writing) {
    RasterDescription description{.stored = result.format.stored,
                                  .description = "lowest level at which the cell's water gets out",
                                  .unit = result.format.unit.name,
                                  .scale = result.format.scale,
                                  .offset = result.format.offset};
    if (result.format.nodata || result.data.void_cells > 0) description.nodata = spill_nodata(result);
    writing.write<double>("spill_elevation.tif", description, [&](Cell cell) { return result.field.spill[cell]; });
}

}  // namespace

void write_rasters(const StudyResult& result, ResultFolder& folder, const Progress& progress) {
    Writing writing(result, folder, progress);
    write_travel_time(result, writing);
    write_flow_azimuth(result, writing);
    write_contributing_area(result, writing);
    write_catchment(result, writing);
    write_regime(result, writing);
    write_spill_elevation(result, writing);
    progress.tell({.stage = "writing rasters", .done = 6 * result.grid.size(), .total = 6 * result.grid.size(), .finished = true});
}

}  // namespace rillclock
