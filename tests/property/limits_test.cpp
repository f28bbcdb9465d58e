// Terrains at the limits of what may come, through flow directions and travel times: each in seconds.

#include <algorithm>
#include <catch2/catch.hpp>
#include <cmath>
#include <limits>
#include <random>
#include <set>
#include <utility>
#include <vector>

#include "reference/limit_terrains.hpp"
#include "reference/tiled_travel_check.hpp"
#include "rillclock/terrain/tiled_directions.hpp"

namespace rillclock {
namespace {

constexpr double no_elevation = std::numeric_limits<double>::quiet_NaN();
const Ground square_metres_each = Ground::planar(metres(1), metres(1));

worked::Given given_of(Elevations z) {
    worked::Given given{.elevations = std::move(z)};
    given.surface = worked::one_surface(given.elevations, 0.15, 2.0);
    return given;
}

/// The first difference between both ways through a terrain, directions and travel; empty where there is none.
std::string difference_on(Elevations z, const worked::TileManner& manner) {
    const worked::Land land(given_of(std::move(z)));
    const Executor executor(manner.threads);
    const TileGrid tiles(land.forest.rows(), land.forest.columns(), manner.side);
    if (flow_codes(land.given.elevations, square_metres_each, tiles, executor) != land.forest.codes()) return "directions";
    return worked::tiled_difference(land, manner);
}

TEST_CASE("one flat is timed over tiles as in one piece") { CHECK(difference_on(Elevations(130, 170, 1.0), {32, 2}) == ""); }

TEST_CASE("a spiral one cell wide is timed over tiles as in one piece, outwards and to a pit in its middle") {
    CHECK(difference_on(limits::spiral(101, false), {16, 2}) == "");
    CHECK(difference_on(limits::spiral(101, true), {16, 1}) == "");
}

TEST_CASE("a comb is timed over tiles as in one piece") { CHECK(difference_on(limits::comb(120, 121), {16, 2}) == ""); }

TEST_CASE("one cell among voids is timed over tiles as in one piece") {
    Elevations z(300, 300, no_elevation);
    z(170, 160) = 4.0;
    CHECK(difference_on(z, {64, 2}) == "");
}

TEST_CASE("a million cells in one row, or in one column, are timed over tiles as in one piece") {
    std::mt19937 random(7);
    std::uniform_int_distribution<int> level(0, 3);
    Elevations row(1, 1'000'000);
    for (double& value : row.values()) value = level(random);
    Elevations column(1'000'000, 1);
    std::copy(row.values().begin(), row.values().end(), column.values().begin());
    CHECK(difference_on(std::move(row), {256, 2}) == "");
    CHECK(difference_on(std::move(column), {256, 2}) == "");
}

TEST_CASE("a level river with a thousand steep tributaries on either side is timed over tiles as in one piece") {
    Elevations z(21, 1000);
    for (std::int64_t row = 0; row < z.rows(); ++row) {
        for (double& level : z.row(row)) level = std::abs(static_cast<double>(row) - 10.0);
    }
    worked::Given given = given_of(std::move(z));
    given.rules.channel.from_area = square_metres(50);
    const worked::Land land(std::move(given));
    CHECK(land.field.slope(5, 900) == 1.0F);                               // a tributary
    CHECK(land.field.kind(10, 900) == GroundKind::channel);                // the river
    CHECK(land.field.slope(10, 900) == 0.0001F);                           // on its floor
    CHECK(worked::tiled_difference(land, {.side = 64, .threads = 2}) == "");
}

/// Directions and travel of a terrain that is too large to be worked the plain way as well.
class EngineAlone {
public:
    explicit EngineAlone(const Raster<float>& z)
        : store_(z.rows(), z.columns(), ElevationStore::Width::four_bytes), executor_(2), tiles_(z.rows(), z.columns()),
          codes(flow_codes(z, square_metres_each, tiles_, executor_)), forest_(codes, tiles_, executor_) {
        const std::vector<double> levels(z.values().begin(), z.values().end());
        store_.write({.rows = z.rows(), .columns = z.columns()}, levels);
        surface_ = {.classes = {{.sheet_n = 0.15, .shallow_k = metres_per_second(2.0)}}, .index = Raster<std::uint8_t>(z.rows(), z.columns())};
    }

