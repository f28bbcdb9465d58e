#include "rillclock/run/review_words.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

Notice notice(const std::string& point, const std::string& code, const std::string& text) {
    return {.code = code, .text = text, .point = point};
}

TEST_CASE("a word goes on to the notice of the same point and code, whatever its figures have become") {
    const Notices notices{notice("Weir", "slow-tail", "29 min"), notice("Weir", "touches-edge", "at 3 cells")};
    const CarriedWords carried = carry_over({{"Weir", "touches-edge", "at 5 cells", "seen, MB"}}, notices);
    CHECK(carried.by_notice == std::vector<std::string>{"", "seen, MB"});
    CHECK(carried.dropped.empty());
}

TEST_CASE("a word of another point, or on what is noticed no longer, is dropped and told") {
    const Notices notices{notice("Weir", "slow-tail", "29 min")};
    const CarriedWords carried = carry_over({{"Bridge", "slow-tail", "29 min", "one"}, {"Weir", "ponded", "3 %", "two"}}, notices);
    CHECK(carried.by_notice == std::vector<std::string>{""});
    REQUIRE(carried.dropped.size() == 2);
    CHECK(sentences_on(carried)[0] == "review: the notice slow-tail at 'Bridge' applies no longer; its word \"one\" was dropped");
}

TEST_CASE("of several notices of one code each keeps its own word, by its text first") {
    const Notices notices{notice("", "code", "c"), notice("", "code", "b"), notice("", "code", "new")};
    const CarriedWords carried = carry_over({{"", "code", "a", "on a"}, {"", "code", "b", "on b"}, {"", "code", "c", "on c"}}, notices);
    CHECK(carried.by_notice == std::vector<std::string>{"on c", "on b", "on a"});
    CHECK(carried.dropped.empty());
}

TEST_CASE("where nobody has written anything nothing is said") { CHECK(sentences_on(carry_over({}, {notice("", "a", "b")})).empty()); }

}  // namespace
}  // namespace rillclock
