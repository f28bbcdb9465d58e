#include "geographic_lines.hpp"

#include <algorithm>
#include <cmath>

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
std::vector<Line> cut_at_meridian(const Line& line) {
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
    }
    return places;
}

Json GeographicLines::geometry(const std::vector<Place>& line) {
    const std::vector<Line> parts = cut_at_meridian(geographic(line));
    if (parts.size() == 1) return {{"type", "LineString"}, {"coordinates", coordinates(parts.front())}};
    Json all = Json::array();
    for (const Line& part : parts) all.push_back(coordinates(part));
    return {{"type", "MultiLineString"}, {"coordinates", all}};
}

Json GeographicLines::area(const std::vector<Polygon>& polygons) {
    Json all = Json::array();
    for (const Polygon& polygon : polygons) {
        Json rings = Json::array();
        for (const std::vector<Place>& ring : polygon.rings) {
            const Line places = geographic(ring);
            if (cut_at_meridian(places).size() > 1) return nullptr;
            rings.push_back(coordinates(places));
        }
        all.push_back(std::move(rings));
    }
    if (all.size() == 1) return {{"type", "Polygon"}, {"coordinates", all.front()}};
    return {{"type", "MultiPolygon"}, {"coordinates", std::move(all)}};
}

Json GeographicLines::point(const Place& place) {
    const Place degrees = geographic({place}).front();
    return {{"type", "Point"}, {"coordinates", {degrees.x, degrees.y}}};
}

Json GeographicLines::geometry(const std::vector<Polygon>& polygons) {
    Json all = Json::array();
    for (const Polygon& polygon : polygons) {
        Json rings = Json::array();
        for (const Line& ring : polygon.rings) {
            Line closed = in_degrees(ring);
            for (Place& place : closed) {
                if (place.x - closed.front().x > 180.0) place.x -= 360.0;
                if (place.x - closed.front().x < -180.0) place.x += 360.0;
            }
            closed.push_back(closed.front());
            rings.push_back(coordinates(closed));
        }
        all.push_back(rings);
    }
    return {{"type", "MultiPolygon"}, {"coordinates", all}};
}

Json GeographicLines::bbox() const { return Json::array({low_.x, low_.y, high_.x, high_.y}); }

}  // namespace rillclock
