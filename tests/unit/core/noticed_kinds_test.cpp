#include "rillclock/core/noticed_kinds.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

Notice at(const std::string& code, const std::string& point) { return {.code = code, .text = code + " at " + point, .point = point}; }

TEST_CASE("many notices of one kind hide none of another") {
    const Notices notices{at("edge", "A"), at("edge", "B"), at("edge", "C"), at("tail", "B")};
    const std::vector<NoticedKind> kinds = noticed_kinds(notices);
    REQUIRE(kinds.size() == 2);
    CHECK(kinds[0].first == &notices[0]);
    CHECK(kinds[0].other_points == std::vector<std::string>{"B", "C"});
    CHECK(kinds[1].first == &notices[3]);
    CHECK(kinds[1].other_points.empty());
}

TEST_CASE("what is noticed of no point stands alone") {
    const Notices notices{at("range", ""), at("range", ""), at("range", "A")};
    CHECK(noticed_kinds(notices).size() == 3);
}

TEST_CASE("the others are named up to four") {
    CHECK(likewise_words({.first = nullptr, .other_points = {}}).empty());
    CHECK(likewise_words({.first = nullptr, .other_points = {"B"}}) == "Likewise at 1 more: 'B'.");
    CHECK(likewise_words({.first = nullptr, .other_points = {"B", "C", "D", "E", "F", "G"}}) ==
          "Likewise at 6 more: 'B', 'C', 'D', 'E' and 2 others.");
}

}  // namespace
}  // namespace rillclock
