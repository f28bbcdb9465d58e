#include "rillclock/rainfall/atlas14_text.hpp"

#include <catch2/catch.hpp>

#include <regex>
#include <string>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

// Every number below is invented; only the layout is that of the server's files.
const std::string depth_file =
    "Point precipitation frequency estimates (inches)\n"
    "NOAA Atlas 14 Volume 99 Version 1\n"
    "Data type: Precipitation depth\n"
    "Time series type: Partial duration\n"
    "Project area: Nowhere States\n"
    "Location name (ESRI Maps): None\n"
    "Station Name: None\n"
    "Latitude: 12.5 Degree\n"
    "Longitude: -34.5 Degree\n"
    "Elevation (USGS): None None\n"
    "\n"
    "\n"
    "PRECIPITATION FREQUENCY ESTIMATES\n"
    "by duration for ARI (years):, 1,2,10\n"
    "5-min:, 0.30,0.40,0.60\n"
    "60-min:, 1.00,1.50,2.40\n"
    "24-hr:, 2.00,3.00,5.00\n"
    "2-day:, 2.50,3.50,6.00\n"
    "\n"
    "Date/time (GMT):  Mon Jan  1 00:00:00 2024\n"
    "pyRunTime:  0.01\n";

std::string with(const std::string& wanted, const std::string& instead) {
    std::string text = depth_file;
    const auto place = text.find(wanted);
    REQUIRE(place != std::string::npos);
    return text.replace(place, wanted.size(), instead);
}

Intensity read(const std::string& text, double years, Duration duration) {
    return rain_from_atlas14(text, "rain.csv").curve(years, seconds(0)).at(duration);
}

TEST_CASE("depths in inches become intensities") {
    CHECK(in_inches_per_hour(read(depth_file, 2, minutes(60))) == Approx(1.5).epsilon(1e-14));
    CHECK(in_inches_per_hour(read(depth_file, 10, minutes(5))) == Approx(7.2).epsilon(1e-14));
    CHECK(in_inches_per_hour(read(depth_file, 1, hours(48))) == Approx(2.5 / 48).epsilon(1e-14));
}

TEST_CASE("the echo of an Atlas 14 file says all that a slip would change") {
    const RainEcho echo = rain_from_atlas14(depth_file, "rain.csv").echo;
    CHECK(sentence(echo) ==
          "rain.csv: NOAA Atlas 14 point file (NOAA Atlas 14 Volume 99 Version 1, Nowhere States, 12.5 Degree, -34.5 "
          "Degree), estimate, depth in inches, partial duration, 5 min to 2 days, 1, 2, 10 years");
}

TEST_CASE("the 2-year 24-hour depth of an Atlas 14 file is its printed number") {
    const auto depth = rain_from_atlas14(depth_file, "rain.csv").two_year_24_hour();
    REQUIRE(depth);
    CHECK(in_inches(*depth) == Approx(3.0).epsilon(1e-14));
}

TEST_CASE("a byte order mark and line ends of the other kind change nothing") {
    const std::string crlf = "\xEF\xBB\xBF" + std::regex_replace(depth_file, std::regex("\n"), "\r\n");
    for (const double years : {1.0, 2.0, 10.0})
        CHECK(read(crlf, years, minutes(17)) == read(depth_file, years, minutes(17)));
    CHECK(sentence(rain_from_atlas14(crlf, "rain.csv").echo) ==
          sentence(rain_from_atlas14(depth_file, "rain.csv").echo));
}

TEST_CASE("a file in millimetres is read in millimetres") {
    const std::string text = with("(inches)", "(millimeters)");
    CHECK(in_millimetres_per_hour(read(text, 2, minutes(60))) == Approx(1.5).epsilon(1e-14));
    CHECK(rain_from_atlas14(text, "rain.csv").echo.unit == "millimetres");
}

const std::string intensity_rows =
    "5-min:, 90.1,120,180\n60-min:, 25.0,38.0,61.0\n24-hr:, 2.10,3.20,5.30\n2-day:, 1.30,1.90,3.20\n";

std::string intensity_file(const std::string& unit) {
    std::string text = with("(inches)", "(" + unit + ")");
    text.replace(text.find("Precipitation depth"), 19, "Precipitation intensity");
    const auto first = text.find("5-min");
    return text.replace(first, text.find("\n\nDate") + 1 - first, intensity_rows);
}

