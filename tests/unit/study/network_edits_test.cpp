#include "rillclock/study/edited_network.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

using Catch::Contains;

constexpr const char* header = "from,to,length,diameter,n,slope,invert_from,invert_to\n";

std::vector<StatedPipe> pipes(const std::string& rows) { return parse_pipes(header + rows, "pipes.csv"); }

TEST_CASE("a pipe falls by its slope or by its inverts") {
    const auto read = pipes("A,B,400 ft,12 in,0.013,0.0085,,\nB,C,100 m,0.5 m,0.013,,10.5 m,10 m\n");
    REQUIRE(read.size() == 2);
    CHECK(read[0].bed.slope == 0.0085);
    CHECK(in_feet(read[0].length) == Approx(400));
    CHECK(in_inches(read[0].pipe.diameter) == Approx(12));
    CHECK(read[1].bed.slope == Approx(0.005));
}

TEST_CASE("what is wrong with a pipe is said with its line and what to write") {
    CHECK_THROWS_WITH(pipes("A,B,400,12 in,0.013,0.01,,\n"), Contains("pipes.csv, line 2 (length)") && Contains("120 ft"));
    CHECK_THROWS_WITH(pipes("A,B,4 m,1 m,0.013,,9 m,10 m\n"), Contains("invert_from") && Contains("must fall"));
    CHECK_THROWS_WITH(pipes("A,B,4 m,1 m,0.013,0.01,9 m,\n"), Contains("beside inverts"));
    CHECK_THROWS_WITH(pipes("A,A,4 m,1 m,0.013,0.01,,\n"), Contains("the point that the pipe comes from"));
    CHECK_THROWS_WITH(pipes("A,B,4 m,1 m,0.013,0.01,,\nA,C,4 m,1 m,0.013,0.01,,\n"), Contains("line 3") && Contains("one way on"));
    CHECK_THROWS_WITH(pipes("A,B,4 m,1 m,1.3,0.01,,\n"), Contains("must not pass 1"));
    CHECK_THROWS_WITH(pipes(""), Contains("holds no pipe"));
    CHECK_THROWS_WITH(parse_pipes("from,to,length,diametre,n\n", "p.csv"), Contains("diametre") && Contains("did you mean diameter?"));
    CHECK_THROWS_WITH(parse_pipes("from,to,length,n\n", "p.csv"), Contains("the column diameter is missing"));
}

TEST_CASE("an override states what it states and leaves the rest") {
    const auto read = parse_overrides("point,time,way_time,c\nMill,12 min,,\nFord,,0 min,0.4\n", "o.csv");
    REQUIRE(read.size() == 2);
    CHECK(read[0].time == minutes(12));
    CHECK_FALSE(read[0].way_time);
    CHECK(read[1].way_time == minutes(0));
    CHECK(read[1].coefficient == 0.4);
    CHECK(parse_overrides("point,sheet_length,n\nMill,80 ft,0.15\n", "o.csv")[0].overland.n == 0.15);
    CHECK_THROWS_WITH(parse_overrides("point,time,n\nMill,3 min,0.15\n", "o.csv"), Contains("beside a sheet_length or n"));
    CHECK_THROWS_WITH(parse_overrides("point,c\nMill,1.2\n", "o.csv"), Contains("o.csv, line 2 (c)") && Contains("between 0 and 1"));
    CHECK_THROWS_WITH(parse_overrides("point,c\nMill,\n", "o.csv"), Contains("has no value beside it"));
    CHECK_THROWS_WITH(parse_overrides("point,c\nMill,0.1\nMill,0.2\n", "o.csv"), Contains("line 3") && Contains("stands above already"));
}

Outlet outlet_of(PointNumber number, const std::string& name, PointNumber next, double to_root_min, double own_min) {
    Outlet made;
    made.number = number;
    made.point.name = name;
    made.next = next;
    made.time_to_root = {.fixed = to_fixed(60 * to_root_min)};
    made.own_front.add({.cell = number, .time = {.fixed = to_fixed(60 * (to_root_min + own_min))}});
    return made;
}

/// B and C drain to A over the ground, D to C.
std::vector<Outlet> four() { return {outlet_of(1, "A", 0, 0, 10), outlet_of(2, "B", 1, 6, 20), outlet_of(3, "C", 1, 4, 12), outlet_of(4, "D", 3, 13, 5)}; }

double minutes_at(const DrainageNetwork& network, PointNumber number) { return from_fixed(network.arrivals_at(number, 1.0).time) / 60; }

TEST_CASE("a pipe leads all that arrives at its inlet to its end, in its own time") {
    const auto stated = pipes("D,B,600 m,1 m,0.013,0.01,,\n");
    const std::vector<Outlet> outlets = four();
    const auto edits = point_edits(stated, {}, outlets);
    const std::vector<Speed> velocities(4, metres_per_second(2));  // 5 min in the pipe
    const DrainageNetwork network = edited_network(outlets, edits, velocities);
    CHECK(network.above(3) == std::vector<PointNumber>{3});
    CHECK(network.above(2) == std::vector<PointNumber>{2, 4});
    CHECK(minutes_at(network, 3) == 12);
    CHECK(minutes_at(network, 2) == 20);  // 5 + 5 of D come before
    CHECK(minutes_at(network, 1) == 26);
    CHECK(marks_of(edits[3]) == "pipe");
    CHECK(marks_of(edits[0]).empty());
}

TEST_CASE("a stated time and way act on all that lies below, and nowhere else") {
    const auto overrides = parse_overrides("point,time,way_time,c\nD,40 min,,\nC,,10 min,0.5\n", "o.csv");
    const std::vector<Outlet> outlets = four();
    const auto edits = point_edits({}, overrides, outlets);
    const DrainageNetwork network = edited_network(outlets, edits, std::vector<Speed>(4));
    CHECK(minutes_at(network, 4) == 40);
    CHECK(minutes_at(network, 3) == 49);
    CHECK(minutes_at(network, 1) == 59);
    CHECK(minutes_at(network, 2) == 20);
    CHECK(marks_of(edits[2]) == "C, way");
}

TEST_CASE("names that no point has, circles and ways to nowhere are refused") {
    const std::vector<Outlet> outlets = four();
    CHECK_THROWS_WITH(point_edits(pipes("D,Bb,600 m,1 m,0.013,0.01,,\n"), {}, outlets), Contains("line 2") && Contains("'Bb'"));
    CHECK_THROWS_WITH(point_edits(pipes("C,D,600 m,1 m,0.013,0.01,,\n"), {}, outlets), Contains("closes a circle of points, C > D > C"));
    const auto way = parse_overrides("point,way_time\nA,3 min\n", "o.csv");
    CHECK_THROWS_WITH(point_edits({}, way, outlets), Contains("below which there is no point"));
}

TEST_CASE("a pipe that runs part full has the velocity of its depth, and no more than full when it is too small") {
    const auto stated = pipes("A,B,400 ft,12 in,0.013,0.0085,,\n");
    const Speed full = pipe_velocity(stated[0], std::nullopt);
    const Discharge flow = 0.5 * full_bore_capacity(stated[0].pipe, stated[0].bed);
    CHECK(pipe_velocity(stated[0], flow) / full == Approx(1.0).epsilon(1e-9));  // half the capacity runs half full, at the same hydraulic radius
    CHECK(pipe_velocity(stated[0], 0.2 * flow) < full);
    CHECK(pipe_velocity(stated[0], 4.0 * flow) == full);
}

}  // namespace
}  // namespace rillclock