    [[nodiscard]] TiledTravel travel() const {
        return {{.forest = forest_, .ground = square_metres_each, .elevations = store_, .surface = surface_}, {}, executor_};
    }
    /// The cell below; `no_cell` at a root.
    [[nodiscard]] Cell below(Cell cell) const {
        return is_direction(codes[cell]) ? neighbour(cell, static_cast<Direction>(codes[cell]), codes.columns()) : no_cell;
    }
    [[nodiscard]] std::int64_t roots() const { return std::count(codes.values().begin(), codes.values().end(), flow_root); }

private:
    ElevationStore store_;
    Executor executor_;
    TileGrid tiles_;
    SurfaceTable surface_;

public:
    const Raster<FlowCode> codes;

private:
    TiledForest forest_;
};

constexpr std::int64_t side = 3163;   // 3163² = 10 004 569
constexpr std::int64_t middle = 1581;

/// Cells on the way down from one, itself and the root included.
std::vector<Cell> way_from(const EngineAlone& engine, Cell from) {
    std::vector<Cell> way;
    for (Cell cell = from; cell != no_cell && way.size() < static_cast<std::size_t>(engine.codes.size()); cell = engine.below(cell)) way.push_back(cell);
    return way;
}

/// What the laws of travel say of each cell once all tiles are read: nothing is lost on the way, and lower cells are nearer in length and time.
struct TravelLaws {
    explicit TravelLaws(const EngineAlone& engine)
        : engine_(engine), unaccounted(side, side), distance(side, side), time_s(side, side) {}

    void read(const TiledTravel& travel) {
        TileDesk desk;
        for (Tile tile = 0; tile < travel.ground().forest.tiles().count(); ++tile) {
            travel.read_tile(tile, desk);
            for (const Local local : desk.flow.order()) take(desk, local);
        }
    }
    /// Cells whose area is not their own and that of all that drains into them, or that are no nearer to the root than the cell above by its step.
    [[nodiscard]] std::int64_t broken() const {
        const FixedArea own = square_metres_each.cell_area(0);
        std::int64_t count = 0;
        for (Cell cell = 0; cell < static_cast<Cell>(unaccounted.size()); ++cell) {
            const Cell below = engine_.below(cell);
            bool holds = unaccounted[cell] == own;
            if (below != no_cell) {
                const FixedLength step = square_metres_each.length(0, static_cast<Direction>(engine_.codes[cell]));
                holds = holds && distance[cell] == distance[below] + step && time_s[cell] > time_s[below];
            } else {
                holds = holds && distance[cell] == 0 && time_s[cell] == 0.0;
            }
            count += holds ? 0 : 1;
        }
        return count;
    }

private:
    void take(const TileDesk& desk, Local local) {
        const Cell cell = desk.flow.cell(local);
        const Cell below = engine_.below(cell);
        unaccounted[cell] += desk.area[local];
        if (below != no_cell) unaccounted[below] -= desk.area[local];
        distance[cell] = desk.flow_distance[local];
        time_s[cell] = in_seconds(desk.time_to_root(local).under(1.0));
        highest_spill = std::max(highest_spill, desk.spill[local]);
        lowest_spill = std::min(lowest_spill, desk.spill[local]);
    }

