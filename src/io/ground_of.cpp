#include "rillclock/io/ground_of.hpp"

#include <geodesic.h>

#include <cmath>
#include <numbers>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

class GeodesicRows {
public:
    GeodesicRows(const Grid& grid, const Ellipsoid& ellipsoid) : grid_(grid), ellipsoid_(ellipsoid) {
        geod_init(&geodesic_, ellipsoid.semi_major_m, ellipsoid.flattening);
    }

    [[nodiscard]] GroundRow row(std::int64_t r) const {
        const double here = latitude(r);
        const bool is_last = r + 1 == grid_.rows;
        const double upper = is_last && r > 0 ? latitude(r - 1) : here;
        const double lower = is_last && r > 0 ? here : here - grid_.cell_height;
        return {.east_west = to_fixed(distance(here, here, grid_.cell_width)),
                .south = to_fixed(distance(upper, lower, 0.0)),
                .diagonal = to_fixed(distance(upper, lower, grid_.cell_width)),
                .area = to_fixed_area(cell_area(r))};
    }

private:
    [[nodiscard]] double latitude(std::int64_t r) const { return grid_.centre(RowColumn{r, 0}).y; }

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

    [[nodiscard]] double cell_area(std::int64_t r) const {
        const double north = grid_.top - static_cast<double>(r) * grid_.cell_height;
        const double per_radian = area_to_parallel(north) - area_to_parallel(north - grid_.cell_height);
        return per_radian * grid_.cell_width * std::numbers::pi / 180.0;
    }

    Grid grid_;
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
    const GeodesicRows geodesics(grid, system.ellipsoid());
    std::vector<GroundRow> rows;
    rows.reserve(static_cast<std::size_t>(grid.rows));
    for (std::int64_t r = 0; r < grid.rows; ++r) rows.push_back(geodesics.row(r));
    return Ground::by_row(std::move(rows));
}

}  // namespace

Ground ground_of(const Grid& grid, const ReferenceSystem& system) {
    if (system.is_geographic()) return geographic(grid, system);
    if (!system.is_projected())
        throw input_error(
            "The grid's reference system " + system.name() +
            " is neither projected nor geographic, so lengths on the ground are unknown; name the true one "
            "with gdal_edit.py -a_srs, or reproject with gdalwarp -t_srs.");
    const double metres_per_unit = system.linear_unit().metres_per_unit;
    return Ground::planar(metres(grid.cell_width * metres_per_unit), metres(grid.cell_height * metres_per_unit));
}

}  // namespace rillclock
