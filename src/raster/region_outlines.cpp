#include "rillclock/raster/region_outlines.hpp"

#include <algorithm>
#include <array>
#include <map>
#include <numeric>
#include <tuple>
#include <unordered_map>

namespace rillclock {
namespace {

std::uint64_t key_of(Corner corner) { return (static_cast<std::uint64_t>(corner.row) << 32U) | corner.column; }

/// East, north, west, south: each the left turn of the one before.
unsigned heading(Corner from, Corner to) {
    if (from.row == to.row) return to.column > from.column ? 0U : 2U;
    return to.row < from.row ? 1U : 3U;
}

/// Twice the area, positive where the ring is an outer one.
std::int64_t twice_area(const CornerRing& ring) {
    std::int64_t sum = 0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Corner& a = ring[i];
        const Corner& b = ring[(i + 1) % ring.size()];
        sum += static_cast<std::int64_t>(b.column) * a.row - static_cast<std::int64_t>(a.column) * b.row;
    }
    return sum;
}

/// The northernmost of a ring's corners, and of those the westernmost.
Corner first_corner(const CornerRing& ring) {
    return *std::min_element(ring.begin(), ring.end(), [](Corner a, Corner b) { return std::tie(a.row, a.column) < std::tie(b.row, b.column); });
}

void drop_straight_corners(CornerRing& ring) {
    CornerRing kept;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Corner& before = ring[(i + ring.size() - 1) % ring.size()];
        if (heading(before, ring[i]) != heading(ring[i], ring[(i + 1) % ring.size()])) kept.push_back(ring[i]);
    }
    ring = std::move(kept);
}

/// Puts holes into the outer rings they lie in. Going west from the cell above a hole, the first border of the region is that of its
/// outer ring, or of a hole in the same one that lies further north or west.
class HoleKeeper {
public:
    explicit HoleKeeper(std::vector<CornerRing> rings) : rings_(std::move(rings)) {
        std::sort(rings_.begin(), rings_.end(), [](const CornerRing& a, const CornerRing& b) {
            const Corner first = first_corner(a);
            const Corner second = first_corner(b);
            // Of two rings from one corner the outer one comes first: what touches it there is its hole.
            return std::tuple(first.row, first.column, twice_area(a) < 0) < std::tuple(second.row, second.column, twice_area(b) < 0);
        });
        for (std::uint32_t ring = 0; ring < rings_.size(); ++ring) add_sides(ring);
        std::sort(sides_.begin(), sides_.end(), [](const Side& a, const Side& b) { return a.top < b.top; });
    }

    std::vector<CornerPolygon> polygons() {
        std::vector<CornerPolygon> polygons;
        std::vector<std::size_t> polygon_of(rings_.size(), 0);
        for (std::uint32_t ring = 0; ring < rings_.size(); ++ring) {
            if (twice_area(rings_[ring]) > 0) {
                polygon_of[ring] = polygons.size();
                polygons.push_back({.rings = {rings_[ring]}});
            } else {
                polygon_of[ring] = polygon_of[ring_west_of(first_corner(rings_[ring]))];
                polygons[polygon_of[ring]].rings.push_back(rings_[ring]);
            }
        }
        return polygons;
    }

private:
    /// A side of a ring that runs north or south.
    struct Side {
        std::uint32_t column = 0;
        std::uint32_t top = 0;
        std::uint32_t bottom = 0;
        std::uint32_t ring = 0;
    };

    void add_sides(std::uint32_t number) {
        const CornerRing& ring = rings_[number];
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Corner& a = ring[i];
            const Corner& b = ring[(i + 1) % ring.size()];
            if (a.column == b.column) sides_.push_back({a.column, std::min(a.row, b.row), std::max(a.row, b.row), number});
        }
    }

    /// Which ring bounds, to the west, the cell north-east of a corner. Asked from the north down.
    std::uint32_t ring_west_of(Corner corner) {
        const std::uint32_t row = corner.row - 1;
        for (; next_ < sides_.size() && sides_[next_].top <= row; ++next_) active_.insert_or_assign(sides_[next_].column, sides_[next_]);
        auto found = active_.upper_bound(corner.column);
        while (true) {
            --found;
            if (found->second.bottom > row) return found->second.ring;
            found = active_.erase(found);
        }
    }

    std::vector<CornerRing> rings_;
    std::vector<Side> sides_;
    std::size_t next_ = 0;
    std::map<std::uint32_t, Side> active_;   ///< the last one begun in each column; those that have ended are dropped when met
};

}  // namespace

