#include <catch2/catch.hpp>

#include <cmath>
#include <random>
#include <string>
#include <string_view>

#include "rillclock/core/error.hpp"
#include "rillclock/rainfall/atlas14_text.hpp"
#include "rillclock/rainfall/rain_table_text.hpp"

namespace rillclock {
namespace {

// Invented numbers in the layout of the server's files.
const std::string atlas =
    "Point precipitation frequency estimates (inches)\nNOAA Atlas 14 Volume 99 Version 1\n"
    "Data type: Precipitation depth\nTime series type: Partial duration\nProject area: Nowhere\n\n"
    "PRECIPITATION FREQUENCY ESTIMATES\nby duration for ARI (years):, 1,2,10\n"
    "5-min:, 0.30,0.40,0.60\n60-min:, 1.00,1.50,2.40\n24-hr:, 2.00,3.00,5.00\n";
const std::string short_table = "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n5,4.8,6.9\n60,1.5,2.3\n";
const std::string formula = "i[in/h] = b / (t[min] + d)^e; b = 60, d = 10, e = 0.8";

/// Whether rain of that text is a positive number between its ends.
bool is_rain(const RainSource& rain) {
    const double period = rain.echo.return_periods.front();
    const double si = rain.curve(period, seconds(0)).at(rain.echo.range.first * 1.5).si();
    return si > 0 && std::isfinite(si);
}

/// Reads a text; true where it is rain or is refused as an input.
template <class Reader>
bool is_read_or_refused(const Reader& reader, const std::string& text) {
    try {
        return reader(text);
    } catch (const Error& error) {
        return error.fault() == Fault::inputs;
    }
}

template <class Reader>
void spoil(const std::string& whole, const Reader& reader) {
    for (std::size_t length = 0; length < whole.size(); ++length)
        REQUIRE(is_read_or_refused(reader, whole.substr(0, length)));
    std::mt19937 random(whole.size());
    using namespace std::string_view_literals;
    constexpr std::string_view letters = "\0\n\r\"',;:-.+0917eE^/()[]tTi%<\xEF\xFF "sv;
    for (int draw = 0; draw < 5000; ++draw) {
        std::string text = whole;
        for (int change = 0; change < 1 + draw % 3; ++change)
            text[random() % text.size()] = letters[random() % letters.size()];
        INFO(text);
        REQUIRE(is_read_or_refused(reader, text));
    }
}

TEST_CASE("a spoiled Atlas 14 file is read as rain or refused, and nothing worse") {
    spoil(atlas, [](const std::string& text) { return is_rain(rain_from_text(text, "rain.csv")); });
}

TEST_CASE("a spoiled table is read as rain or refused, and nothing worse") {
    spoil(short_table, [](const std::string& text) { return is_rain(rain_from_text(text, "rain.csv")); });
}

TEST_CASE("a spoiled formula is read as rain or refused, and nothing worse") {
    spoil(formula, [](const std::string& text) {
        return intensity_formula_from_text(text, "formula")(minutes(10), 2).si() >= 0;
    });
}

TEST_CASE("the texts that are spoiled here are rain when whole") {
    CHECK(is_rain(rain_from_text(atlas, "rain.csv")));
    CHECK(is_rain(rain_from_text(short_table, "rain.csv")));
    CHECK(intensity_formula_from_text(formula, "formula")(minutes(10), 2) > Intensity::from_si(0));
}

}  // namespace
}  // namespace rillclock
