#include "rillclock/core/quantity_text.hpp"

#include <catch2/catch.hpp>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

const QuantityAsked asked{.subject = "width", .example = "20 m"};

Length length(std::string_view text) {
    return length_from_text(text, asked);
}

TEST_CASE("a text with a unit is the same double as the named maker gives") {
    CHECK(length("100 ft") == feet(100));
    CHECK(length("3.4 in") == inches(3.4));
    CHECK(length("3 mm") == millimetres(3));
    CHECK(length("7 cm") == centimetres(7));
    CHECK(length("2 km") == kilometres(2));
    CHECK(length("1.5 mi") == miles(1.5));
    CHECK(length("10 yd") == feet(30));
    CHECK(length("1000 us survey ft") == us_survey_feet(1000));
    CHECK(area_from_text("4 ha", asked) == hectares(4));
    CHECK(area_from_text("4 ac", asked) == acres(4));
    CHECK(area_from_text("9 m²", asked) == square_metres(9));
    CHECK(area_from_text("2 km2", asked) == square_kilometres(2));
    CHECK(duration_from_text("5 min", asked) == minutes(5));
    CHECK(duration_from_text("1.5 h", asked) == hours(1.5));
    CHECK(speed_from_text("2 m/s", asked) == metres_per_second(2));
    CHECK(speed_from_text("6.5 ft/s", asked) == feet_per_second(6.5));
    CHECK(intensity_from_text("36 mm/h", asked) == millimetres_per_hour(36));
    CHECK(intensity_from_text("1.3 in/h", asked) == inches_per_hour(1.3));
    CHECK(fraction_from_text("0.5 %", asked) == 0.005);
}

TEST_CASE("blanks around the number and the unit do not matter") {
    CHECK(length("  20m ") == metres(20));
    CHECK(length("20  m") == metres(20));
}

TEST_CASE("a number without unit is refused with the right form and the units") {
    CHECK_THROWS_WITH(length("20"),
                      "width is \"20\", which has no unit; write a length such as \"20 m\" (units: m, km, cm, mm, "
                      "ft, in, yd, mi, us survey ft)");
}

TEST_CASE("a unit of another dimension is refused by name") {
    CHECK_THROWS_WITH(length("5 min"), Contains("min is the unit of a duration") && Contains("write a length"));
    CHECK_THROWS_WITH(speed_from_text("3 mm/h", asked), Contains("mm/h is the unit of a rainfall intensity"));
    CHECK_THROWS_WITH(intensity_from_text("3 m/s", asked), Contains("m/s is the unit of a speed"));
}

TEST_CASE("what is no number, or none that can be held, is refused") {
    CHECK_THROWS_WITH(length("wide"), Contains("does not begin with a number"));
    CHECK_THROWS_WITH(length(""), Contains("does not begin with a number"));
    CHECK_THROWS_WITH(length("nan m"), Contains("not a finite number"));
    CHECK_THROWS_WITH(length("inf m"), Contains("not a finite number"));
    CHECK_THROWS_WITH(length("1e400 m"), Contains("too large"));
    CHECK_THROWS_WITH(length("1e308 km"), Contains("too large"));
    CHECK_THROWS_WITH(length("20 furlongs"), Contains("\"furlongs\" is not known"));
    CHECK_THROWS_WITH(length("1,5 m"), Contains("decimal point"));
}

TEST_CASE("the caller says which signs are right") {
    CHECK_THROWS_WITH(length("0 m"), Contains("above zero"));
    CHECK_THROWS_WITH(length("-1 m"), Contains("above zero"));
    const QuantityAsked not_negative{.subject = "width", .sign = Sign::not_negative};
    CHECK(length_from_text("0 m", not_negative) == metres(0));
    CHECK_THROWS_WITH(length_from_text("-1 m", not_negative), Contains("must not be negative"));
    CHECK(length_from_text("-1 m", {.subject = "width", .sign = Sign::any}) == metres(-1));
}

TEST_CASE("a quantity that cannot be read is the fault of the inputs") {
    try {
        (void)length("20");
        FAIL("a bare number was taken");
    } catch (const Error& error) {
        CHECK(error.fault() == Fault::inputs);
    }
}

TEST_CASE("a bare number may have nothing behind it") {
    CHECK(number_from_text(" 0.15 ", asked) == 0.15);
    CHECK_THROWS_WITH(number_from_text("0.15 m", asked), Contains("more than a number"));
}

TEST_CASE("a power law is read with its unit of area") {
    const PowerLaw law = power_law_from_text("2.70 m * km2^0.352", asked);
    CHECK(law == PowerLaw{.coefficient = metres(2.70), .unit = square_kilometres(1), .exponent = 0.352});
    CHECK(law(square_kilometres(1)) == metres(2.70));
    CHECK(power_law_from_text("11.89 ft*mi2^0.43", asked).unit == square_miles(1));
}

TEST_CASE("a plain length is a power law that no area changes") {
    const PowerLaw law = power_law_from_text("3 m", asked);
    CHECK(law(hectares(1)) == metres(3));
    CHECK(law(square_kilometres(500)) == metres(3));
}

TEST_CASE("a power law of another form is refused with the right one") {
    for (const auto* text : {"2.7 m * km2", "2.7 m * km^0.3", "2.7 m * ^0.3", "2.7 m * km2^3"})
        CHECK_THROWS_WITH(power_law_from_text(text, asked), Contains("\"2.70 m * km2^0.352\""));
    CHECK_THROWS_WITH(power_law_from_text("2.7 * km2^0.3", asked), Contains("has no unit"));
    CHECK_THROWS_WITH(power_law_from_text("2.7 m * km2^-0.3", asked), Contains("must not be negative"));
    CHECK_THROWS_WITH(power_law_from_text("2.7 m * km2^nan", asked), Contains("not a finite number"));
}

}  // namespace
}  // namespace rillclock
