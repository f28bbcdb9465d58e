#include "rillclock/io/ground_of.hpp"

#include <geodesic.h>

#include <algorithm>
#include <cmath>
#include <numbers>
#include <utility>
#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Latitudes that make a row of cells, in degrees.
struct RowLatitudes {
    double centre = 0.0;
    double below = 0.0;  ///< centre of the next row
    double north = 0.0;  ///< edges
    double south = 0.0;
};

/// The rows of a grid whose sides are parallels and meridians.
class GeodesicRows {
public:
    /// `degrees_across`: longitudes from one side of a cell to the other.
    GeodesicRows(std::vector<RowLatitudes> rows, double degrees_across, const Ellipsoid& ellipsoid)
        : rows_(std::move(rows)), degrees_across_(degrees_across), ellipsoid_(ellipsoid) {
        geod_init(&geodesic_, ellipsoid.semi_major_m, ellipsoid.flattening);
    }

    [[nodiscard]] Ground ground() const {
        std::vector<GroundRow> table;
        table.reserve(rows_.size());
        for (std::size_t r = 0; r < rows_.size(); ++r) table.push_back(row(r));
        return Ground::by_row(std::move(table));
    }

private:
    [[nodiscard]] GroundRow row(std::size_t r) const {
        const bool is_last = r + 1 == rows_.size() && r > 0;
        const double here = rows_[r].centre;
        const double upper = is_last ? rows_[r - 1].centre : here;
        const double lower = is_last ? here : rows_[r].below;
        return {.east_west = to_fixed(distance(here, here, degrees_across_)),
                .south = to_fixed(distance(upper, lower, 0.0)),
                .diagonal = to_fixed(distance(upper, lower, degrees_across_)),
                .area = to_fixed_area(cell_area(rows_[r]))};
    }

    [[nodiscard]] double distance(double latitude_1, double latitude_2, double longitudes_apart) const {
        double metres = 0.0;
        geod_inverse(&geodesic_, latitude_1, 0.0, latitude_2, longitudes_apart, &metres, nullptr, nullptr);
        return metres;
    }

    /// Area between the equator and a parallel, for one radian of longitude: (b²/2)·(s/(1−e²s²) + atanh(e·s)/e), s =
    /// sin φ. J. P. Snyder, Map Projections: A Working Manual, 1987, eq. 3-12, times a²/2.
    [[nodiscard]] double area_to_parallel(double latitude_degrees) const {
        const double s = std::sin(latitude_degrees * std::numbers::pi / 180.0);
        const double f = ellipsoid_.flattening;
        const double e = std::sqrt(f * (2.0 - f));
        const double b = ellipsoid_.semi_major_m * (1.0 - f);
        const double second = e > 0.0 ? std::atanh(e * s) / e : s;
        return b * b / 2.0 * (s / (1.0 - e * e * s * s) + second);
    }

    [[nodiscard]] double cell_area(const RowLatitudes& row) const {
        const double per_radian = area_to_parallel(row.north) - area_to_parallel(row.south);
        return per_radian * degrees_across_ * std::numbers::pi / 180.0;
    }

    std::vector<RowLatitudes> rows_;
    double degrees_across_;
    Ellipsoid ellipsoid_;
    geod_geodesic geodesic_{};
};

void check_degrees(const Grid& grid, const ReferenceSystem& system) {
    if (system.degrees_per_unit() != 1.0)
        throw input_error(
            "The grid's reference system " + system.name() +
            " measures angles in another unit than degrees; reproject it with gdalwarp -t_srs to a projected "
            "system or to EPSG:4326.");
    const double bottom = grid.top - grid.cell_height * static_cast<double>(grid.rows);
    if (!(grid.top <= 90.0 + 1e-9 && bottom >= -90.0 - 1e-9))
        throw input_error(
            "The grid in " + system.name() +
            " reaches beyond a pole (latitude 90); cut it with gdalwarp -te, or reproject it with gdalwarp "
            "-t_srs to a polar system such as EPSG:3413 or EPSG:3031.");
    const double right = grid.left + grid.cell_width * static_cast<double>(grid.columns);
    if (!(grid.left >= -180.0 - grid.cell_width && right <= 180.0 + grid.cell_width))
        throw input_error("The grid in " + system.name() +
                          " crosses the 180th meridian; reproject it with gdalwarp -t_srs to the UTM zone it lies in.");
}

