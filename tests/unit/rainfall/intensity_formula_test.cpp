#include "rillclock/rainfall/intensity_formula.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <limits>
#include <string>

#include "rillclock/rainfall/rain_source.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

IntensityFormula formula_from(const std::string& text) {
    return intensity_formula_from_text(text, "formula (study.toml, line 9, column 11)");
}

TEST_CASE("the forms manuals print are read with their units") {
    CHECK(formula_from("i[in/h] = 60 / (t[min] + 10)^0.8") ==
          IntensityFormula{.factor = 60, .added = 10, .outer_exponent = 0.8});
    CHECK(formula_from("i[in/h] = 94.9 / (t[min]^0.88 + 9.04)") ==
          IntensityFormula{.factor = 94.9, .time_exponent = 0.88, .added = 9.04});
    CHECK(formula_from("i [ mm/h ]=7.44/t[min]^0.645") ==
          IntensityFormula{.factor = 7.44, .time_exponent = 0.645, .intensity_unit = millimetres_per_hour(1)});
    CHECK(formula_from("i[in/h] = 28.5 / (10 + t[min])^0.786") ==
          IntensityFormula{.factor = 28.5, .added = 10, .outer_exponent = 0.786});
}

TEST_CASE("letters stand for the values after the semicolon") {
    CHECK(formula_from("i[in/h] = b / (t[min] + d)^e; e = 0.8, b = 60, d = 10") == formula_from("i[in/h] = 60 / (t[min] + 10)^0.8"));
    CHECK(formula_from("i[cm/h] = K T^m / (t[h] + b)^n; K = 6, m = 0.15, b = 0.5, n = 0.9") ==
          IntensityFormula{.factor = 6,
                           .period_exponent = 0.15,
                           .added = 0.5,
                           .outer_exponent = 0.9,
                           .intensity_unit = millimetres_per_hour(10),
                           .time_unit = hours(1)});
    CHECK(formula_from("i[in/h] = 5 * T^0.2 / (t[min] + 1)^0.7") == formula_from("i[in/h] = 5 T^0.2 / (t[min] + 1)^0.7"));
}

TEST_CASE("a formula gives its intensity in its own units") {
    const IntensityFormula formula = formula_from("i[mm/h] = 600 T^0.5 / (t[h] + 1)");
    CHECK(in_millimetres_per_hour(formula(hours(2), 4)) == Approx(600 * 2 / 3.0).epsilon(1e-14));
}

TEST_CASE("a text that is no formula is refused with the right form and its place") {
    for (const char* bad :
         {"", "60", "i = 60 / (t + 10)", "i[in/h] 60 / (t[min] + 10)", "i[in/h] = / (t[min] + 10)",
          "i[in/h] = 60 (t[min] + 10)", "i[in/h] = 60 / (t[min] + 10", "i[in/h] = 60 / (10 t[min])",
          "i[in/h] = 60 / (t[min] + )", "i[in/h] = 60 / (t[min] + 10)^", "i[in/h] = 60 / (t[min] + 10) extra",
          "i[in/h = 60 / (t[min] + 10)", "i[in/h] = 60 * / (t[min] + 10)", "i[in/h] = 60 T / (t[min] + 10)",
          "i[in/h] = a / (t[min] + 10)", "i[in/h] = 60 / (t[min] + 10); a = 3",
          "i[in/h] = a / (t[min] + 10); a = 3, a = 4", "i[in/h] = a / (t[min] + 10); a",
          "i[in/h] = a / (t[min] + 10); t = 3"}) {
        INFO(bad);
        CHECK_THROWS_WITH(formula_from(bad), Contains("formula (study.toml, line 9, column 11) is \"" + std::string(bad)) &&
                                         Contains("i[in/h] = 94.9 / (t[min]^0.88 + 9.04)"));
    }
}

TEST_CASE("units that are missing or of another dimension are refused by name") {
    CHECK_THROWS_WITH(formula_from("i[in] = 60 / (t[min] + 10)"), Contains("\"in\" for i") && Contains("mm/h"));
    CHECK_THROWS_WITH(formula_from("i[in/h] = 60 / (t[s] + 10)"), Contains("\"s\" for t") && Contains("min or h"));
    CHECK_THROWS_WITH(formula_from("i[in/h] = 60 / (t + 10)"), Contains("no unit in brackets after t"));
}

TEST_CASE("every number of a formula has its range") {
    for (const char* bad :
         {"i[in/h] = 0 / (t[min] + 10)", "i[in/h] = -60 / (t[min] + 10)", "i[in/h] = nan / (t[min] + 10)",
          "i[in/h] = inf / (t[min] + 10)", "i[in/h] = 60 / (t[min] + -1)", "i[in/h] = 60 / (t[min]^0 + 10)",
          "i[in/h] = 60 / (t[min] + 10)^-0.8", "i[in/h] = 60 / (t[min] + 10)^0", "i[in/h] = 60 T^-1 / (t[min] + 10)",
          "i[in/h] = a / (t[min] + 10); a = nan", "i[in/h] = a / (t[min] + 10); a = -2",
          "i[in/h] = a / (t[min] + 10); a = x"}) {
        INFO(bad);
        CHECK_THROWS_WITH(formula_from(bad), Contains("formula (study.toml, line 9, column 11)"));
    }
}

TEST_CASE("depth falls beyond b / (c - 1) where c is above 1, and nowhere else") {
    const IntensityFormula steep = formula_from("i[in/h] = 900 / (t[min] + 30)^1.5");
    REQUIRE(steep.depth_falls_beyond());
    CHECK(in_minutes(*steep.depth_falls_beyond()) == Approx(60).epsilon(1e-12));
    const auto depth = [&](double at) { return steep(minutes(at), 1).si() * at; };
    CHECK(depth(60) > depth(59.9));
    CHECK(depth(60) > depth(60.1));
    CHECK_FALSE(formula_from("i[in/h] = 900 / (t[min] + 30)").depth_falls_beyond());
    CHECK_FALSE(formula_from("i[in/h] = 900 / (t[min] + 30)^0.99").depth_falls_beyond());
}

TEST_CASE("with a power inside the depth falls beyond where its growth ends") {
    const IntensityFormula steep = formula_from("i[in/h] = 900 / (t[min]^1.2 + 30)");
    const double at = in_minutes(*steep.depth_falls_beyond());
    const auto depth = [&](double time) { return steep(minutes(time), 1).si() * time; };
    CHECK(depth(at) > depth(at * 1.01));
    CHECK(depth(at) > depth(at / 1.01));
}

TEST_CASE("an exponent above 1 gets its notice, with the exponent and where depth falls") {
    const Notices notices = notices_about(formula_from("i[in/h] = 900 / (t[min] + 30)^1.5"), "formula");
    REQUIRE(notices.size() == 1);
    CHECK(notices[0].code == "rain-depth-falls");
    CHECK(notices[0].value == 1.5);
    CHECK_THAT(notices[0].text, Contains("exponent 1.5") && Contains("beyond 60 min"));
    CHECK(notices_about(formula_from("i[in/h] = 900 / (t[min] + 30)"), "formula").empty());
}

}  // namespace
}  // namespace rillclock
