#include "rillclock/core/number_text.hpp"

#include <catch2/catch.hpp>

#include <limits>

namespace rillclock {
namespace {

TEST_CASE("five significant digits are kept and closing zeros are not") {
    CHECK(significant(61.0337) == "61.034");
    CHECK(significant(0.0959123) == "0.095912");
    CHECK(significant(2.0) == "2");
    CHECK(significant(0.1) == "0.1");
    CHECK(significant(-1.5) == "-1.5");
}

TEST_CASE("digits before the decimal point are all kept") {
    CHECK(significant(1234567.8) == "1234568");
    CHECK(significant(100000) == "100000");
}

TEST_CASE("rounding up to the next power of ten keeps the digits right") {
    CHECK(significant(9.999996) == "10");
    CHECK(significant(0.99999949) == "1");
    CHECK(significant(99999.6) == "100000");
}

TEST_CASE("only extraordinary numbers have an exponent") {
    CHECK(significant(0.000001) == "0.000001");
    CHECK(significant(1e14) == "100000000000000");
    CHECK(significant(1.25e-9) == "1.2500e-09");
    CHECK(significant(1e15) == "1.0000e+15");
}

TEST_CASE("zero has no sign and what is not finite says so") {
    CHECK(significant(-0.0) == "0");
    CHECK(fixed_decimals(-0.001, 2) == "0.00");
    CHECK(significant(std::numeric_limits<double>::quiet_NaN()) == "nan");
    CHECK(fixed_decimals(-std::numeric_limits<double>::infinity(), 2) == "-inf");
}

TEST_CASE("a number with fixed decimals has just those") {
    CHECK(fixed_decimals(1.5, 2) == "1.50");
    CHECK(fixed_decimals(1.996, 2) == "2.00");
    CHECK(fixed_decimals(12, 0) == "12");
    CHECK(fixed_decimals(-3.14159, 3) == "-3.142");
}

}  // namespace
}  // namespace rillclock
