#include "rillclock/raster/region_outlines.hpp"

#include <catch2/catch.hpp>
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
