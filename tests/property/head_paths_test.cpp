#include "rillclock/catchment/head_paths.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>
#include <memory>
#include <random>

#include "reference/drawings.hpp"
#include "reference/worked_terrain.hpp"
#include "rillclock/catchment/candidate_heads.hpp"
#include "rillclock/study/uncertainty.hpp"

namespace rillclock {
namespace {

/// Terrain of every regime, ponds and flats included, whose points are its roots and a few cells within.
struct Case {
    Elevations elevations;
    Ground ground;
    SurfaceTable surface;
    TravelRules rules;
};

double between(std::mt19937& random, double low, double high) { return std::uniform_real_distribution<double>(low, high)(random); }

/// Gives every other class a chart of three points in place of k.
void chart_some(SurfaceTable& surface, std::mt19937& random) {
    for (std::size_t i = 0; i < surface.classes.size(); i += 2) {
        VelocityLine line;
        double slope = 0.002;
        double speed = between(random, 0.02, 0.1);
        for (int point = 0; point < 3; ++point) {
            line.points.push_back({.slope = slope, .velocity = metres_per_second(speed)});
            slope *= between(random, 3, 20);
            speed *= between(random, 1.2, 4);
        }
        surface.classes[i].shallow_line = std::make_shared<const VelocityLine>(line);
    }
}

Case random_case(unsigned seed) {
    std::mt19937 random(seed);
    Case given{.elevations = drawings::random_terrain(random, seed % 2 == 0 ? 4 : 1000, seed % 3 == 0 ? 0.05 : 0.0),
               .ground = Ground::planar(metres(2 + seed % 4), metres(2 + seed % 5)), .surface = {}, .rules = {}};
    given.surface = worked::random_surface(random, given.elevations, seed % 4 == 0);
    if (seed % 3 == 1) chart_some(given.surface, random);
    given.rules.channel.from_area = square_metres(seed % 5 == 0 ? 1e9 : 600);
    given.rules.slope.vertical_step = metres(std::uniform_real_distribution<double>(0.01, 3)(random));
    given.rules.sheet.storm_factor = 4.0;
    given.rules.pond.depth = metres(0.5);
    return given;
}

/// A class whose shallow flow is so many times as fast.
void hasten(SurfaceHydraulics& surface, double factor) {
    surface.shallow_k = surface.shallow_k * factor;
    if (!surface.shallow_line) return;
    VelocityLine line = *surface.shallow_line;
    for (VelocityPoint& point : line.points) point.velocity = point.velocity * factor;
    surface.shallow_line = std::make_shared<const VelocityLine>(line);
}

/// Every figure changed that a setting may change.
TravelSetting changed(const Case& given, std::mt19937& random) {
    TravelSetting setting{.rules = given.rules, .classes = given.surface.classes};
    for (SurfaceHydraulics& surface : setting.classes) {
        surface.sheet_n *= between(random, 0.5, 2.0);
        hasten(surface, between(random, 0.7, 1.4));
    }
    setting.rules.sheet.limit = setting.rules.sheet.limit * between(random, 0.5, 1.5);
    setting.rules.sheet.storm_factor *= between(random, 0.9, 1.1);
    setting.rules.slope.overland_floor = between(random, 0.0003, 0.003);
    setting.rules.slope.channel_floor = between(random, 0.00003, 0.0003);
    setting.rules.pond.speed = metres_per_second(between(random, 0.2, 5.0));
    setting.rules.channel.n *= between(random, 0.6, 1.6);
    const double radius = between(random, 0.7, 1.4);
    setting.rules.channel.width.coefficient = setting.rules.channel.width.coefficient * radius;
    setting.rules.channel.depth.coefficient = setting.rules.channel.depth.coefficient * radius;
    return setting;
}

SettingBounds bounds(const Case& given) {
    return {.greatest_sheet_limit = given.rules.sheet.limit * 1.5, .least_overland_floor = 0.0003, .least_channel_floor = 0.00003,
            .greatest_overland_floor = 0.003, .greatest_channel_floor = 0.0003};
}

/// The terrain worked through over tiles, with points at its roots and at every hundredth cell.
class Run {
public:
    Run(const Case& given, const TravelSetting& setting)
        : store_(given.elevations.rows(), given.elevations.columns(), ElevationStore::Width::eight_bytes),
          surface_{.classes = setting.classes, .index = given.surface.index}, executor_(1, Executor::Kind::plain_threads),
          flow_(flow_forest_of(given.elevations, given.ground)),
          forest_(flow_.codes(), TileGrid(given.elevations.rows(), given.elevations.columns(), 7), executor_) {
        store_.write({.rows = store_.rows(), .columns = store_.columns()}, given.elevations.values());
        travel_ = std::make_unique<TiledTravel>(
            TiledGround{.forest = forest_, .ground = given.ground, .elevations = store_, .surface = surface_}, setting.rules, executor_);
        for (const RootArea& root : travel_->roots()) add_point(root.cell);
        for (Cell cell = 50; cell < flow_.codes().values().size(); cell += 100) {
            if (is_direction(flow_.codes()[cell])) add_point(cell);
        }
    }

