#pragma once

#include <nlohmann/json.hpp>
#include <vector>

#include "rillclock/core/notice.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/raster/grid_shapes.hpp"

namespace rillclock {

/// The places at which a line turns, its ends included: those on a straight line between their neighbours are left out. Exact for
/// lines that step from cell centre to cell centre.
[[nodiscard]] std::vector<Place> without_collinear(const std::vector<Place>& line);

/// Makes GeoJSON geometries of lines and polygons in one reference system, and keeps the box around all of them.
class GeographicLines {
public:
    explicit GeographicLines(const ReferenceSystem& system) : to_wgs84_(Transformation::to_wgs84(system)) {}

    /// A LineString, or a MultiLineString where the line crosses the 180th meridian.
    [[nodiscard]] nlohmann::ordered_json geometry(const std::vector<Place>& line);
    /// A Polygon, or a MultiPolygon of several, or of the parts of one that crosses the 180th meridian. Rings must be closed.
    [[nodiscard]] nlohmann::ordered_json area(const std::vector<Polygon>& polygons);
    /// A MultiPolygon, cut at the 180th meridian; rings keep all their corners.
    [[nodiscard]] nlohmann::ordered_json geometry(const std::vector<Polygon>& polygons);
    /// [west, south, east, north] of all so far; the west is greater than the east where any of them crosses the 180th meridian.
    [[nodiscard]] nlohmann::ordered_json bbox() const;

private:
    [[nodiscard]] std::vector<Polygon> cut(std::vector<Polygon> in_degrees);
    [[nodiscard]] std::vector<Place> geographic(const std::vector<Place>& line);
    [[nodiscard]] std::vector<Place> in_degrees(const std::vector<Place>& places);

    Transformation to_wgs84_;
    Place low_{180.0, 90.0};
    Place high_{-180.0, -90.0};
    double least_eastern_ = 180.0;       ///< longitude of those that are not negative
    double greatest_western_ = -180.0;   ///< of the negative ones
    bool crosses_ = false;               ///< whether any has been cut
};

}  // namespace rillclock
