#include "carving.hpp"

#include <utility>

namespace rillclock {
namespace {

/// Of a cell that belongs to another tile.
constexpr FlowCode flow_elsewhere = 255;

/// Settles the tree of passes within a tile: it was rooted at the open basins; where one of these leaves over a pass of
/// a closed basin of the same tree, the way between them is turned round.
void root_ways(TilePasses& tile, const std::vector<Leaving>& leaving) {
    const std::span<const KeyedEdge<Crossing>> passes = tile.passes;
    for (const Leaving& by : leaving) {
        const PartEdge place = tile.doubtful_places[by.doubtful];
        turn_tree(passes, tile.ways, by.from_other ? passes[place].b : passes[place].a, place);
    }
}

/// The first cell and code of each basin's way over its pass.
std::vector<WayOut> ways_out(const TilePasses& tile, const PatchShape& shape) {
    std::vector<WayOut> ways;
    for (Node node = 0; node < tile.ways.size(); ++node) {
        if (tile.ways[node] == no_part_edge) continue;
        const KeyedEdge<Crossing>& pass = tile.passes[tile.ways[node]];
        const Crossing& crossing = pass.key;
        if (pass.a == node) {
            ways.push_back({shape.cell(crossing.position), crossing.code});
        } else {
            const auto d = static_cast<Direction>(crossing.code);
            ways.push_back({shape.cell(crossing.position + shape.step(d)), flow_code(opposite(d))});
        }
    }
    return ways;
}

/// Carves in one tile; keeps what is to be done elsewhere or later.
class Carver {
public:
    Carver(Patch<FlowCode>& codes, bool is_closed) : codes_(codes), shape_(codes.shape()), is_closed_(is_closed) {}

    void carve_from(const WayOut& way) {
        Position p = shape_.position(way.cell);
        FlowCode code = way.code;
        while (is_direction(codes_[p])) {
            const auto d = static_cast<Direction>(std::exchange(codes_[p], code));
            p += shape_.step(d);
            code = flow_code(opposite(d));
        }
        if (codes_[p] == flow_elsewhere) {
            letters.push_back({shape_.cell(p), code});
        } else if (is_closed_) {
            entries.push_back({shape_.cell(p), code});
        } else {
            codes_[p] = code;
        }
    }

    std::vector<WayOut> letters;
    std::vector<WayOut> entries;

private:
    Patch<FlowCode>& codes_;
    PatchShape shape_;
    bool is_closed_;
};

}  // namespace

template <class Z>
Mail<WayOut> carve(TiledTerrain<Z>& terrain, std::vector<TilePasses>& passes,
                   const std::vector<std::vector<Leaving>>& leaving, std::span<const LevelGround> closed) {
    Mail<WayOut> entries(terrain.tiles.count());
    const auto carve_tile = [&](Tile tile, std::span<const WayOut> ways, Desk<Z>& desk) {
        desk.codes.load_tile(terrain.codes, terrain.shape(tile), flow_elsewhere);
        Carver carver(desk.codes, closed[tile] != LevelGround::none);
        for (const WayOut& way : ways) carver.carve_from(way);
        desk.codes.store(terrain.codes);
        entries[tile].insert(entries[tile].end(), carver.entries.begin(), carver.entries.end());
        return std::move(carver.letters);
    };
    auto sent = terrain.template for_all_tiles<std::vector<WayOut>>([&](Tile tile, Desk<Z>& desk) {
        root_ways(passes[tile], leaving[tile]);
        const std::vector<WayOut> ways = ways_out(passes[tile], terrain.shape(tile));
        passes[tile] = {};
        return carve_tile(tile, ways, desk);
    });
    exchange_until_quiet(terrain, std::move(sent), carve_tile);
    return entries;
}

template Mail<WayOut> carve(TiledTerrain<float>&, std::vector<TilePasses>&, const std::vector<std::vector<Leaving>>&,
                            std::span<const LevelGround>);
template Mail<WayOut> carve(TiledTerrain<double>&, std::vector<TilePasses>&, const std::vector<std::vector<Leaving>>&,
                            std::span<const LevelGround>);

}  // namespace rillclock