std::vector<Polygon> in_cells(const std::vector<CornerPolygon>& polygons) {
    std::vector<Polygon> shapes;
    for (const CornerPolygon& polygon : polygons) {
        shapes.emplace_back();
        for (const CornerRing& ring : polygon.rings) {
            shapes.back().rings.emplace_back();
            for (const Corner& corner : ring) shapes.back().rings.back().push_back({static_cast<double>(corner.column), static_cast<double>(corner.row)});
        }
    }
    return shapes;
}

/// Links edges to rings.
class RegionBorders::Tracer {
public:
    explicit Tracer(std::vector<Edge> edges) : edges_(std::move(edges)), used_(edges_.size(), false) {
        std::sort(edges_.begin(), edges_.end(), [](const Edge& a, const Edge& b) {
            return std::pair(key_of(a.from), heading(a.from, a.to)) < std::pair(key_of(b.from), heading(b.from, b.to));
        });
    }

    std::vector<CornerRing> rings() {
        for (std::size_t i = 0; i < edges_.size(); ++i) {
            if (!used_[i]) trace(i);
        }
        return std::move(rings_);
    }

private:
    /// The edges out of a corner: one, or two where cells of the region meet in the corner alone.
    std::pair<std::size_t, bool> out_of(Corner corner, unsigned arriving) const {
        const auto first = std::lower_bound(edges_.begin(), edges_.end(), key_of(corner),
                                            [](const Edge& edge, std::uint64_t key) { return key_of(edge.from) < key; });
        const auto at = static_cast<std::size_t>(first - edges_.begin());
        const bool is_double = at + 1 < edges_.size() && edges_[at + 1].from == corner;
        // A left turn stays with the cell, so that those which meet in a corner are not joined.
        const bool second = is_double && heading(edges_[at + 1].from, edges_[at + 1].to) == (arriving + 1) % 4;
        return {second ? at + 1 : at, is_double};
    }

    /// Follows edges until they close; where the way comes back to a corner, the loop since then is a ring of its own.
    void trace(std::size_t start) {
        CornerRing way;
        std::unordered_map<std::uint64_t, std::size_t> doubles;
        std::size_t edge = start;
        if (out_of(edges_[start].from, 0).second) doubles[key_of(edges_[start].from)] = 0;
        while (!used_[edge]) {
            used_[edge] = true;
            way.push_back(edges_[edge].from);
            const Corner to = edges_[edge].to;
            const auto [next, is_double] = out_of(to, heading(edges_[edge].from, to));
            if (const auto met = doubles.find(key_of(to)); met != doubles.end()) cut_loop(way, met->second, doubles);
            if (is_double) doubles[key_of(to)] = way.size();
            edge = next;
        }
        if (!way.empty()) rings_.push_back(std::move(way));
    }

    void cut_loop(CornerRing& way, std::size_t from, std::unordered_map<std::uint64_t, std::size_t>& doubles) {
        const auto begin = way.begin() + static_cast<std::ptrdiff_t>(from);
        for (auto corner = begin; corner != way.end(); ++corner) doubles.erase(key_of(*corner));
        rings_.emplace_back(begin, way.end());
        way.erase(begin, way.end());
    }

    std::vector<Edge> edges_;
    std::vector<bool> used_;
    std::vector<CornerRing> rings_;
};

RegionBorders::RegionBorders(std::int64_t columns)
    : above_(static_cast<std::size_t>(columns), no_region), began_at_(static_cast<std::size_t>(columns) + 1, 0) {}

void RegionBorders::add_edge(RegionLabel left, RegionLabel right, Corner from, Corner to) {
    if (left != no_region) edges_.push_back({left, right, from, to});
    if (right != no_region) edges_.push_back({right, left, to, from});
}

/// The line between the row before and this one: runs of one pair of labels.
void RegionBorders::add_horizontal(std::span<const RegionLabel> labels) {
    for (std::size_t begin = 0; begin < labels.size();) {
        const RegionLabel above = above_[begin];
        const RegionLabel below = labels[begin];
        std::size_t end = begin + 1;
        if (above == below) {
            begin = end;
            continue;
        }
        while (end < labels.size() && above_[end] == above && labels[end] == below) ++end;
        add_edge(above, below, {static_cast<std::uint32_t>(begin), row_}, {static_cast<std::uint32_t>(end), row_});
        begin = end;
    }
}

