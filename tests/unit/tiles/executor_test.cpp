#include "rillclock/tiles/executor.hpp"

#include <catch2/catch.hpp>

#include <atomic>
#include <stdexcept>
#include <string>
#include <vector>

namespace rillclock {
namespace {

TEST_CASE("every item is worked exactly once, on any number of threads of either kind") {
    for (const auto kind : {Executor::Kind::task_arena, Executor::Kind::plain_threads}) {
        for (const unsigned threads : {1U, 2U, 5U}) {
            std::vector<std::atomic<int>> count(1000);
            Executor(threads, kind).for_each(count.size(), [&](std::size_t item) { ++count[item]; });
            for (const auto& c : count) REQUIRE(c == 1);
        }
    }
}

TEST_CASE("no items is no work") { Executor(2).for_each(0, [](std::size_t) { FAIL("there is no item"); }); }

TEST_CASE("an exception in an item reaches the caller") {
    for (const auto kind : {Executor::Kind::task_arena, Executor::Kind::plain_threads}) {
        CHECK_THROWS_WITH(Executor(2, kind).for_each(100, [](std::size_t item) {
            if (item == 7) throw std::runtime_error("item " + std::to_string(item));
        }), "item 7");
    }
}

TEST_CASE("at least one thread may be used") { CHECK(usable_threads() >= 1); }

}  // namespace
}  // namespace rillclock
