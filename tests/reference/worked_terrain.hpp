#pragma once

#include <cmath>
#include <limits>
#include <optional>
#include <random>
#include <utility>
#include <vector>

#include "reference/plain/flow_directions.hpp"
#include "reference/plain/travel_field.hpp"

/// Terrain worked through from elevations to travel times, for tests.
namespace rillclock::worked {

/// What a test states; all else follows.
struct Given {
    Elevations elevations;
    Ground ground = Ground::planar(metres(1), metres(1));
    /// Directions where the test draws them itself; else those of the terrain.
    std::optional<Raster<FlowCode>> codes = {};
    SurfaceTable surface = {};
    TravelRules rules = {};
    double metres_per_elevation_unit = 1.0;
    std::vector<Cell> mapped_channels = {};
};

/// Terrain with its travel field, kept alive together: the parts refer to one another, so it stays where it was made.
class Land {
public:
    explicit Land(Given stated)
        : given(std::move(stated)),
          forest(given.codes ? FlowForest(*given.codes) : flow_forest_of(given.elevations, given.ground)),
          inputs{.forest = forest,
                 .ground = given.ground,
                 .elevations = given.elevations,
                 .metres_per_elevation_unit = given.metres_per_elevation_unit,
                 .surface = given.surface,
                 .mapped_channels = given.mapped_channels},
          field(travel_field(inputs, given.rules)) {}
    Land(const Land&) = delete;
    Land& operator=(const Land&) = delete;
    ~Land() = default;

    const Given given;
    const FlowForest forest;
    const TravelInputs inputs;
    const TravelField field;
};

/// One surface everywhere.
inline SurfaceTable one_surface(const Elevations& z, double sheet_n, double shallow_k_m_per_s) {
    return {.classes = {{.sheet_n = sheet_n, .shallow_k = metres_per_second(shallow_k_m_per_s)}},
            .index = Raster<std::uint8_t>(z.rows(), z.columns())};
}

/// Ground whose rows become shorter to the north, as on a geographic grid.
inline Ground narrowing_ground(std::int64_t rows) {
    std::vector<GroundRow> table;
    for (std::int64_t row = 0; row < rows; ++row) {
        const double width = 1.0 + 0.02 * static_cast<double>(row);
        table.push_back({.east_west = to_fixed(width),
                         .south = to_fixed(1.5),
                         .diagonal = to_fixed(std::hypot(width, 1.5)),
                         .area = to_fixed_area(width * 1.5)});
    }
    return Ground::by_row(std::move(table));
}

/// Square cells, rectangular ones, or rows that become shorter to the north: differs from seed to seed.
inline Ground seeded_ground(unsigned seed, std::int64_t rows) {
    const unsigned kind = seed / 4 % 3;
    if (kind == 0) return Ground::planar(metres(1), metres(1));
    return kind == 1 ? Ground::planar(metres(1 + seed % 5), metres(1 + seed % 7)) : narrowing_ground(rows);
}

/// One row of cells.
inline Elevations strip(const std::vector<double>& levels) {
    Elevations z(1, static_cast<std::int64_t>(levels.size()));
    for (std::size_t i = 0; i < levels.size(); ++i) z.values()[i] = levels[i];
    return z;
}

/// One row that falls eastward by `fall` a cell, to 0 at its end.
inline Elevations even_strip(std::int64_t cells, double fall) {
    Elevations z(1, cells);
    for (std::int64_t i = 0; i < cells; ++i) z(0, i) = static_cast<double>(cells - 1 - i) * fall;
    return z;
}

/// One row that drains eastward, whatever its elevations.
inline Raster<FlowCode> eastward(std::int64_t cells) {
    Raster<FlowCode> codes(1, cells, flow_code(Direction::east));
    codes(0, cells - 1) = flow_root;
    return codes;
}

/// The cells `first` to `last` of a row.
inline std::vector<Cell> cells_from_to(Cell first, Cell last) {
    std::vector<Cell> cells;
    for (Cell cell = first; cell <= last; ++cell) cells.push_back(cell);
    return cells;
}

/// No floors, no ponds, no limits: what is left is the formulas. Falls of a micrometre are believed.
inline TravelRules bare_rules() {
    constexpr double none = std::numeric_limits<double>::infinity();
    TravelRules rules;
    rules.slope = {.window = metres(20), .vertical_step = metres(1e-6), .overland_floor = 0, .channel_floor = 0};
    rules.sheet.limit = metres(none);
    rules.sheet.index_limit = metres(none);
    rules.channel.from_area.reset();
    rules.pond.depth = metres(none);
    return rules;
}

/// Four classes scattered over a terrain; the last is open water where `with_water`.
inline SurfaceTable random_surface(std::mt19937& random, const Elevations& z, bool with_water) {
    SurfaceTable table{.classes = {{.sheet_n = 0.011, .shallow_k = feet_per_second(20.328)},
                                   {.sheet_n = 0.15, .shallow_k = feet_per_second(6.962)},
                                   {.sheet_n = 0.80, .shallow_k = feet_per_second(2.516)},
                                   {.sheet_n = 0.24, .shallow_k = feet_per_second(16.135)}},
                       .index = Raster<std::uint8_t>(z.rows(), z.columns())};
    if (with_water) table.classes.back().water_depth = metres(1.5);
    std::uniform_int_distribution<int> any(0, 3);
    for (std::uint8_t& position : table.index.values()) position = static_cast<std::uint8_t>(any(random));
    return table;
}

/// Levels drawn from the reals between 0 and `highest`, so that no two are equal: no ties, and no flats.
inline Elevations uneven_terrain(std::mt19937& random, std::int64_t rows, std::int64_t columns, double highest) {
    std::uniform_real_distribution<double> level(0.0, highest);
    Elevations z(rows, columns);
    for (double& value : z.values()) value = level(random);
    return z;
}

/// A slope falling south-east with noise too small to dam it: every cell has a lower neighbour but the last.
inline Elevations rough_slope(std::mt19937& random, std::int64_t rows, std::int64_t columns) {
    std::uniform_real_distribution<double> noise(0.0, 0.4);
    Elevations z(rows, columns);
    for (std::int64_t row = 0; row < rows; ++row) {
        for (std::int64_t column = 0; column < columns; ++column) {
            z(row, column) = static_cast<double>(rows + columns - row - column) + noise(random);
        }
    }
    return z;
}

}  // namespace rillclock::worked