/// Column lines whose pair of neighbours ends with the row before.
void RegionBorders::add_vertical(std::span<const RegionLabel> labels) {
    RegionLabel west_above = no_region;
    RegionLabel west = no_region;
    for (std::size_t column = 0; column <= labels.size(); ++column) {
        const RegionLabel east_above = column < labels.size() ? above_[column] : no_region;
        const RegionLabel east = column < labels.size() ? labels[column] : no_region;
        if (west_above != west || east_above != east) {
            const auto line = static_cast<std::uint32_t>(column);
            const int borders = int{west_above != east_above} + int{west != east} + int{west_above != west} + int{east_above != east};
            if (borders > 2) meetings_.push_back(key_of({line, row_}));
            if (west_above != east_above) add_edge(west_above, east_above, {line, row_}, {line, began_at_[column]});
            began_at_[column] = row_;
        }
        west_above = east_above;
        west = east;
    }
}

void RegionBorders::add_row(std::span<const RegionLabel> labels) {
    if (row_ > 0 && std::equal(labels.begin(), labels.end(), above_.begin())) {
        ++row_;
        return;
    }
    add_horizontal(labels);
    add_vertical(labels);
    std::copy(labels.begin(), labels.end(), above_.begin());
    ++row_;
}

void RegionBorders::finish() {
    const std::vector<RegionLabel> nothing(above_.size(), no_region);
    add_horizontal(nothing);
    add_vertical(nothing);
    sort_by_label();
}

/// Labels are small numbers as a rule, which are counted off; those of bands, which are not, are compared.
void RegionBorders::sort_by_label() {
    const auto greatest = std::max_element(edges_.begin(), edges_.end(), [](const Edge& a, const Edge& b) { return a.inside < b.inside; });
    if (greatest == edges_.end()) return;
    if (greatest->inside >= edges_.size()) {
        std::ranges::stable_sort(edges_, {}, &Edge::inside);
        return;
    }
    std::vector<std::size_t> first(greatest->inside + 2, 0);
    for (const Edge& edge : edges_) ++first[edge.inside + 1];
    std::partial_sum(first.begin(), first.end(), first.begin());
    std::vector<Edge> sorted(edges_.size());
    for (const Edge& edge : edges_) sorted[first[edge.inside]++] = edge;
    edges_ = std::move(sorted);
}

std::vector<RegionLabel> RegionBorders::labels() const {
    std::vector<RegionLabel> labels;
    for (const Edge& edge : edges_) {
        if (labels.empty() || labels.back() != edge.inside) labels.push_back(edge.inside);
    }
    return labels;
}

std::vector<CornerPolygon> RegionBorders::outline(RegionLabel first, RegionLabel last) const {
    const auto by_label = [](const Edge& edge, RegionLabel label) { return edge.inside < label; };
    std::vector<Edge> own;
    for (auto edge = std::lower_bound(edges_.begin(), edges_.end(), first, by_label); edge != edges_.end() && edge->inside <= last; ++edge) {
        if (edge->outside < first || edge->outside > last) own.push_back(*edge);
    }
    std::vector<CornerRing> rings = Tracer(std::move(own)).rings();
    if (first != last) std::for_each(rings.begin(), rings.end(), drop_straight_corners);
    return HoleKeeper(std::move(rings)).polygons();
}

/// A straight run between two corners is cut at the middle of its first and its last side of a cell.
Line RegionBorders::smooth_ring(const CornerRing& ring) const {
    Line line;
    const auto add = [&](double column, double row) {
        if (line.empty() || line.back().x != column || line.back().y != row) line.push_back({column, row});
    };
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Corner& before = ring[(i + ring.size() - 1) % ring.size()];
        const Corner& at = ring[i];
        const Corner& after = ring[(i + 1) % ring.size()];
        const unsigned arriving = heading(before, at);
        const unsigned leaving = heading(at, after);
        const bool stays = arriving == leaving || std::binary_search(meetings_.begin(), meetings_.end(), key_of(at));
        constexpr std::array<std::pair<double, double>, 4> half_step{{{0.5, 0.0}, {0.0, -0.5}, {-0.5, 0.0}, {0.0, 0.5}}};
        if (stays) {
            add(at.column, at.row);
            continue;
        }
        add(at.column - half_step[arriving].first, at.row - half_step[arriving].second);
        add(at.column + half_step[leaving].first, at.row + half_step[leaving].second);
    }
    if (line.size() > 1 && line.front().x == line.back().x && line.front().y == line.back().y) line.pop_back();
    return line;
}

std::vector<Polygon> RegionBorders::smooth_outline(RegionLabel label) const {
    std::vector<Polygon> smoothed;
    for (const CornerPolygon& polygon : outline(label)) {
        smoothed.emplace_back();
        for (const CornerRing& ring : polygon.rings) smoothed.back().rings.push_back(smooth_ring(ring));
    }
    return smoothed;
}

}  // namespace rillclock
