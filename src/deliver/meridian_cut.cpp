#include "meridian_cut.hpp"

#include <algorithm>
#include <cmath>
#include <cstddef>
#include <utility>

namespace rillclock {
namespace {

bool is_same(const Place& a, const Place& b) { return a.x == b.x && a.y == b.y; }

/// Without the repeated first corner, longitudes going on from those of `first` without jumps.
Line unwrapped(Line ring, const Place& first) {
    if (ring.size() > 1 && is_same(ring.front(), ring.back())) ring.pop_back();
    double before = first.x;
    for (Place& at : ring) {
        while (at.x - before > 180.0) at.x -= 360.0;
        while (at.x - before < -180.0) at.x += 360.0;
        before = at.x;
    }
    return ring;
}

double twice_area(const Line& ring) {
    double sum = 0.0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Place& a = ring[i];
        const Place& b = ring[(i + 1) % ring.size()];
        sum += (a.x - ring[0].x) * (b.y - ring[0].y) - (b.x - ring[0].x) * (a.y - ring[0].y);
    }
    return sum;
}

/// Even–odd rule.
bool holds(const Line& ring, const Place& place) {
    bool inside = false;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Place& a = ring[i];
        const Place& b = ring[(i + 1) % ring.size()];
        if ((a.y > place.y) != (b.y > place.y) && place.x < a.x + (place.y - a.y) / (b.y - a.y) * (b.x - a.x)) inside = !inside;
    }
    return inside;
}

/// What of a polygon lies on one side of a line of constant longitude.
///
/// Where rings cross the line, they come out of the side and go back into it; between the first crossing from the south and the second, the third and the
/// fourth, and so on, the line itself lies within the polygon. So each piece of a ring on this side is followed to its end, and goes on along
/// the line to the crossing that makes a pair with it, where another piece begins.
class HalfPlane {
public:
    HalfPlane(double longitude, bool east) : longitude_(longitude), east_(east) {}

    void add(const Line& ring) {
        const std::size_t count = ring.size();
        std::size_t start = 0;
        while (start < count && !(is_on_side(ring[(start + count - 1) % count]) != is_on_side(ring[start]) && is_on_side(ring[start]))) ++start;
        if (start == count) {
            if (count > 0 && is_on_side(ring[0])) whole_.push_back(ring);
            return;
        }
        for (std::size_t i = 0; i < count; ++i) {
            const Place& from = ring[(start + i + count - 1) % count];
            const Place& to = ring[(start + i) % count];
            if (is_on_side(from) != is_on_side(to)) {
                const double share = (longitude_ - from.x) / (to.x - from.x);
                const Place crossing{longitude_, from.y + share * (to.y - from.y)};
                if (is_on_side(to)) pieces_.push_back({crossing});
                else pieces_.back().push_back(crossing);
            }
            if (is_on_side(to)) pieces_.back().push_back(to);
        }
    }

    [[nodiscard]] std::vector<Polygon> polygons() {
        std::vector<Line> rings = joined();
        rings.insert(rings.end(), whole_.begin(), whole_.end());
        std::vector<Polygon> made;
        for (const Line& ring : rings) {
            if (twice_area(ring) > 0) made.push_back({.rings = {ring}});
        }
        for (const Line& ring : rings) {
            if (!(twice_area(ring) < 0)) continue;
            const auto around = std::find_if(made.begin(), made.end(), [&](const Polygon& polygon) { return holds(polygon.rings[0], inner_place(ring)); });
            if (around != made.end()) around->rings.push_back(ring);
        }
        return made;
    }

private:
    struct End {
        double y = 0.0;
        std::size_t piece = 0;
        bool begins = false;
    };

    [[nodiscard]] bool is_on_side(const Place& place) const { return (place.x >= longitude_) == east_; }

    /// A place just within a hole, beside the middle of its first side.
    [[nodiscard]] static Place inner_place(const Line& hole) {
        const Place& a = hole[0];
        const Place& b = hole[1];
        return {(a.x + b.x) / 2 + 1e-6 * (b.y - a.y), (a.y + b.y) / 2 - 1e-6 * (b.x - a.x)};
    }

    [[nodiscard]] std::vector<Line> joined() const {
        std::vector<End> ends;
        for (std::size_t i = 0; i < pieces_.size(); ++i) {
            ends.push_back({pieces_[i].front().y, i, true});
            ends.push_back({pieces_[i].back().y, i, false});
        }
        std::stable_sort(ends.begin(), ends.end(), [](const End& a, const End& b) { return a.y < b.y; });
        std::vector<std::size_t> next(pieces_.size(), 0);   // the piece that begins where one ends
        for (std::size_t i = 0; i + 1 < ends.size(); i += 2) {
            const bool first_begins = ends[i].begins;
            next[first_begins ? ends[i + 1].piece : ends[i].piece] = first_begins ? ends[i].piece : ends[i + 1].piece;
        }
        std::vector<Line> rings;
        std::vector<bool> used(pieces_.size(), false);
        for (std::size_t i = 0; i < pieces_.size(); ++i) {
            Line ring;
            for (std::size_t piece = i; !used[piece]; piece = next[piece]) {
                used[piece] = true;
                for (const Place& at : pieces_[piece]) {
                    if (ring.empty() || !is_same(ring.back(), at)) ring.push_back(at);
                }
            }
            if (ring.size() > 1 && is_same(ring.front(), ring.back())) ring.pop_back();
            if (ring.size() > 2) rings.push_back(std::move(ring));
        }
        return rings;
    }

    double longitude_;
    bool east_;
    std::vector<Line> whole_;
    std::vector<Line> pieces_;
};

void append_moved(std::vector<Polygon> polygons, double by, std::vector<Polygon>& to) {
    for (Polygon& polygon : polygons) {
        for (Line& ring : polygon.rings) {
            for (Place& at : ring) at.x += by;
            ring.push_back(ring.front());
        }
        to.push_back(std::move(polygon));
    }
}

void cut(const Polygon& polygon, std::vector<Polygon>& into) {
    Polygon whole;
    double west = 180.0;
    double east = -180.0;
    bool holds_pole = false;
    for (const Line& ring : polygon.rings) {
        whole.rings.push_back(unwrapped(ring, whole.rings.empty() ? ring.front() : whole.rings[0].front()));
        const Line& line = whole.rings.back();
        holds_pole = holds_pole || std::abs(line.back().x - line.front().x) > 180.0;
        for (const Place& at : line) {
            west = std::min(west, at.x);
            east = std::max(east, at.x);
        }
    }
    if (holds_pole) return into.push_back(polygon);
    if (west >= -180.0 && east <= 180.0) return append_moved({whole}, 0.0, into);
    const double meridian = east > 180.0 ? 180.0 : -180.0;
    for (const bool is_east : {false, true}) {
        HalfPlane side(meridian, is_east);
        for (const Line& ring : whole.rings) side.add(ring);
        const double by = is_east ? -180.0 - meridian : 180.0 - meridian;
        append_moved(side.polygons(), by, into);
    }
}

}  // namespace

std::vector<Polygon> cut_at_meridian(const std::vector<Polygon>& polygons) {
    std::vector<Polygon> made;
    for (const Polygon& polygon : polygons) cut(polygon, made);
    return made;
}

}  // namespace rillclock
