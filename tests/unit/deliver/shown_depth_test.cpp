#include "shown_depth.hpp"

#include <catch2/catch.hpp>

using namespace rillclock;

TEST_CASE("depths are shown without the noise of single precision, and none of them as zero") {
    CHECK(shown_depth(static_cast<double>(312.62F) - static_cast<double>(312.36F)) == 0.26);
    CHECK(shown_depth(12.3456) == 12.346);
    CHECK(shown_depth(0.0004) == 0.0004);
}
