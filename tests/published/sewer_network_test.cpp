#include <catch2/catch.hpp>

#include <array>
#include <map>

#include "rillclock/catchment/drainage_network.hpp"
#include "rillclock/hydraulics/rational.hpp"

namespace rillclock {
namespace {

/// A line of the storm sewer in Ponce, Engineering Hydrology, table 4-2, and the subarea that enters at its upper end.
struct SewerLine {
    const char* from;
    PointNumber next;          ///< the line below; 0 the outfall
    double section_min;        ///< time in the section, as printed
    double time_min;           ///< at the upper end, as printed
    double area_ac;            ///< of all that drains to it, as printed
    double mean_c;
    double intensity_in_per_h;
    double flow_cfs;
};

constexpr std::array lines{
    SewerLine{"1-6", 2, 1.4, 20.0, 2.64, 0.30, 3.7, 2.93},   SewerLine{"1-5", 3, 1.2, 21.4, 6.25, 0.30, 3.6, 6.75},
    SewerLine{"1-4", 6, 1.2, 22.6, 10.13, 0.42, 3.4, 14.50}, SewerLine{"3-2", 5, 1.1, 20.0, 5.55, 0.30, 3.7, 6.16},
    SewerLine{"3-1", 6, 1.1, 21.1, 11.98, 0.30, 3.6, 12.92}, SewerLine{"1-3", 8, 1.1, 23.8, 26.03, 0.39, 3.3, 33.60},
    SewerLine{"2-1", 8, 1.4, 20.0, 2.52, 0.30, 3.7, 2.80},   SewerLine{"1-2", 9, 1.1, 24.9, 32.41, 0.41, 3.2, 42.50},
    SewerLine{"1-1", 0, 0.0, 26.0, 37.85, 0.44, 3.2, 53.20}};

constexpr double increments_ac[] = {2.64, 3.61, 3.88, 5.55, 6.43, 3.92, 2.52, 3.86, 5.44};

/// Inlets on the ground of one moment, joined by pipes alone.
DrainageNetwork sewer() {
    std::vector<NetworkPoint> points;
    for (const SewerLine& line : lines) {
        NetworkPoint point{.next = line.next, .to_root = {}, .own = {}};
        point.own.add({.cell = 0, .time = {.fixed = to_fixed(20 * 60)}});  // the inlet time
        point.stated_way = StepTime{.fixed = to_fixed(line.section_min * 60)};
        points.push_back(point);
    }
    return DrainageNetwork(std::move(points));
}

TEST_CASE("every time of a printed storm sewer follows from its inlet time and sections") {
    const DrainageNetwork network = sewer();
    for (PointNumber number = 1; number <= lines.size(); ++number) {
        const PointArrivals at = network.arrivals_at(number, 1.0);
        INFO(lines[number - 1].from);
        CHECK(from_fixed(at.time) / 60 == Approx(lines[number - 1].time_min).margin(1e-6));
    }
    CHECK(lines[network.arrivals_at(9, 1.0).last - 1].from == std::string("1-6"));
}

TEST_CASE("every flow of a printed storm sewer is C i A of all that drains to it") {
    const DrainageNetwork network = sewer();
    // The coefficients of single inlets are not printed: they are what makes the printed means.
    std::map<PointNumber, double> runoff_ac;
    for (PointNumber number = 1; number <= lines.size(); ++number) {
        double area = 0.0;
        double above = 0.0;
        for (const PointNumber subarea : network.above(number)) {
            area += increments_ac[subarea - 1];
            if (subarea != number) above += runoff_ac[subarea];
        }
        const SewerLine& line = lines[number - 1];
        runoff_ac[number] = line.mean_c * line.area_ac - above;
        INFO(line.from);
        CHECK(area == Approx(line.area_ac));
        CHECK(runoff_ac[number] > 0);
        const Discharge flow =
            rational_peak(acres(above + runoff_ac[number]), inches_per_hour(line.intensity_in_per_h), RationalConversion::rounded);
        // C and i are printed to two digits, and C i to three: the flow to a hundredth of itself.
        CHECK(in_cubic_feet_per_second(flow) == Approx(line.flow_cfs).epsilon(0.012));
    }
}

}  // namespace
}  // namespace rillclock
