#include "reference/plain/sweeps.hpp"

#include <catch2/catch.hpp>

#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// 0 → 1 → 2 (root) ← 3, in one row.
FlowForest small_forest() {
    Raster<FlowCode> codes(1, 4);
    codes[0] = codes[1] = flow_code(Direction::east);
    codes[2] = flow_root;
    codes[3] = flow_code(Direction::west);
    return FlowForest(codes);
}

std::vector<std::int64_t> listed(const Raster<std::int64_t>& raster) {
    return {raster.values().begin(), raster.values().end()};
}

TEST_CASE("a sum down gathers the weights of all cells above, its own included") {
    const auto [sum] = sweep_down(small_forest(), down::Sum{[](Cell cell) { return std::int64_t{1} << cell; }});
    CHECK(listed(sum) == std::vector<std::int64_t>{1, 3, 15, 8});
}

TEST_CASE("a maximum down is 0 at divides and remembers where the greatest way begins") {
    const auto [farthest] = sweep_down(small_forest(), down::Max{[](Cell) { return std::int64_t{5}; }});
    CHECK(listed(farthest.value) == std::vector<std::int64_t>{0, 5, 10, 0});
    CHECK(farthest.head[2] == 0);
    CHECK(farthest.head[3] == 3);
}

TEST_CASE("among equal ways that arrive the tributary with the smaller index wins") {
    Raster<FlowCode> codes(1, 3);
    codes[0] = flow_code(Direction::east);
    codes[1] = flow_root;
    codes[2] = flow_code(Direction::west);
    const auto [farthest] = sweep_down(FlowForest(codes), down::Max{[](Cell) { return std::int64_t{5}; }});
    CHECK(farthest.head[1] == 0);
}

TEST_CASE("several channels travel in one sweep") {
    const auto [least, sum] = sweep_down(small_forest(), down::Min{[](Cell cell) { return 7.0 - cell; }},
                                         down::Sum{[](Cell) { return std::int64_t{1}; }});
    CHECK(least[2] == 4.0);
    CHECK(sum[2] == 4);
}

TEST_CASE("a sum up is the way to the root, whose own step counts nothing") {
    const auto [way] = sweep_up(small_forest(), up::Add{[](Cell cell) { return std::int64_t{10} + cell; }});
    CHECK(listed(way) == std::vector<std::int64_t>{21, 11, 0, 13});
}

TEST_CASE("a maximum up is the greatest value met on the way down") {
    const auto [greatest] = sweep_up(small_forest(), up::Max{[](Cell cell) { return cell == 1 ? 9.0 : cell * 1.0; }});
    CHECK(greatest[0] == 9.0);
    CHECK(greatest[3] == 3.0);
}

TEST_CASE("the first label is the nearest on the way down, 0 where there is none") {
    const auto [label] = sweep_up(small_forest(), up::First{[](Cell cell) { return cell == 1 ? 4U : 0U; }});
    CHECK(label[0] == 4);
    CHECK(label[2] == 0);
    CHECK(label[3] == 0);
}

TEST_CASE("directions that hold a cycle, or lead out of the data, are refused") {
    Raster<FlowCode> circle(1, 2);
    circle[0] = flow_code(Direction::east);
    circle[1] = flow_code(Direction::west);
    CHECK_THROWS_AS(FlowForest(circle), Error);
    Raster<FlowCode> outward(1, 1);
    outward[0] = flow_code(Direction::east);
    CHECK_THROWS_AS(FlowForest(outward), Error);
}

}  // namespace
}  // namespace rillclock
