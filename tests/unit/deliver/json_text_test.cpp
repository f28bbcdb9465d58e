#include "json_text.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

const Json first = {{"name", "a\nb \"outlets\": []"}, {"places", {1, 2.5, Json::object()}}, {"none", nullptr}};
const Json second = {{"name", "\xff"}, {"nothing", Json::array()}};

TEST_CASE("members made each on their own are those of a whole made at once, byte for byte") {
    const Json frame = {{"before", {{"outlets", Json::array()}}}, {"outlets", Json::array()}, {"after", 1}};
    for (const std::vector<Json>& members : {std::vector<Json>{first}, std::vector<Json>{first, second, first}, std::vector<Json>{}}) {
        Json whole = frame;
        std::vector<std::string> texts;
        for (const Json& member : members) {
            whole["outlets"].push_back(member);
            texts.push_back(member_text(member));
        }
        CHECK(with_members(json_text(frame), "outlets", texts) == json_text(whole));
    }
}

TEST_CASE("a list that is not there is a fault of ours") {
    CHECK_THROWS_AS(with_members(json_text({{"points", Json::array()}}), "outlets", {"\n  1"}), Error);
}

}  // namespace
}  // namespace rillclock
