#include "rillclock/core/nearest_word.hpp"

#include <catch2/catch.hpp>

#include <array>

namespace rillclock {
namespace {

constexpr std::array<std::string_view, 3> words{"slope_window", "vertical_step", "pond_depth"};

TEST_CASE("one letter more, less, other or swapped is a distance of one") {
    CHECK(edit_distance("band", "bands") == 1);
    CHECK(edit_distance("band", "and") == 1);
    CHECK(edit_distance("band", "bend") == 1);
    CHECK(edit_distance("band", "badn") == 1);
    CHECK(edit_distance("", "four") == 4);
    CHECK(edit_distance("kitten", "sitting") == 3);
}

TEST_CASE("capital letters do not count") {
    CHECK(edit_distance("Band", "bAND") == 0);
}

TEST_CASE("a slip of the pen finds its word") {
    CHECK(nearest_word("slope_widnow", words) == "slope_window");
    CHECK(nearest_word("Vertical_Steps", words) == "vertical_step");
}

TEST_CASE("a word far from all finds none") {
    CHECK_FALSE(nearest_word("rainfall", words));
    CHECK_FALSE(nearest_word("x", words));
    CHECK_FALSE(nearest_word("band", {}));
}

TEST_CASE("the suggestion is the end of a sentence, or nothing") {
    CHECK(did_you_mean("pond_dept", words) == "; did you mean pond_depth?");
    CHECK(did_you_mean("rainfall", words).empty());
}

TEST_CASE("of names of several words those that share most are suggested, the nearest first") {
    constexpr std::array<std::string_view, 4> names{"asce lawn on sandy soil", "asce lawn on heavy soil", "asce roofs", "pasture"};
    CHECK(did_you_mean_any("ASCE lawn sand", names) == "; did you mean asce lawn on sandy soil or asce lawn on heavy soil?");
    CHECK(did_you_mean_any("heavy  lawn", names) == "; did you mean asce lawn on heavy soil?");
    CHECK(did_you_mean_any("pastur", names) == "; did you mean pasture?");
    CHECK(did_you_mean_any("rainfall", names).empty());
    CHECK(did_you_mean_any("", names).empty());
    constexpr std::array<std::string_view, 6> many{"a one", "a two", "a three", "a four", "a five", "a six"};
    CHECK(did_you_mean_any("a", many) == "; did you mean a one, a two, a six, a four or a five?");
}

}  // namespace
}  // namespace rillclock