    [[nodiscard]] const TiledTravel& travel() const { return *travel_; }
    [[nodiscard]] const std::vector<DesignPoint>& points() const { return points_; }
    [[nodiscard]] const FlowForest& flow() const { return flow_; }
    [[nodiscard]] TiledOwners owners() const {
        std::vector<CellLabel> labels;
        for (const DesignPoint& point : points_) labels.push_back({point.cell, static_cast<std::uint32_t>(labels.size() + 1)});
        return {forest_, labels, executor_};
    }
    /// What drains to each point and to none above it, by number − 1.
    [[nodiscard]] std::vector<FixedArea> own_areas(const TiledOwners& owners) const {
        std::vector<FixedArea> areas(points_.size(), 0);
        TileDesk desk;
        for (Tile tile = 0; tile < forest_.tiles().count(); ++tile) {
            desk.flow.read(forest_.codes(), forest_.tiles().window(tile));
            owners.read_tile(tile, desk);
            for (const Local local : desk.flow.order()) areas[desk.owner[local] - 1] += travel_->ground().ground.cell_area(desk.flow.row(local));
        }
        return areas;
    }
    /// Times to the root under the setting's own storm factor, by cell.
    [[nodiscard]] std::vector<double> seconds_to_root() const {
        std::vector<double> times(flow_.codes().values().size(), 0.0);
        TileDesk desk;
        for (Tile tile = 0; tile < forest_.tiles().count(); ++tile) {
            travel_->read_tile(tile, desk);
            for (const Local local : desk.flow.order()) {
                times[desk.flow.cell(local)] = in_seconds(desk.time_to_root(local).under(travel_->rules().sheet.storm_factor));
            }
        }
        return times;
    }

private:
    void add_point(Cell cell) {
        DesignPoint point;
        point.cell = cell;
        points_.push_back(point);
    }

