#include "rillclock/hydraulics/rational.hpp"

#include <catch2/catch.hpp>

#include <cmath>

namespace rillclock {
namespace {

TEST_CASE("an acre under an inch an hour gives 1.00833 cubic feet a second, or 1 where the study rounds") {
    const auto flow = [](RationalConversion conversion) {
        return in_cubic_feet_per_second(rational_peak(acres(1), inches_per_hour(1), conversion));
    };
    CHECK(flow(RationalConversion::exact) == Approx(43560.0 / 43200.0).epsilon(1e-12));
    CHECK(flow(RationalConversion::rounded) == Approx(1.0).epsilon(1e-12));
}

TEST_CASE("360 hectares under a millimetre an hour give one cubic metre a second, and ten times that under ten") {
    CHECK(in_cubic_metres_per_second(rational_peak(hectares(360), millimetres_per_hour(1), RationalConversion::exact)) ==
          Approx(1.0).epsilon(1e-12));
    CHECK(in_cubic_metres_per_second(rational_peak(hectares(360), millimetres_per_hour(10), RationalConversion::exact)) ==
          Approx(10.0).epsilon(1e-12));
}

TEST_CASE("between two printed return periods the factor is linear in their logarithm, outside that of the nearest") {
    const auto factor = [](double years) { return frequency_factor(FrequencyFactors::wright_mclaughlin, years); };
    CHECK(factor(1) == 1.0);
    CHECK(factor(10) == 1.0);
    CHECK(factor(25) == 1.1);
    CHECK(factor(50) == 1.2);
    CHECK(factor(100) == 1.25);
    CHECK(factor(500) == 1.25);
    CHECK(factor(std::sqrt(50.0 * 100.0)) == Approx(1.225));
    CHECK(frequency_factor(FrequencyFactors::australian, 1) == 0.80);
    CHECK(frequency_factor(FrequencyFactors::none, 100) == 1.0);
    CHECK_FALSE(is_printed_range(FrequencyFactors::wright_mclaughlin, 500));
    CHECK(is_printed_range(FrequencyFactors::none, 500));
}

TEST_CASE("the cubic of imperviousness runs from 0.04 to 0.892, the straight line from 0.05 to 0.95") {
    CHECK(urbonas_coefficient(0) == Approx(0.04));
    CHECK(urbonas_coefficient(1) == Approx(0.892));
    CHECK(urbonas_coefficient(0.5) == Approx(0.858 / 8 - 0.78 / 4 + 0.774 / 2 + 0.04));
    CHECK(schueler_coefficient(0) == Approx(0.05));
    CHECK(schueler_coefficient(1) == Approx(0.95));
}

}  // namespace
}  // namespace rillclock
