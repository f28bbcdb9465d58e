#include "rillclock/rainfall/rain_table_text.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <string>

namespace rillclock {
namespace {

using Catch::Contains;

const std::string table =
    "duration_min,intensity_2yr_in_h,intensity_10yr_in_h\n"
    "5,4.8,6.9\n"
    "60,1.5,2.3\n"
    "1440,0.15,0.24\n";

RainCurve curve(const std::string& text, double years) {
    return rain_from_text(text, "rain.csv").curve(years, seconds(0));
}

std::string table_with(const std::string& wanted, const std::string& instead) {
    std::string text = table;
    const auto place = text.find(wanted);
    REQUIRE(place != std::string::npos);
    return text.replace(place, wanted.size(), instead);
}

TEST_CASE("a printed number is read back to the bit") {
    CHECK(curve(table, 2).at(minutes(5)) == inches_per_hour(4.8));
    CHECK(curve(table, 10).at(hours(1)) == inches_per_hour(2.3));
    CHECK(curve(table, 2).at(hours(24)) == inches_per_hour(0.15));
}

TEST_CASE("between durations the intensity is straight on log-log paper") {
    const double middle = std::sqrt(5.0 * 60.0);  // the middle of 5 and 60 in logarithms
    CHECK(in_inches_per_hour(curve(table, 2).at(minutes(middle))) == Approx(std::sqrt(4.8 * 1.5)).epsilon(1e-12));
}

TEST_CASE("between return periods the intensity is straight in the logarithm of the period") {
    const double middle = std::sqrt(2.0 * 10.0);
    CHECK(in_inches_per_hour(curve(table, middle).at(hours(1))) == Approx((1.5 + 2.3) / 2).epsilon(1e-12));
}

TEST_CASE("nearer to one return period the intensity is nearer to that one's") {
    // A quarter of the way from 2 to 10 years in logarithms.
    const double quarter = 2 * std::pow(5.0, 0.25);
    CHECK(in_inches_per_hour(curve(table, quarter).at(hours(1))) == Approx(1.5 + 0.25 * (2.3 - 1.5)).epsilon(1e-12));
}

TEST_CASE("shorter than the first duration the first is read, and the least time is never undercut") {
    CHECK(curve(table, 2).at(seconds(0)) == inches_per_hour(4.8));
    const RainCurve with_least = rain_from_table(table, "rain.csv").curve(2, hours(1));
    CHECK(with_least.at(minutes(7)) == inches_per_hour(1.5));
    CHECK(with_least.read_at(minutes(7)) == hours(1));
    CHECK(with_least.read_at(hours(3)) == hours(3));
}

TEST_CASE("longer than the last duration there is no rain") {
    CHECK_FALSE(curve(table, 2).within(minutes(1441)));
    CHECK_THROWS_WITH(curve(table, 2).at(minutes(1441)),
                      Contains("rain.csv holds no rain of 1441 min") && Contains("longest duration is 1440 min"));
}

TEST_CASE("a duration that is no number has no intensity") {
    CHECK_FALSE(curve(table, 2).within(seconds(std::nan(""))));
}

TEST_CASE("a return period outside the table's is refused with the table's") {
    for (const double years : {1.9, 10.1, 0.0, -2.0, std::nan("")})
        CHECK_THROWS_WITH(curve(table, years), Contains("rain.csv") && Contains("2, 10 years"));
}

TEST_CASE("depths and intensities, inches and millimetres, minutes and hours say the same rain") {
    const std::string depths = "duration_h,depth_2yr_mm,depth_10yr_mm\n1,38.1,58.42\n24,91.44,146.304\n";
    CHECK(in_inches_per_hour(curve(depths, 2).at(hours(1))) == Approx(1.5).epsilon(1e-12));
    CHECK(in_inches_per_hour(curve(depths, 10).at(hours(24))) == Approx(0.24).epsilon(1e-12));
    CHECK(rain_from_table(depths, "rain.csv").echo.unit == "mm");
}

TEST_CASE("the 2-year 24-hour depth is taken where the table reaches it") {
    CHECK(in_inches(*rain_from_table(table, "rain.csv").two_year_24_hour()) == Approx(3.6).epsilon(1e-12));
    const std::string short_table = "duration_min,intensity_2yr_in_h\n5,4.8\n60,1.5\n";
    CHECK_FALSE(rain_from_table(short_table, "rain.csv").two_year_24_hour());
    const std::string long_table = "duration_h,intensity_2yr_in_h\n48,0.1\n96,0.06\n";
    CHECK_FALSE(rain_from_table(long_table, "rain.csv").two_year_24_hour());
    const std::string rare_table = "duration_h,intensity_10yr_in_h\n1,4.8\n24,1.5\n";
    CHECK_FALSE(rain_from_table(rare_table, "rain.csv").two_year_24_hour());
}

TEST_CASE("an implausible 2-year 24-hour depth is a slip of unit") {
    const std::string slip = "duration_h,depth_2yr_in\n1,38\n24,91\n";
    CHECK_THROWS_WITH(rain_from_table(slip, "rain.csv").two_year_24_hour(),
                      Contains("2-year 24-hour depth is 91 in") && Contains("check the unit"));
}

TEST_CASE("a header that does not name its units is refused with the right form") {
    CHECK_THROWS_WITH(rain_from_table(table_with("duration_min", "duration"), "rain.csv"),
                      Contains("rain.csv") && Contains("\"duration\"") && Contains("duration_min,intensity_2yr_in_h"));
    for (const char* bad : {"intensity_2yr", "intensity_2yr_in", "depth_2yr_in_h", "2yr_in_h", "intensity_yr_in_h",
                            "intensity_2_in_h", "intensity_nanyr_in_h"}) {
        INFO(bad);
        CHECK_THROWS_WITH(rain_from_table(table_with("intensity_2yr_in_h", bad), "rain.csv"),
                          Contains("\"" + std::string(bad) + "\"") && Contains("intensity_<years>yr_mm_h"));
    }
    CHECK_THROWS_WITH(rain_from_table(table_with("intensity_10yr_in_h", "intensity_10yr_mm_h"), "rain.csv"),
                      Contains("is in mm/h where those before it are in in/h"));
}

TEST_CASE("return periods that do not rise are refused") {
    CHECK_THROWS_WITH(rain_from_table(table_with("10yr", "2yr"), "rain.csv"), Contains("line 1") && Contains("do not rise"));
    CHECK_THROWS_WITH(rain_from_table(table_with("_2yr", "_0yr"), "rain.csv"), Contains("line 1") && Contains("above zero"));
}

TEST_CASE("a table with one row is refused") {
    CHECK_THROWS_WITH(rain_from_table("duration_min,intensity_2yr_in_h\n5,4.8\n", "rain.csv"),
                      Contains("rain.csv, line 1") && Contains("1 durations"));
    CHECK_THROWS_WITH(rain_from_table("duration_min\n5\n60\n", "rain.csv"), Contains("no return period"));
}

TEST_CASE("numbers that cannot be rain or a duration are refused with line and column") {
    for (const char* bad : {"0", "-1", "nan", "inf", "many", ""}) {
        INFO(bad);
        CHECK_THROWS_WITH(rain_from_table(table_with("1.5", bad), "rain.csv"),
                          Contains("rain.csv, line 3, column 2 (intensity_2yr_in_h)"));
        CHECK_THROWS_WITH(rain_from_table(table_with("1440", bad), "rain.csv"),
                          Contains("rain.csv, line 4, column 1 (duration_min)"));
    }
}

TEST_CASE("falling durations are refused") {
    CHECK_THROWS_WITH(rain_from_table(table_with("1440", "60"), "rain.csv"),
                      Contains("rain.csv, line 4") && Contains("rising order"));
}

TEST_CASE("rain that falls with the return period is refused") {
    CHECK_THROWS_WITH(rain_from_table(table_with("2.3", "1.4"), "rain.csv"),
                      Contains("rain.csv, line 3") && Contains("60 min, 10 years"));
}

TEST_CASE("a depth that falls with duration is refused, but not by what three digits hide") {
    CHECK_THROWS_WITH(rain_from_table(table_with("0.15", "0.05"), "rain.csv"),
                      Contains("rain.csv, line 4") && Contains("falls below that of 60 min"));
    const std::string rounded = "duration_h,intensity_2yr_in_h\n1,1.005\n2,0.50\n";
    CHECK(rain_from_table(rounded, "rain.csv").curve(2, seconds(0)).at(hours(2)) == inches_per_hour(0.5));
}

TEST_CASE("depths have no such excuse") {
    CHECK_THROWS_WITH(rain_from_table("duration_h,depth_2yr_in\n1,1.005\n2,1.00\n", "rain.csv"),
                      Contains("rain.csv, line 3") && Contains("falls below that of 1 h"));
}

}  // namespace
}  // namespace rillclock