    ElevationStore store_;
    SurfaceTable surface_;
    Executor executor_;
    FlowForest flow_;
    TiledForest forest_;
    std::unique_ptr<TiledTravel> travel_;
    std::vector<DesignPoint> points_;
};

TEST_CASE("kept paths have under any setting the times of a whole run under it, from every cell to the last point") {
    for (unsigned seed = 0; seed < 60; ++seed) {
        INFO("seed " << seed);
        const Case given = random_case(seed);
        const Run base(given, {.rules = given.rules, .classes = given.surface.classes});
        std::vector<Cell> heads(base.flow().order().begin(), base.flow().order().end());
        const HeadPaths paths(base.travel(), heads, base.points(), bounds(given));
        REQUIRE(paths.heads().size() == heads.size());
        std::mt19937 random(seed);
        for (int round = 0; round < 4; ++round) {
            const TravelSetting setting = changed(given, random);
            const std::vector<double> full = Run(given, setting).seconds_to_root();
            const PathTimes kept = paths.times(setting);
            for (std::size_t i = 0; i < heads.size(); ++i) {
                // The points hold every root, where the time is 0. Full runs round each of up to 400 steps to 2⁻²¹ s, and slopes to
                // single precision before the floor: 6·10⁻⁸ of the time.
                REQUIRE(kept.heads[i].under(setting.rules.sheet.storm_factor) ==
                        Approx(full[paths.heads()[i]]).epsilon(1e-6).margin(1e-3));
            }
        }
    }
}

TEST_CASE("heads that are dropped change no time of the others by a bit") {
    for (unsigned seed = 0; seed < 20; ++seed) {
        const Case given = random_case(seed);
        const TravelSetting own{.rules = given.rules, .classes = given.surface.classes};
        const Run base(given, own);
        std::vector<Cell> heads(base.flow().order().begin(), base.flow().order().end());
        HeadPaths paths(base.travel(), heads, base.points(), bounds(given));
        const PathTimes before = paths.times(own);
        std::vector<bool> wanted(heads.size(), false);
        std::vector<WayTime> expected;
        for (std::size_t i = 0; i < heads.size(); i += 3) {
            wanted[i] = true;
            expected.push_back(before.heads[i]);
        }
        paths.keep(wanted);
        const PathTimes after = paths.times(own);
        REQUIRE(after.heads.size() == expected.size());
        for (std::size_t i = 0; i < expected.size(); ++i) {
            REQUIRE(after.heads[i].storm_s == expected[i].storm_s);
            REQUIRE(after.heads[i].fixed_s == expected[i].fixed_s);
        }
        for (std::size_t i = 0; i < after.points.size(); ++i) REQUIRE(after.points[i].fixed_s == before.points[i].fixed_s);
    }
}

TEST_CASE("settings are timed in parts, between which a caller may stop") {
    const Case given = random_case(1);
    const TravelSetting own{.rules = given.rules, .classes = given.surface.classes};
    const Run base(given, own);
    const std::vector<Cell> heads(base.flow().order().begin(), base.flow().order().end());
    const HeadPaths paths(base.travel(), heads, base.points(), bounds(given));
    const std::vector<TravelSetting> settings(200, own);
    std::vector<std::int64_t> told;
    const Progress stopping([&](const StageProgress& progress) {
        told.push_back(progress.done);
        return told.size() < 3;
    });
    REQUIRE_THROWS_AS(heads_that_may_be_last(paths, settings, Executor(2), stopping), Cancelled);
    CHECK(told == std::vector<std::int64_t>{0, 32, 64});
    CHECK(heads_that_may_be_last(paths, settings, Executor(2)) == heads_that_may_be_last(paths, {own}, Executor(1)));
}

TEST_CASE("the last of the candidate heads arrives within one percent of the last of all cells, under settings not searched") {
    int checked = 0;
    for (unsigned seed = 0; seed < 40; ++seed) {
        INFO("seed " << seed);
        const Case given = random_case(seed);
        const Run base(given, {.rules = given.rules, .classes = given.surface.classes});
        std::mt19937 random(seed + 1000);
        std::vector<TravelSetting> searched;
        for (int i = 0; i < 12; ++i) searched.push_back(changed(given, random));
        const TiledOwners owners = base.owners();
        const std::vector<Cell> heads = candidate_heads(base.travel(), owners, base.own_areas(owners), searched);
        const HeadPaths paths(base.travel(), heads, base.points(), bounds(given));
        for (int round = 0; round < 10; ++round) {
            const TravelSetting setting = changed(given, random);
            const Run whole(given, setting);
            const std::vector<double> full = whole.seconds_to_root();
            const PathTimes kept = paths.times(setting);
            std::vector<double> last(base.points().size(), 0.0);
            for (std::size_t i = 0; i < kept.heads.size(); ++i) {
                double& time = last[paths.owners()[i] - 1];
                time = std::max(time, kept.heads[i].under(setting.rules.sheet.storm_factor));
            }
            std::vector<double> last_of_all(base.points().size(), 0.0);
            TileDesk desk;
            const TiledForest& forest = base.travel().ground().forest;
            for (Tile tile = 0; tile < forest.tiles().count(); ++tile) {
                desk.flow.read(forest.codes(), forest.tiles().window(tile));
                owners.read_tile(tile, desk);
                for (const Local local : desk.flow.order()) {
                    bool takes_in = false;
                    base.flow().for_each_upstream(desk.flow.cell(local), [&](Cell) { takes_in = true; });
                    if (takes_in) continue;
                    double& time = last_of_all[desk.owner[local] - 1];
                    time = std::max(time, full[desk.flow.cell(local)]);
                }
            }
            for (std::size_t i = 0; i < last.size(); ++i) {
                REQUIRE(last[i] >= 0.99 * last_of_all[i] - 1e-3);
                REQUIRE(last[i] <= last_of_all[i] * 1.000001 + 1e-3);
                ++checked;
            }
        }
    }
    CHECK(checked > 400);
}

}  // namespace
}  // namespace rillclock
