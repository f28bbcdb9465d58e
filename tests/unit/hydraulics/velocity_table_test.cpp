#include "rillclock/hydraulics/velocity_table.hpp"

#include <catch2/catch.hpp>

#include <cmath>
#include <string>

namespace rillclock {
namespace {

using Catch::Contains;

const std::string chart =
    "slope_percent,short grass_ft_s,paved_m_s\n"
    "0.5,0.5,\n"
    "2,1.0,0.9\n"
    "8,3.0,1.8\n";

std::string with(const std::string& wanted, const std::string& instead) {
    std::string text = chart;
    const auto place = text.find(wanted);
    REQUIRE(place != std::string::npos);
    return text.replace(place, wanted.size(), instead);
}

TEST_CASE("a reading is read back to the bit, in its column's unit") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    CHECK(table.source == "chart.csv");
    CHECK(table.find("short grass")->at(0.02) == feet_per_second(1.0));
    CHECK(table.find("short grass")->at(0.08) == feet_per_second(3.0));
    CHECK(table.find("paved")->at(0.08) == metres_per_second(1.8));
    CHECK(table.find("gravel") == nullptr);
}

TEST_CASE("between two readings the line is straight on log-log paper") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    CHECK(in_feet_per_second(table.find("short grass")->at(0.04)) == Approx(std::sqrt(3.0)).epsilon(1e-12));
    CHECK(in_feet_per_second(table.find("short grass")->at(0.01)) == Approx(std::sqrt(0.5)).epsilon(1e-12));
}

TEST_CASE("beyond the readings the line goes on, and says that it does") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    const VelocityLine& paved = *table.find("paved");
    CHECK(in_metres_per_second(paved.at(0.32)) == Approx(3.6).epsilon(1e-12));
    CHECK(in_metres_per_second(paved.at(0.005)) == Approx(0.45).epsilon(1e-12));
    CHECK(in_feet_per_second(table.find("short grass")->at(0.32)) == Approx(9).epsilon(1e-12));
    CHECK(in_feet_per_second(table.find("short grass")->at(0.00125)) == Approx(0.25).epsilon(1e-12));
    CHECK_FALSE(paved.covers(0.32));
    CHECK_FALSE(paved.covers(0.005));
    CHECK(paved.covers(0.02));
    CHECK(paved.covers(0.08));
    CHECK_FALSE(paved.covers(std::nan("")));
}

TEST_CASE("a line with the power one half is that of a velocity at slope 1") {
    const std::string line = "slope,any_m_s\n0.01,0.5\n0.04,1\n";
    CHECK(in_metres_per_second(parse_velocity_table(line, "chart.csv").lines[0].at(1.0)) == Approx(5).epsilon(1e-12));
}

TEST_CASE("no slope has no velocity above zero, a slope against the flow is no number") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    CHECK(table.find("paved")->at(0) == metres_per_second(0));
    CHECK(std::isnan(table.find("paved")->at(-0.01).si()));
}

TEST_CASE("a header without units is refused with the right form") {
    CHECK_THROWS_WITH(parse_velocity_table(with("slope_percent", "grade"), "chart.csv"),
                      Contains("\"grade\"") && Contains("slope_percent,short grass_ft_s"));
    for (const char* bad : {"paved", "paved_mph", "_m_s"})
        CHECK_THROWS_WITH(parse_velocity_table(with("paved_m_s", bad), "chart.csv"),
                          Contains("\"" + std::string(bad) + "\"") && Contains("_ft_s or _m_s"));
    CHECK_THROWS_WITH(parse_velocity_table(with("short grass_ft_s", "paved_ft_s"), "chart.csv"),
                      Contains("two columns of \"paved\""));
    CHECK_THROWS_WITH(parse_velocity_table("slope\n0.1\n0.2\n", "chart.csv"), Contains("names no surface"));
}

TEST_CASE("numbers not above zero are refused with line and column") {
    for (const char* bad : {"0", "-1", "nan", "inf", "fast"}) {
        INFO(bad);
        CHECK_THROWS_WITH(parse_velocity_table(with("1.8", bad), "chart.csv"),
                          Contains("chart.csv, line 4, paved_m_s"));
        CHECK_THROWS_WITH(parse_velocity_table(with("8,3.0", std::string(bad) + ",3.0"), "chart.csv"),
                          Contains("chart.csv, line 4, slope_percent"));
    }
    CHECK_THROWS_WITH(parse_velocity_table(with("8,3.0", ",3.0"), "chart.csv"), Contains("line 4, slope_percent"));
}

TEST_CASE("slopes that do not rise and velocities that do not grow are refused with their line") {
    CHECK_THROWS_WITH(parse_velocity_table(with("8,3.0", "2,3.0"), "chart.csv"),
                      Contains("chart.csv, line 4") && Contains("does not rise"));
    CHECK_THROWS_WITH(parse_velocity_table(with("3.0", "1.0"), "chart.csv"),
                      Contains("chart.csv, line 4, short grass_ft_s") && Contains("does not grow"));
}

TEST_CASE("a line of one reading is refused") {
    CHECK_THROWS_WITH(parse_velocity_table(with("1.8", ""), "chart.csv"),
                      Contains("\"paved\"") && Contains("fewer than two points"));
}

TEST_CASE("the power between two points gives the line's velocity there and tells which points") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    const VelocityLine& grass = *table.find("short grass");
    for (const double slope : {0.001, 0.005, 0.012, 0.02, 0.05, 0.3}) {
        const VelocityLaw law = grass.law_at(slope);
        CHECK(law.at_slope_1.si() * std::pow(slope, law.exponent) == Approx(grass.at(slope).si()).epsilon(1e-12));
        CHECK(law.interval == (slope <= 0.02 ? 0U : 1U));
    }
    CHECK(grass.law_at(0.012).exponent == Approx(0.5));  // from 0.5 % to 2 % the velocity doubles
}

TEST_CASE("a power holds to the ends of its interval, a little beyond, and without end at the ends of the chart") {
    const VelocityTable table = parse_velocity_table(chart, "chart.csv");
    const VelocityLine& grass = *table.find("short grass");
    CHECK(grass.holds(0, 0.0001));
    CHECK(grass.holds(0, 0.02 * 1.00005));
    CHECK_FALSE(grass.holds(0, 0.021));
    CHECK(grass.holds(1, 0.02 * 0.99995));
    CHECK_FALSE(grass.holds(1, 0.019));
    CHECK(grass.holds(1, 5.0));
}

}  // namespace
}  // namespace rillclock
