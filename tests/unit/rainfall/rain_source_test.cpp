#include "rillclock/rainfall/rain_source.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>

namespace rillclock {
namespace {

using Catch::Contains;

PeriodFormula of(double years, const char* text) {
    return {.return_period = years, .formula = intensity_formula_from_text(text, "formula")};
}

const PeriodFormula two_year = of(2, "i[in/h] = 60 / (t[min] + 10)^0.8");
const PeriodFormula ten_year = of(10, "i[in/h] = 90 / (t[min] + 10)^0.8");
const RainRange all_durations{.first = seconds(0)};
const RainRange to_a_day{.first = minutes(5), .last = hours(24)};

TEST_CASE("formulas in any order give each period its own, and those between by the logarithm of the period") {
    const RainSource rain = rain_from_formulas({ten_year, two_year}, all_durations, "rain");
    const auto at_ten_minutes = [&](double years) {
        return in_inches_per_hour(rain.curve(years, seconds(0)).at(minutes(10)));
    };
    const double shape = std::pow(20.0, -0.8);
    CHECK(at_ten_minutes(2) == Approx(60 * shape).epsilon(1e-14));
    CHECK(at_ten_minutes(10) == Approx(90 * shape).epsilon(1e-14));
    CHECK(at_ten_minutes(std::sqrt(20.0)) == Approx(75 * shape).epsilon(1e-12));
    CHECK(at_ten_minutes(2 * std::pow(5.0, 0.25)) == Approx((60 + 0.25 * 30) * shape).epsilon(1e-12));
    CHECK_THROWS_WITH(rain.curve(25, seconds(0)), Contains("2, 10 years"));
}

TEST_CASE("one formula with T holds for every return period of a year or more") {
    const IntensityFormula formula = intensity_formula_from_text("i[in/h] = 40 T^0.2 / (t[min] + 10)^0.8", "formula");
    const RainSource rain = rain_from_formulas({{.formula = formula}}, all_durations, "rain");
    CHECK(rain.curve(32, seconds(0)).at(minutes(10)) == formula(minutes(10), 32));
    CHECK_THROWS_WITH(rain.curve(0.5, seconds(0)), Contains("one year is the least"));
    CHECK_THROWS_WITH(rain.curve(std::nan(""), seconds(0)), Contains("one year is the least"));
    CHECK(sentence(rain.echo) == "rain: formula, intensity in in/h, all durations from 0 min, all return periods");
}

TEST_CASE("a formula is read between the durations the study states") {
    const RainCurve curve = rain_from_formulas({two_year}, to_a_day, "rain").curve(2, seconds(0));
    CHECK(curve.at(minutes(1)) == curve.at(minutes(5)));
    CHECK_FALSE(curve.within(hours(25)));
    CHECK(curve.within(hours(24)));
}

TEST_CASE("a power law has no intensity at no duration, unless a least time is stated") {
    const RainSource rain = rain_from_formulas({of(2, "i[in/h] = 7 / t[min]^0.6")}, all_durations, "rain");
    CHECK_THROWS_WITH(rain.curve(2, seconds(0)).at(seconds(0)), Contains("least time"));
    CHECK(rain.curve(2, minutes(5)).at(seconds(0)) == rain.curve(2, seconds(0)).at(minutes(5)));
}

TEST_CASE("the 2-year 24-hour depth comes of a formula only where it is stated to reach 24 hours") {
    CHECK_FALSE(rain_from_formulas({two_year}, all_durations, "rain").two_year_24_hour());
    CHECK_FALSE(rain_from_formulas({ten_year}, to_a_day, "rain").two_year_24_hour());
    const auto depth = rain_from_formulas({two_year}, to_a_day, "rain").two_year_24_hour();
    REQUIRE(depth);
    CHECK(in_inches(*depth) == Approx(24 * 60 / std::pow(1450.0, 0.8)).epsilon(1e-12));
}

TEST_CASE("formulas that do not fit together are refused") {
    const auto refuses = [](std::vector<PeriodFormula> formulas, const char* because) {
        CHECK_THROWS_WITH(rain_from_formulas(std::move(formulas), all_durations, "rain (study.toml, line 9)"),
                          Contains("rain (study.toml, line 9)") && Contains(because));
    };
    refuses({}, "states no formula");
    refuses({two_year, two_year}, "two formulas for 2 years");
    refuses({of(0, "i[in/h] = 60 / (t[min] + 10)")}, "above zero");
    refuses({of(-2, "i[in/h] = 60 / (t[min] + 10)")}, "above zero");
    refuses({of(std::nan(""), "i[in/h] = 60 / (t[min] + 10)")}, "above zero");
    refuses({of(2, "i[in/h] = 60 T^0.2 / (t[min] + 10)")}, "without a return period");
    refuses({{.formula = two_year.formula}}, "say for which");
    refuses({{.formula = two_year.formula}, ten_year}, "without a return period");
}

TEST_CASE("a range of durations must rise from zero or more") {
    for (const RainRange bad :
         {RainRange{.first = minutes(-5)}, RainRange{.first = hours(2), .last = hours(1)},
          RainRange{.first = hours(1), .last = hours(1)}, RainRange{.first = seconds(std::nan(""))}})
        CHECK_THROWS_WITH(rain_from_formulas({two_year}, bad, "rain"), Contains("holds between two durations"));
}

TEST_CASE("formulas that cross get a notice, and steep ones theirs") {
    const RainSource crossing =
        rain_from_formulas({two_year, of(10, "i[in/h] = 200 / (t[min] + 30)^1.1")}, to_a_day, "rain");
    REQUIRE(crossing.notices.size() == 2);
    CHECK(crossing.notices[0].code == "rain-depth-falls");
    CHECK_THAT(crossing.notices[0].text, Contains("rain, 10 years,"));
    CHECK(crossing.notices[1].code == "rain-formulas-cross");
    CHECK_THAT(crossing.notices[1].text, Contains("less rain for 10 years than for 2 years"));
    CHECK(rain_from_formulas({two_year, ten_year}, to_a_day, "rain").notices.empty());
}

}  // namespace
}  // namespace rillclock
