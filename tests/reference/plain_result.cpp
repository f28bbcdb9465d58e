#include "reference/plain_result.hpp"

#include <gdal.h>

#include <cmath>
#include <fstream>
#include <nlohmann/json.hpp>
#include <optional>
#include <stdexcept>
#include <utility>
#include <vector>

#include "mapped_flow.hpp"
#include "reference/plain_catchment.hpp"
#include "reference/worked_terrain.hpp"
#include "rillclock/deliver/raster_strips.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/io/gdal_session.hpp"

namespace rillclock::reference {
namespace {

/// What stands in a raster for a void, whatever the elevations have for it.
constexpr double is_void = -9999.0;

using Values = Raster<double>;

Elevations elevations_in(const ElevationStore& store) {
    Elevations z(store.rows(), store.columns());
    store.read({.rows = z.rows(), .columns = z.columns()}, z.values());
    return z;
}

/// The band of a raster of the result; voids are `is_void`.
Values raster_of(const std::filesystem::path& result, const std::string& name) {
    const std::string path = (result / "rasters" / (name + ".tif")).string();
    const GDALDatasetH file = GDALOpen(path.c_str(), GA_ReadOnly);
    if (file == nullptr) throw std::runtime_error("cannot open " + path);
    const GDALRasterBandH band = GDALGetRasterBand(file, 1);
    Values values(GDALGetRasterYSize(file), GDALGetRasterXSize(file));
    const auto columns = static_cast<int>(values.columns());
    const auto rows = static_cast<int>(values.rows());
    int has_nodata = 0;
    const double nodata = GDALGetRasterNoDataValue(band, &has_nodata);
    const CPLErr done = GDALRasterIO(band, GF_Read, 0, 0, columns, rows, values.values().data(), columns, rows, GDT_Float64, 0, 0);
    GDALClose(file);
    if (done != CE_None) throw std::runtime_error("cannot read " + path);
    for (double& value : values.values()) {
        if (std::isnan(value) || (has_nodata != 0 && value == nodata)) value = is_void;
    }
    return values;
}

/// The points of a result, and the storm factor of each where they have storms of their own.
struct ResultPoints {
    std::vector<DesignPoint> points;
    std::vector<double> factors;
};

ResultPoints points_of(const Study& study, const std::filesystem::path& result, const Grid& grid) {
    nlohmann::json json;
    std::ifstream(result / "result.json") >> json;
    ResultPoints found;
    for (const auto& outlet : json.at("outlets")) {
        DesignPoint point;
        point.name = outlet.at("name");
        point.cell = grid.cell(grid.at(Place{outlet.at("place").at(0), outlet.at("place").at(1)}).value());
        found.points.push_back(point);
        if (!study.timing.is_kinematic()) continue;
        for (const auto& storm : outlet.at("storms")) {
            if (storm.at("return_period") != json.at("parameters").at("rain").at("raster_return_period")) continue;
            found.factors.push_back(kinematic_storm_factor(millimetres_per_hour(storm.at("intensity_mm_per_h"))));
        }
    }
    return found;
}

/// Compares rasters with the plain fields; the first that differs is kept.
class Comparison {
public:
    Comparison(const worked::Land& land, const std::filesystem::path& result) : land_(land), result_(result) {}

    /// `expected(cell)` is what the raster holds at a cell with data; `share` of it may be missed.
    template <class Expected>
    void look(const std::string& name, Expected expected, double share = 0.0) {
        if (!difference_.empty()) return;
        const Values found = raster_of(result_, name);
        if (found.size() != land_.forest.codes().size()) {
            difference_ = name + " has another size";
            return;
        }
        for (Cell cell = 0; cell < static_cast<Cell>(found.size()) && difference_.empty(); ++cell) {
            const double wanted = land_.forest.is_void(cell) ? is_void : static_cast<double>(expected(cell));
            if (std::abs(found[cell] - wanted) <= share * std::abs(wanted)) continue;
            difference_ = name + " at row " + std::to_string(cell / found.columns()) + ", column " + std::to_string(cell % found.columns()) +
                          ": result " + std::to_string(found[cell]) + ", plain way " + std::to_string(wanted);
        }
    }

    [[nodiscard]] const std::string& difference() const { return difference_; }

private:
    const worked::Land& land_;
    const std::filesystem::path& result_;
    std::string difference_;
};

worked::Given given_of(const Study& study) {
    const Executor executor(1);
    TerrainData terrain = read_terrain(study, executor, {});
    const ResolvedStudy resolved = resolve(study, facts_of(terrain.format, terrain.ground));
    SurfaceData surface = read_surface(study, terrain, {});
    MappedFlow flow = mapped_flow(study, resolved, terrain, [&](const ElevationStore& z) {
        return flow_forest_of(elevations_in(z), terrain.ground).codes();
    });
    return {.elevations = elevations_in(terrain.elevations),   // with the beds of lines
            .ground = terrain.ground,
            .codes = std::move(flow.codes),
            .surface = std::move(surface.table),
            .rules = rules_of(study, resolved, read_rain(study, {})),
            .metres_per_elevation_unit = terrain.format.metres_per_stored_unit(),
            .mapped_channels = std::move(flow.line_cells)};
}

}  // namespace

std::string difference_from_plain(const Study& study, const std::filesystem::path& result) {
    const GdalSession session;
    const worked::Land land(given_of(study));
    const ResultPoints stated = points_of(study, result, open_elevation_of(study).grid());
    const OwnedTree tree = owned_tree(land.forest, stated.points);
    const std::vector<PointNumber> last = tree.last_points();
    const auto minutes = [&](Cell cell) {
        const PointNumber point = last[tree.owner[cell]];
        const StepTime below = point == 0 ? StepTime{} : land.field.time_to_root(stated.points[point - 1].cell);
        const bool own = point != 0 && !stated.factors.empty();
        const double factor = own ? stated.factors[point - 1] : land.given.rules.sheet.storm_factor;
        return static_cast<float>(in_minutes((land.field.time_to_root(cell) - below).under(factor)));
    };
    Comparison comparison(land, result);
    comparison.look("flow_azimuth", [&](Cell cell) {
        return land.forest.is_root(cell) ? azimuth_leaves : azimuth_degrees(land.forest.direction(cell));
    });
    comparison.look("spill_elevation", [&](Cell cell) { return land.field.spill[cell]; });
    comparison.look("contributing_area", [&](Cell cell) { return from_fixed_area(land.field.contributing_area[cell]); });
    comparison.look("catchment", [&](Cell cell) { return tree.owner[cell]; });
    comparison.look("regime", [&](Cell cell) { return static_cast<int>(land.field.regime[cell]); });
    comparison.look("travel_time", minutes, stated.factors.empty() ? 0.0 : 1e-6);
    return comparison.difference();
}

}  // namespace rillclock::reference