Ground geographic(const Grid& grid, const ReferenceSystem& system) {
    check_degrees(grid, system);
    std::vector<RowLatitudes> rows;
    for (std::int64_t r = 0; r < grid.rows; ++r) {
        const double centre = grid.centre(RowColumn{r, 0}).y;
        const double north = grid.top - static_cast<double>(r) * grid.cell_height;
        rows.push_back({.centre = centre, .below = centre - grid.cell_height, .north = north, .south = north - grid.cell_height});
    }
    return GeodesicRows(std::move(rows), grid.cell_width, system.ellipsoid()).ground();
}

/// Latitudes on WGS 84 of `count` places, one cell height apart from `first` down.
std::vector<double> latitudes_down(const Grid& grid, double first, std::int64_t count, Transformation& to_wgs84) {
    std::vector<double> x(static_cast<std::size_t>(count), grid.left);
    std::vector<double> y(x.size());
    for (std::size_t i = 0; i < y.size(); ++i) y[i] = first - static_cast<double>(i) * grid.cell_height;
    to_wgs84.transform(x, y);
    return y;
}

[[noreturn]] void refuse_mercator(const ReferenceSystem& system) {
    throw input_error("The grid in " + system.name() +
                      " reaches beyond the latitudes or over the 180th meridian of web maps; reproject it with "
                      "gdalwarp -t_srs to the UTM zone it lies in.");
}

/// Web Mercator draws WGS 84 latitudes as if they were on a sphere; sides of cells are parallels and meridians all the
/// same, so their lengths are those on the ellipsoid between those.
Ground web_mercator(const Grid& grid, const ReferenceSystem& system) {
    Transformation to_wgs84 = Transformation::to_wgs84(system);
    const double half = grid.cell_height / 2.0;
    const std::vector<double> edges = latitudes_down(grid, grid.top, grid.rows + 1, to_wgs84);
    const std::vector<double> centres = latitudes_down(grid, grid.top - half, grid.rows + 1, to_wgs84);
    const auto left = to_wgs84(Place{grid.left, grid.top});
    const auto right = to_wgs84(Place{grid.left + grid.cell_width * static_cast<double>(grid.columns), grid.top});
    std::vector<RowLatitudes> rows;
    for (std::size_t r = 0; r < static_cast<std::size_t>(grid.rows); ++r)
        rows.push_back({.centre = centres[r], .below = centres[r + 1], .north = edges[r], .south = edges[r + 1]});
    const bool falls = std::all_of(rows.begin(), rows.end(), [](const RowLatitudes& row) { return row.north > row.south; });
    if (!left || !right || !falls || !(right->x > left->x)) refuse_mercator(system);
    const double degrees_across = (right->x - left->x) / static_cast<double>(grid.columns);
    return GeodesicRows(std::move(rows), degrees_across, ReferenceSystem::wgs84().ellipsoid()).ground();
}

}  // namespace

Ground ground_of(const Grid& grid, const ReferenceSystem& system) {
    if (system.is_geographic()) return geographic(grid, system);
    if (system.is_web_mercator()) return web_mercator(grid, system);
    if (!system.is_projected())
        throw input_error(
            "The grid's reference system " + system.name() +
            " is neither projected nor geographic, so lengths on the ground are unknown; name the true one "
            "with gdal_edit.py -a_srs, or reproject with gdalwarp -t_srs.");
    const double metres_per_unit = system.linear_unit().metres_per_unit;
    return Ground::planar(metres(grid.cell_width * metres_per_unit), metres(grid.cell_height * metres_per_unit));
}

}  // namespace rillclock
