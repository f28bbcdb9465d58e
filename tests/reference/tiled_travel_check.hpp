#pragma once

#include <string>

#include "reference/worked_terrain.hpp"
#include "rillclock/travel/tiled_travel.hpp"

/// Holds travel over tiles to the plain way, in every cell.
namespace rillclock::worked {

/// How the tiled way is computed; no figure depends on it.
struct TileManner {
    std::int64_t side = 256;
    unsigned threads = 1;
    Executor::Kind kind = Executor::Kind::task_arena;
};

/// A manner that differs from seed to seed in all of it.
inline TileManner seeded_manner(unsigned seed, unsigned most_side) {
    return {.side = 1 + seed % most_side, .threads = 1 + seed % 2,
            .kind = seed / 2 % 2 == 0 ? Executor::Kind::task_arena : Executor::Kind::plain_threads};
}

/// Travel over tiles of a land that was worked through the plain way, kept alive together.
class OverTiles {
public:
    OverTiles(const Land& land, const TileManner& manner)
        : store(land.given.elevations.rows(), land.given.elevations.columns(), ElevationStore::Width::eight_bytes),
          executor(manner.threads, manner.kind),
          forest(land.forest.codes(), TileGrid(store.rows(), store.columns(), manner.side), executor),
          travel({.forest = forest, .ground = land.given.ground, .elevations = filled(store, land.given.elevations),
                  .metres_per_elevation_unit = land.given.metres_per_elevation_unit, .surface = land.given.surface,
                  .mapped_channels = land.given.mapped_channels},
                 land.given.rules, executor) {}
    OverTiles(const OverTiles&) = delete;
    OverTiles& operator=(const OverTiles&) = delete;
    ~OverTiles() = default;

    ElevationStore store;
    const Executor executor;
    const TiledForest forest;
    const TiledTravel travel;

private:
    static const ElevationStore& filled(ElevationStore& store, const Elevations& z) {
        store.write({.rows = z.rows(), .columns = z.columns()}, z.values());
        return store;
    }
};

/// What differs between a tile's desk and the plain field; empty where nothing does.
inline std::string difference(const TiledTravel& tiled, const TileDesk& desk, const Land& land) {
    for (const Local local : desk.flow.order()) {
        const Cell cell = desk.flow.cell(local);
        const std::string at = " at cell " + std::to_string(cell);
        if (desk.spill[local] != land.field.spill[cell]) return "spill elevation" + at;
        if (desk.area[local] != land.field.contributing_area[cell]) return "area" + at;
        if (desk.from_divide[local] != land.field.from_divide[cell]) return "distance from the divide" + at;
        if (desk.flow_distance[local] != land.field.flow_distance[cell]) return "flow distance" + at;
        if (tiled.kind(cell) != land.field.kind[cell]) return "kind" + at;
        if (tiled.slope(cell) != land.field.slope[cell]) return "slope" + at;
        if (desk.sheet_index[local] != land.field.sheet_index[cell]) return "sheet index" + at;
        if (desk.regime[local] != land.field.regime[cell]) return "regime" + at;
        if (!(desk.time_to_root(local) == land.field.time_to_root(cell))) return "time" + at;
    }
    return "";
}

/// The first difference between travel over tiles and the plain way; empty where there is none.
inline std::string tiled_difference(const Land& land, const TileManner& manner) {
    const OverTiles tiled(land, manner);
    TileDesk desk;
    for (Tile tile = 0; tile < tiled.forest.tiles().count(); ++tile) {
        tiled.travel.read_tile(tile, desk);
        const std::string found = difference(tiled.travel, desk, land);
        if (!found.empty()) return found;
    }
    return "";
}

}  // namespace rillclock::worked