TEST_CASE("a file of intensities is read as intensities in its unit") {
    CHECK(read(intensity_file("millimeters/hour"), 2, minutes(5)) == millimetres_per_hour(120));
    CHECK(read(intensity_file("mm/hr"), 10, hours(24)) == millimetres_per_hour(5.3));
    CHECK(read(intensity_file("inches/hour"), 1, minutes(60)) == inches_per_hour(25));
}

TEST_CASE("annual maxima with apostrophes are read as return periods") {
    std::string text = with("Partial duration", "Annual maximum");
    text.replace(text.find("by duration for ARI (years):, 1,2,10"), 36, "by duration for AEP:, '1/2,'1/5,'1/10");
    const RainSource rain = rain_from_atlas14(text, "rain.csv");
    CHECK(rain.echo.return_periods == std::vector<double>{2, 5, 10});
    CHECK(rain.echo.series == "annual maximum");
    CHECK_THROWS_WITH(rain.curve(1, seconds(0)), Contains("2, 5, 10 years"));
}

const std::string bounds =
    "\nPRECIPITATION FREQUENCY ESTIMATES AT UPPER BOUND OF 90% CONFIDENCE INTERVAL\n"
    "by duration for ARI (years):, 1,2,10\n5-min:, 0.40,0.50,0.80\n60-min:, 1.20,1.90,3.00\n"
    "\nPRECIPITATION FREQUENCY ESTIMATES AT LOWER BOUND OF 90% CONFIDENCE INTERVAL\n"
    "by duration for ARI (years):, 1,2,10\n5-min:, 0.20,0.30,0.50\n60-min:, 0.80,1.20,1.90\n";

TEST_CASE("of three blocks the one asked for is read, the estimate by default") {
    const std::string text = with("\nDate/time", bounds + "\nDate/time");
    const auto two_year_hour = [&](Atlas14Block block) {
        return in_inches_per_hour(rain_from_atlas14(text, "rain.csv", block).curve(2, seconds(0)).at(hours(1)));
    };
    CHECK(in_inches_per_hour(read(text, 2, hours(1))) == Approx(1.5));
    CHECK(two_year_hour(Atlas14Block::estimate) == Approx(1.5));
    CHECK(two_year_hour(Atlas14Block::upper_bound) == Approx(1.9));
    CHECK(two_year_hour(Atlas14Block::lower_bound) == Approx(1.2));
    CHECK(rain_from_atlas14(text, "rain.csv", Atlas14Block::upper_bound).echo.block == "upper bound");
}

TEST_CASE("a block that is not there is asked for in vain") {
    CHECK_THROWS_WITH(rain_from_atlas14(depth_file, "rain.csv", Atlas14Block::lower_bound),
                      Contains("rain.csv holds no block of the lower bound"));
}

TEST_CASE("a block read by its title may call itself a bound alone, and is told where it is one") {
    std::string text = with("\nDate/time", bounds + "\nDate/time");
    const std::string title = "PRECIPITATION FREQUENCY ESTIMATES AT UPPER BOUND OF 90% CONFIDENCE INTERVAL";
    text.replace(text.find(title), title.size(), "Upper bound of the 90% confidence interval");
    const RainSource rain = rain_from_text(text, "rain.csv", Atlas14Block::upper_bound);
    CHECK(in_inches_per_hour(rain.curve(2, seconds(0)).at(hours(1))) == Approx(1.9));
    REQUIRE(rain.notices.size() == 1);
    CHECK(rain.notices.front().code == "rain-bound");
    CHECK(rain_from_text(text, "rain.csv").notices.empty());
}

TEST_CASE("a block that is there twice, or has no title, is refused with its line") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("\nDate/time", "\nPRECIPITATION FREQUENCY ESTIMATES\n"
                                             "by duration for ARI (years):, 1,2,10\n5-min:, 1,2,3\n\nDate/time"),
                                        "rain.csv"),
                      Contains("rain.csv, line 21: a second block of the estimate begins"));
    CHECK_THROWS_WITH(rain_from_atlas14(with("PRECIPITATION FREQUENCY ESTIMATES\n", ""), "rain.csv"),
                      Contains("rain.csv, line 10") && Contains("stands where a block has its title"));
}

TEST_CASE("a table has no blocks to choose from") {
    CHECK_THROWS_WITH(rain_from_text("duration_min,intensity_10yr_in_h\n5,6\n60,2\n", "rain.csv", Atlas14Block::estimate),
                      Contains("rain.csv is no NOAA Atlas 14 point file") && Contains("leave out block"));
}

