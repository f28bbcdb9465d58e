#include "rillclock/raster/region_outlines.hpp"

#include <algorithm>
#include <array>
#include <catch2/catch.hpp>
#include <cmath>
#include <map>
#include <random>
#include <set>
#include <string>

using namespace rillclock;

namespace {

using Labels = std::vector<std::vector<RegionLabel>>;

Labels drawing(const std::vector<std::string>& rows) {
    Labels labels;
    for (const std::string& row : rows) {
        labels.emplace_back();
        for (const char c : row) labels.back().push_back(c == '.' ? no_region : static_cast<RegionLabel>(c));
    }
    return labels;
}

RegionBorders borders_of(const Labels& labels) {
    RegionBorders borders(static_cast<std::int64_t>(labels.front().size()));
    for (const auto& row : labels) borders.add_row(row);
    borders.finish();
    return borders;
}

double area_of(const CornerRing& ring) {
    double sum = 0.0;
    for (std::size_t i = 0; i < ring.size(); ++i) {
        const Corner& a = ring[i];
        const Corner& b = ring[(i + 1) % ring.size()];
        sum += static_cast<double>(b.column) * a.row - static_cast<double>(a.column) * b.row;
    }
    return sum / 2.0;
}

/// Even–odd rule at the centre of a cell, by the sides west of it.
bool is_within(const CornerPolygon& polygon, std::size_t row, std::size_t column) {
    bool inside = false;
    for (const CornerRing& ring : polygon.rings) {
        for (std::size_t i = 0; i < ring.size(); ++i) {
            const Corner& a = ring[i];
            const Corner& b = ring[(i + 1) % ring.size()];
            const bool spans = std::min(a.row, b.row) <= row && row < std::max(a.row, b.row);
            if (spans && a.column <= column) inside = !inside;
        }
    }
    return inside;
}

/// How many pieces cells with labels from `first` to `last` make, joined over sides alone: counted by flooding.
std::size_t pieces_of(const Labels& labels, RegionLabel first, RegionLabel last) {
    std::set<std::pair<std::size_t, std::size_t>> left;
    for (std::size_t r = 0; r < labels.size(); ++r) {
        for (std::size_t c = 0; c < labels[r].size(); ++c) {
            if (labels[r][c] >= first && labels[r][c] <= last) left.insert({r, c});
        }
    }
    std::size_t pieces = 0;
    while (!left.empty()) {
        ++pieces;
        std::vector<std::pair<std::size_t, std::size_t>> wet{*left.begin()};
        left.erase(left.begin());
        while (!wet.empty()) {
            const auto [r, c] = wet.back();
            wet.pop_back();
            for (const auto& next : {std::pair{r - 1, c}, {r + 1, c}, {r, c - 1}, {r, c + 1}}) {
                if (left.erase(next) > 0) wet.push_back(next);
            }
        }
    }
    return pieces;
}

/// Holds the outline of labels from `first` to `last` to the cells: each in one piece, none outside; outer rings first and alone positive;
/// no ring meets itself.
void check_outline(const Labels& labels, const RegionBorders& borders, RegionLabel first, RegionLabel last) {
    const auto polygons = borders.outline(first, last);
    CHECK(polygons.size() == pieces_of(labels, first, last));
    double area = 0.0;
    for (const CornerPolygon& polygon : polygons) {
        for (std::size_t i = 0; i < polygon.rings.size(); ++i) {
            CHECK((area_of(polygon.rings[i]) > 0) == (i == 0));
            area += area_of(polygon.rings[i]);
            std::set<std::pair<std::uint32_t, std::uint32_t>> corners;
            for (const Corner& corner : polygon.rings[i]) corners.insert({corner.row, corner.column});
            CHECK(corners.size() == polygon.rings[i].size());
        }
    }
    double cells = 0.0;
    for (std::size_t r = 0; r < labels.size(); ++r) {
        for (std::size_t c = 0; c < labels[r].size(); ++c) {
            const bool belongs = labels[r][c] != no_region && labels[r][c] >= first && labels[r][c] <= last;
            cells += belongs ? 1.0 : 0.0;
            const auto pieces = std::count_if(polygons.begin(), polygons.end(), [&](const CornerPolygon& p) { return is_within(p, r, c); });
            CHECK(pieces == (belongs ? 1 : 0));
        }
    }
    CHECK(area == cells);
}

}  // namespace

TEST_CASE("a rectangle has four corners, counter-clockwise") {
    const auto polygons = borders_of(drawing({"....", ".aa.", ".aa.", "...."})).outline('a');
    REQUIRE(polygons.size() == 1);
    REQUIRE(polygons[0].rings.size() == 1);
    CHECK(polygons[0].rings[0] == CornerRing{{1, 1}, {1, 3}, {3, 3}, {3, 1}});
}

TEST_CASE("cells that meet in a corner are two pieces") {
    CHECK(borders_of(drawing({"a.", ".a"})).outline('a').size() == 2);
}

TEST_CASE("a hole that touches the outline in a corner stays a hole") {
    const Labels labels = drawing({"aaa.", "a.aa", "aaaa"});
    const auto polygons = borders_of(drawing({"aaa", "a.a", "aa."})).outline('a');
    REQUIRE(polygons.size() == 1);
    CHECK(polygons[0].rings.size() == 2);
    CHECK(area_of(polygons[0].rings[1]) == -1.0);
    CHECK(borders_of(labels).outline('a')[0].rings.size() == 2);
}