    const EngineAlone& engine_;

public:
    Raster<FixedArea> unaccounted;   ///< less what drains into the cell: its own is left
    Raster<FixedLength> distance;
    Raster<double> time_s;
    double highest_spill = -1e9;
    double lowest_spill = 1e9;
};

TEST_CASE("all water of ten million cells around one pit leaves by one root, and none is lost or delayed on the way") {
    Raster<float> bowl(side, side);
    for (std::int64_t row = 0; row < side; ++row) {
        for (std::int64_t column = 0; column < side; ++column) {
            bowl(row, column) = static_cast<float>(std::hypot(static_cast<double>(row) - 1581.0, static_cast<double>(column) - 1581.3));
        }
    }
    const EngineAlone engine(bowl);
    CHECK(engine.roots() == 1);
    // The lowest of the edge is right of the pit, at its end of row 1581: 1580.7 away, where the left end is 1581.3.
    const Cell outlet = middle * side + side - 1;
    CHECK(engine.codes[outlet] == flow_root);
    const std::vector<Cell> out = way_from(engine, middle * side + middle);
    CHECK(out.back() == outlet);
    CHECK(out.size() == 1582);   // straight: as many steps as columns
    const std::set<Cell> on_way_out(out.begin(), out.end());
    std::int64_t rising = 0;
    for (Cell cell = 0; cell < static_cast<Cell>(bowl.size()); ++cell) {
        if (!on_way_out.contains(cell) && !(bowl[engine.below(cell)] < bowl[cell])) ++rising;
    }
    CHECK(rising == 0);
    TravelLaws laws(engine);
    laws.read(engine.travel());
    CHECK(laws.broken() == 0);
    CHECK(laws.lowest_spill == static_cast<double>(bowl[outlet]));   // the pond's level
    CHECK(laws.highest_spill == static_cast<double>(bowl(0, 0)));
}

TEST_CASE("one pit in the middle of a plain of ten million cells takes what is nearer to it than to the edge, and is opened") {
    Raster<float> plain(side, side, 3.0F);
    plain(middle, middle) = 1.0F;
    const EngineAlone engine(plain);
    CHECK(engine.roots() == 4 * side - 4);           // every cell of the edge
    const std::vector<Cell> out = way_from(engine, middle * side + middle);
    CHECK(engine.codes[out.back()] == flow_root);    // opened
    CHECK(out.size() == middle + 1);                 // by a shortest way
    // 380 steps from the pit's neighbours and 1200 from the edge; south-east, asked before south, is one step nearer too.
    CHECK(engine.codes(1200, middle) == flow_code(Direction::south_east));
    CHECK(engine.codes(700, middle) == flow_code(Direction::north));   // 880 steps from the pit's neighbours, 700 from the edge
    // Everywhere but on the way out: one step nearer to where the plain drains, the edge or a neighbour of the pit.
    const auto steps_left = [](Cell cell) {
        const std::int64_t row = cell / side;
        const std::int64_t column = cell % side;
        const std::int64_t to_edge = std::min({row, column, side - 1 - row, side - 1 - column});
        return std::min(to_edge, std::max(std::abs(row - middle), std::abs(column - middle)) - 1);
    };
    const std::set<Cell> on_way_out(out.begin(), out.end());
    std::int64_t astray = 0;
    for (Cell cell = 0; cell < static_cast<Cell>(plain.size()); ++cell) {
        const Cell below = engine.below(cell);
        if (below != no_cell && !on_way_out.contains(cell) && steps_left(below) != steps_left(cell) - 1) ++astray;
    }
    CHECK(astray == 0);
}

TEST_CASE("one cell among nine million voids is a root with its own area and no way to go") {
    Raster<float> z(3000, 3000, std::numeric_limits<float>::quiet_NaN());
    z(1777, 1234) = 4.0F;
    const EngineAlone engine(z);
    CHECK(engine.roots() == 1);
    CHECK(std::count(engine.codes.values().begin(), engine.codes.values().end(), flow_void) == 8'999'999);
    const TiledTravel travel = engine.travel();
    REQUIRE(travel.roots().size() == 1);
    CHECK(travel.roots()[0].cell == 1777 * 3000 + 1234);
    CHECK(travel.roots()[0].area == square_metres_each.cell_area(0));
    TileDesk desk;
    travel.read_tile(travel.ground().forest.tiles().tile_of({.row = 1777, .column = 1234}), desk);
    REQUIRE(desk.flow.order().size() == 1);
    CHECK(desk.spill[desk.flow.order()[0]] == 4.0);
    CHECK(desk.time_to_root(desk.flow.order()[0]) == StepTime{});
}

}  // namespace
}  // namespace rillclock