TEST_CASE("annual maxima are told, since manuals mean partial durations") {
    std::string text = with("Partial duration", "Annual maximum");
    text.replace(text.find("by duration for ARI (years):, 1,2,10"), 36, "by duration for AEP:, 1/2, 1/5, 1/10");
    const RainSource rain = rain_from_atlas14(text, "rain.csv");
    CHECK(rain.echo.return_periods == std::vector<double>{2, 5, 10});
    REQUIRE(rain.notices.size() == 1);
    CHECK(rain.notices.front().code == "rain-annual-maximum");
}

TEST_CASE("the server's answer for a place without coverage is understood") {
    const std::string answer = "Error 3.0: Selected location is not within a project area\n";
    CHECK_THROWS_WITH(rain_from_text(answer, "rain.csv"),
                      Contains("rain.csv, line 1") && Contains("no estimates for this place") && Contains("a formula"));
}

TEST_CASE("a web page in place of the file is called that") {
    CHECK_THROWS_WITH(rain_from_text("<!DOCTYPE html><html></html>", "rain.csv"), Contains("a web page"));
}

TEST_CASE("an empty file is called empty") {
    CHECK_THROWS_WITH(rain_from_atlas14("\n \r\n", "rain.csv"), Contains("rain.csv is empty"));
}

TEST_CASE("heading lines that contradict one another are refused") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("Precipitation depth", "Precipitation intensity"), "rain.csv"),
                      Contains("rain.csv, line 3") && Contains("the first line says inches"));
    CHECK_THROWS_WITH(rain_from_atlas14(with("Partial duration", "Annual maximum"), "rain.csv"),
                      Contains("rain.csv, line 14") && Contains("by duration for AEP:"));
    CHECK_THROWS_WITH(rain_from_atlas14(with(" 1,2,10", " '1/2,'1/5,'1/10"), "rain.csv"),
                      Contains("rain.csv, line 14") && Contains("is not a return period"));
}

TEST_CASE("an unknown unit, series or a missing heading is refused") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("(inches)", "(cubits)"), "rain.csv"),
                      Contains("rain.csv, line 1") && Contains("(cubits)"));
    CHECK_THROWS_WITH(rain_from_atlas14(with("Partial duration", "Peaks"), "rain.csv"),
                      Contains("rain.csv, line 4") && Contains("Peaks"));
    CHECK_THROWS_WITH(rain_from_atlas14(with("Data type: Precipitation depth\n", ""), "rain.csv"),
                      Contains("data type:"));
}

TEST_CASE("a depth that falls with duration is refused with its line") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("24-hr:, 2.00", "24-hr:, 0.90"), "rain.csv"),
                      Contains("rain.csv, line 17") && Contains("24-hr, 1 years") && Contains("falls below"));
}

TEST_CASE("a depth that falls with return period is refused with its line") {
    CHECK_THROWS_WITH(
        rain_from_atlas14(with("60-min:, 1.00,1.50", "60-min:, 1.00,0.95"), "rain.csv"),
        Contains("rain.csv, line 16") && Contains("60-min, 2 years") && Contains("shorter return period"));
}

TEST_CASE("numbers that cannot be rain are refused with their line") {
    for (const char* bad : {"0", "-0.4", "nan", "inf", "1e999", "x", ""}) {
        INFO(bad);
        CHECK_THROWS_WITH(rain_from_atlas14(with("0.40", bad), "rain.csv"), Contains("rain.csv, line 15, number 2"));
    }
}

TEST_CASE("a row that is too short and a table of one row are refused") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("1.00,1.50,2.40", "1.00,1.50"), "rain.csv"),
                      Contains("rain.csv, line 16") && Contains("2 numbers"));
    const std::string one = with("60-min:, 1.00,1.50,2.40\n24-hr:, 2.00,3.00,5.00\n2-day:, 2.50,3.50,6.00\n", "");
    CHECK_THROWS_WITH(rain_from_atlas14(one, "rain.csv"), Contains("rain.csv, line 14") && Contains("1 durations"));
}

TEST_CASE("durations out of order are refused") {
    CHECK_THROWS_WITH(rain_from_atlas14(with("60-min:", "3-min:"), "rain.csv"),
                      Contains("rain.csv, line 16") && Contains("rising order"));
}

TEST_CASE("intensities that rise with duration are taken for depths under a wrong heading") {
    std::string text = with("(inches)", "(inches/hour)");
    text.replace(text.find("Precipitation depth"), 19, "Precipitation intensity");
    CHECK_THROWS_WITH(rain_from_atlas14(text, "rain.csv"),
                      Contains("rain.csv, line 16") && Contains("depths or intensities"));
}

}  // namespace
}  // namespace rillclock
