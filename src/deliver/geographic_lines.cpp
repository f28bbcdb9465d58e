#include "geographic_lines.hpp"

#include <algorithm>
#include <cmath>

#include "meridian_cut.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Json = nlohmann::ordered_json;

double seven_decimals(double degrees) { return std::round(degrees * 1e7) / 1e7; }

bool is_straight(const Place& a, const Place& b, const Place& c) {
    const double along_x = b.x - a.x;
    const double along_y = b.y - a.y;
    const double cross = along_x * (c.y - b.y) - along_y * (c.x - b.x);
    // Twice the area of the triangle, against what rounding of coordinates can make of a straight line.
    const double scale = std::abs(along_x * (c.y - b.y)) + std::abs(along_y * (c.x - b.x));
    return std::abs(cross) <= 1e-6 * scale;
}

/// Cuts a line at the 180th meridian, giving both sides their own end there.
std::vector<Line> line_cut_at_meridian(const Line& line) {
    std::vector<Line> parts{{line.front()}};
    for (std::size_t i = 1; i < line.size(); ++i) {
        const Place& from = line[i - 1];
        const Place& to = line[i];
        if (std::abs(to.x - from.x) > 180.0) {
            const double side = from.x > 0 ? 180.0 : -180.0;
            const double unwrapped = to.x + 2.0 * side;
            const double share = (side - from.x) / (unwrapped - from.x);
            const double latitude = seven_decimals(from.y + share * (to.y - from.y));
            parts.back().push_back({side, latitude});
            parts.push_back({{-side, latitude}});
        }
        parts.back().push_back(to);
    }
    return parts;
}

Json coordinates(const Line& line) {
    Json array = Json::array();
    for (const Place& place : line) array.push_back({place.x, place.y});
    return array;
}

Json coordinates(const std::vector<Polygon>& polygons) {
    Json all = Json::array();
    for (const Polygon& polygon : polygons) {
        Json rings = Json::array();
        for (const Line& ring : polygon.rings) rings.push_back(coordinates(ring));
        all.push_back(std::move(rings));
    }
    return all;
}

}  // namespace

std::vector<Place> without_collinear(const std::vector<Place>& line) {
    std::vector<Place> kept;
    for (std::size_t i = 0; i < line.size(); ++i) {
        const bool inner = i > 0 && i + 1 < line.size();
        if (!inner || !is_straight(line[i - 1], line[i], line[i + 1])) kept.push_back(line[i]);
    }
    return kept;
}

std::vector<Place> GeographicLines::geographic(const std::vector<Place>& line) { return in_degrees(without_collinear(line)); }

std::vector<Place> GeographicLines::in_degrees(const std::vector<Place>& line) {
    std::vector<Place> places;
    for (const Place& place : line) {
        const auto degrees = to_wgs84_(place);
        if (!degrees) throw input_error("a flow path has no longitude and latitude; check the reference system of the elevations");
        places.push_back({seven_decimals(degrees->x), seven_decimals(degrees->y)});
        low_ = {std::min(low_.x, places.back().x), std::min(low_.y, places.back().y)};
        high_ = {std::max(high_.x, places.back().x), std::max(high_.y, places.back().y)};
        double& nearest = places.back().x < 0 ? greatest_western_ : least_eastern_;
        nearest = places.back().x < 0 ? std::max(nearest, places.back().x) : std::min(nearest, places.back().x);
    }
    return places;
}

Json GeographicLines::geometry(const std::vector<Place>& line) {
    const std::vector<Line> parts = line_cut_at_meridian(geographic(line));
    crosses_ = crosses_ || parts.size() > 1;
    if (parts.size() == 1) return {{"type", "LineString"}, {"coordinates", coordinates(parts.front())}};
    Json all = Json::array();
    for (const Line& part : parts) all.push_back(coordinates(part));
    return {{"type", "MultiLineString"}, {"coordinates", all}};
}

std::vector<Polygon> GeographicLines::cut(std::vector<Polygon> in_degrees) {
    std::vector<Polygon> parts = cut_at_meridian(in_degrees);
    for (Polygon& part : parts) {
        for (Line& ring : part.rings) {
            for (Place& at : ring) at.y = seven_decimals(at.y);
        }
    }
    crosses_ = crosses_ || parts.size() > in_degrees.size();
    return parts;
}

Json GeographicLines::area(const std::vector<Polygon>& polygons) {
    std::vector<Polygon> in_degrees;
    for (const Polygon& polygon : polygons) {
        in_degrees.emplace_back();
        for (const Line& ring : polygon.rings) in_degrees.back().rings.push_back(geographic(ring));
    }
    Json all = coordinates(cut(std::move(in_degrees)));
    if (all.size() == 1) return {{"type", "Polygon"}, {"coordinates", all.front()}};
    return {{"type", "MultiPolygon"}, {"coordinates", std::move(all)}};
}

Json GeographicLines::geometry(const std::vector<Polygon>& polygons) {
    std::vector<Polygon> parts;
    for (const Polygon& polygon : polygons) {
        parts.emplace_back();
        for (const Line& ring : polygon.rings) parts.back().rings.push_back(in_degrees(ring));
    }
    return {{"type", "MultiPolygon"}, {"coordinates", coordinates(cut(std::move(parts)))}};
}

Json GeographicLines::bbox() const {
    // A box around the 180th meridian has its western side east of it (RFC 7946, section 5.2).
    if (crosses_) return Json::array({least_eastern_, low_.y, greatest_western_, high_.y});
    return Json::array({low_.x, low_.y, high_.x, high_.y});
}

}  // namespace rillclock
