#include "rillclock/rainfall/design_rain.hpp"

#include <catch2/catch.hpp>

#include <limits>

namespace rillclock {
namespace {

using Catch::Contains;

TEST_CASE("a plausible depth is taken in either unit") {
    CHECK(two_year_24_hour_from_text("3.6 in", "rain") == inches(3.6));
    CHECK(two_year_24_hour_from_text("91 mm", "rain") == millimetres(91));
    CHECK(two_year_24_hour_from_text("0.5 in", "rain") == inches(0.5));
    CHECK(two_year_24_hour_from_text("30 in", "rain") == inches(30));
}

TEST_CASE("an implausible depth is taken for a slip of unit") {
    CHECK_THROWS_WITH(two_year_24_hour_from_text("91 in", "rain"), Contains("rain is 91 in") && Contains("\"3.6 in\""));
    CHECK_THROWS_WITH(two_year_24_hour_from_text("3.6 mm", "rain"), Contains("(3.6 mm)") && Contains("\"3.6 in\""));
    CHECK_THROWS_WITH(checked_two_year_24_hour(inches(std::numeric_limits<double>::quiet_NaN()), "rain"),
                      Contains("lies between"));
}

TEST_CASE("a depth that is no length is refused with the right form") {
    CHECK_THROWS_WITH(two_year_24_hour_from_text("3.6", "rain"), Contains("no unit") && Contains("\"3.6 in\""));
    CHECK_THROWS_WITH(two_year_24_hour_from_text("3.6 in/h", "rain"), Contains("rainfall intensity"));
    CHECK_THROWS_WITH(two_year_24_hour_from_text("-3.6 in", "rain"), Contains("above zero"));
}

TEST_CASE("a study without rain is told both ways to give it") {
    CHECK_THAT(rain_is_missing("study.toml"),
               Contains("two_year_24_hour = \"3.6 in\"") && Contains("--rain \"3.6 in\""));
}

}  // namespace
}  // namespace rillclock
