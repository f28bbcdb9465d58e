#include "rillclock/catchment/path_doubts.hpp"

#include <catch2/catch.hpp>

#include <vector>

namespace rillclock {
namespace {

PathPiece piece(Regime regime, double length_m, double speed_m_per_s) {
    PathPiece made;
    made.part.regime = regime;
    made.part.length_m = length_m;
    made.part.speed_m_per_s = speed_m_per_s;
    made.part.time.fixed = to_fixed(length_m / speed_m_per_s);
    return made;
}

PathPiece ponded(PathPiece made) {
    made.part.ponded = true;
    return made;
}

PathDoubts doubts(const std::vector<PathPiece>& pieces, const TravelRules& rules = {}) {
    return doubts_of({.classes = {}, .rules = rules}, pieces);
}

TEST_CASE("shallow flow may run 1000 ft, and no more, without a break") {
    CHECK(doubts({piece(Regime::shallow, 200, 1), piece(Regime::shallow, 104, 1)}).shallow_length.length_m == 0.0);
    const PathDoubts long_one = doubts({piece(Regime::shallow, 200, 1), piece(Regime::shallow, 204.8, 1)});
    CHECK(long_one.shallow_length.greatest == Approx(404.8));
    CHECK(long_one.shallow_length.length_m == Approx(100.0));
    CHECK(long_one.shallow_length.effect_s == Approx(100.0));
}

TEST_CASE("a channel breaks a stretch of shallow flow, and a pond neither breaks nor lengthens it") {
    const std::vector broken{piece(Regime::shallow, 200, 1), piece(Regime::channel, 10, 1), piece(Regime::shallow, 200, 1)};
    CHECK(doubts(broken).shallow_length.length_m == 0.0);
    const std::vector with_pond{piece(Regime::shallow, 200, 1), ponded(piece(Regime::shallow, 50, 1)), piece(Regime::shallow, 200, 1)};
    CHECK(doubts(with_pond).shallow_length.greatest == Approx(400.0));
}

TEST_CASE("shallow flow may run at 3 m/s and channels at 5 m/s, and no faster") {
    CHECK(doubts({piece(Regime::shallow, 10, 3)}).shallow_speed.length_m == 0.0);
    const PathDoubts shallow = doubts({piece(Regime::shallow, 30, 3.75)});
    CHECK(shallow.shallow_speed.length_m == 30.0);
    CHECK(shallow.shallow_speed.greatest == 3.75);
    CHECK(shallow.shallow_speed.effect_s == Approx(30 / 3.0 - 30 / 3.75));
    CHECK(doubts({piece(Regime::channel, 10, 5)}).channel_speed.length_m == 0.0);
    CHECK(doubts({piece(Regime::channel, 10, 6)}).channel_speed.effect_s == Approx(10 / 5.0 - 10 / 6.0));
    CHECK(doubts({ponded(piece(Regime::shallow, 10, 30))}).shallow_speed.length_m == 0.0);
}

TEST_CASE("a channel is supercritical where it outruns the wave of its mean depth") {
    TravelRules rules;
    rules.channel.depth = {.coefficient = metres(0.4), .unit = square_metres(1), .exponent = 0.0};
    const double celerity = 1.98057567;  // sqrt(9.80665 * 0.4)
    CHECK(doubts({piece(Regime::channel, 10, 1.98)}, rules).supercritical.length_m == 0.0);
    const Beyond fast = doubts({piece(Regime::channel, 10, 2 * celerity)}, rules).supercritical;
    CHECK(fast.greatest == Approx(2.0));
    CHECK(fast.effect_s == Approx(10 / celerity - 10 / (2 * celerity)));
}

TEST_CASE("the time of the head counts by length the piece in which the head ends") {
    // 5 % of 1000 m are 50 m: 20 m at 0.1 m/s, and 30 of the next 80 m at 0.5 m/s.
    const std::vector pieces{piece(Regime::shallow, 20, 0.1), piece(Regime::shallow, 80, 0.5), piece(Regime::channel, 900, 1)};
    CHECK(doubts(pieces).head_s == Approx(200.0 + 60.0));
}

}  // namespace
}  // namespace rillclock