TEST_CASE("an island within a hole is a piece of its own and holes go to the ring around them") {
    const Labels labels = drawing({"aaaaaaa.", "a.....a.", "a.aaa.aa", "a.a.a.aa", "a.aaa.a.", "a.....a.", "aaaaaaa."});
    const auto polygons = borders_of(labels).outline('a');
    REQUIRE(polygons.size() == 2);
    CHECK(polygons[0].rings.size() == 2);
    CHECK(polygons[1].rings.size() == 2);
    CHECK(area_of(polygons[1].rings[0]) == 9.0);
    CHECK(area_of(polygons[1].rings[1]) == -1.0);
}

TEST_CASE("two regions taken together have no border between them") {
    const auto polygons = borders_of(drawing({"ab", "ab"})).outline('a', 'b');
    REQUIRE(polygons.size() == 1);
    CHECK(polygons[0].rings[0].size() == 4);
}

TEST_CASE("neighbours have the corner in common where a third joins them") {
    const auto polygons = borders_of(drawing({"aa", "bc"})).outline('a');
    CHECK(polygons[0].rings[0] == CornerRing{{0, 0}, {0, 1}, {1, 1}, {2, 1}, {2, 0}});
}

TEST_CASE("outlines cover random labels exactly, whatever the labels and the size") {
    std::mt19937 random(7);
    for (int round = 0; round < 400; ++round) {
        const std::size_t rows = 1 + random() % 14;
        const std::size_t columns = 1 + random() % 14;
        const std::size_t kinds = 1 + random() % 4;
        Labels labels(rows, std::vector<RegionLabel>(columns));
        for (auto& row : labels) {
            for (auto& label : row) label = random() % (kinds + 1);
        }
        const RegionBorders borders = borders_of(labels);
        for (const RegionLabel label : borders.labels()) check_outline(labels, borders, label, label);
        if (kinds > 1) check_outline(labels, borders, 1, 1 + random() % kinds);
    }
}

namespace {

/// The outlines of all labels with their corners cut off, and what a test asks of them together.
struct Smoothed {
    std::map<RegionLabel, double> areas;
    std::map<RegionLabel, std::size_t> corners;
    std::map<std::array<double, 4>, int> sides;   ///< from, to: how often
};

Smoothed smoothed(const RegionBorders& borders) {
    Smoothed made;
    for (const RegionLabel label : borders.labels()) {
        for (const CornerPolygon& polygon : borders.outline(label)) {
            for (const CornerRing& ring : polygon.rings) made.corners[label] += ring.size();
        }
        for (const Polygon& polygon : borders.smooth_outline(label)) {
            for (const Line& ring : polygon.rings) {
                for (std::size_t i = 0; i < ring.size(); ++i) {
                    const Place& a = ring[i];
                    const Place& b = ring[(i + 1) % ring.size()];
                    made.areas[label] += (b.x * a.y - a.x * b.y) / 2.0;
                    ++made.sides[{a.x, a.y, b.x, b.y}];
                }
            }
        }
    }
    return made;
}

}  // namespace

TEST_CASE("a smoothed cell is cut at the middle of its sides") {
    const std::vector<Polygon> polygons = borders_of(drawing({"...", ".a.", "..."})).smooth_outline('a');
    REQUIRE(polygons.size() == 1);
    std::set<std::pair<double, double>> places;
    for (const Place& at : polygons[0].rings[0]) places.insert({at.x, at.y});
    CHECK(polygons[0].rings[0].size() == 4);
    CHECK(places == std::set<std::pair<double, double>>{{1.0, 1.5}, {1.5, 1.0}, {2.0, 1.5}, {1.5, 2.0}});
}

TEST_CASE("smoothing keeps the corners in which three borders meet, and those in which cells touch") {
    const RegionBorders borders = borders_of(drawing({"ab", "ba"}));
    for (const char label : {'a', 'b'}) {
        for (const Polygon& polygon : borders.smooth_outline(static_cast<RegionLabel>(label))) {
            const Line& ring = polygon.rings[0];
            CHECK(std::any_of(ring.begin(), ring.end(), [](const Place& at) { return at.x == 1.0 && at.y == 1.0; }));
        }
    }
}

TEST_CASE("smoothed neighbours share their borders, and no area is made or lost but at the corners of the whole") {
    std::mt19937 random(11);
    for (int round = 0; round < 400; ++round) {
        const std::size_t rows = 1 + random() % 12;
        const std::size_t columns = 1 + random() % 12;
        Labels labels(rows, std::vector<RegionLabel>(columns));
        std::map<RegionLabel, double> cells;
        for (auto& row : labels) {
            for (auto& label : row) cells[label = 1 + random() % (1 + static_cast<std::size_t>(round) % 4)] += 1.0;
        }
        const Smoothed made = smoothed(borders_of(labels));
        double all = 0.0;
        for (const auto& [label, area] : made.areas) {
            all += area;
            CHECK(std::abs(area - cells[label]) <= static_cast<double>(made.corners.at(label)) / 8.0);
        }
        CHECK(all == static_cast<double>(rows * columns) - 0.5);   // four corners of the whole, an eighth each
        for (const auto& [side, count] : made.sides) {
            const auto& [ax, ay, bx, by] = side;
            CHECK(count == 1);
            const auto far = static_cast<double>(columns) - 0.5;
            const auto low = static_cast<double>(rows) - 0.5;
            const bool at_outside = std::min(ax, bx) < 0.5 || std::max(ax, bx) > far || std::min(ay, by) < 0.5 || std::max(ay, by) > low;
            if (!at_outside) CHECK(made.sides.count({bx, by, ax, ay}) == 1);
        }
    }
}
