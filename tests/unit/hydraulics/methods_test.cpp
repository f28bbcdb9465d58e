#include "rillclock/hydraulics/methods.hpp"

#include <catch2/catch.hpp>

#include <set>

namespace rillclock {
namespace {

TEST_CASE("every method says all that a reviewer asks") {
    for (const Method& method : methods()) {
        INFO(method.id);
        CHECK_FALSE(method.name.empty());
        CHECK_FALSE(method.formula.empty());
        CHECK_FALSE(method.inputs.empty());
        CHECK_FALSE(method.range.empty());
        CHECK_FALSE(method.source.empty());
        CHECK_FALSE(words(method.trust).empty());
    }
}

TEST_CASE("every symbol of a method's inputs stands in its formula") {
    for (const Method& method : methods())
        for (const MethodInput& input : method.inputs) {
            INFO(method.id << " " << input.symbol);
            CHECK(method.formula.find(input.symbol) != std::string_view::npos);
            CHECK_FALSE(input.meaning.empty());
            CHECK_FALSE(input.unit.empty());
        }
}

TEST_CASE("methods are found by an id that no other has") {
    std::set<std::string_view> ids;
    for (const Method& method : methods()) {
        CHECK(ids.insert(method.id).second);
        CHECK(find_method(method.id) == &method);
    }
    CHECK(find_method("by-feel") == nullptr);
}

}  // namespace
}  // namespace rillclock
