#include "tile_passes.hpp"

#include <algorithm>
#include <bit>
#include <cstring>

#include "tile_descent.hpp"
#include "vectorised.hpp"

namespace rillclock {
namespace {

/// The four directions from a cell to neighbours with a greater index.
constexpr std::array<Direction, 4> onward = {Direction::east, Direction::south_east, Direction::south, Direction::south_west};

/// Whether the cell that lies in the way of `code` touches the neighbour in direction `d`; false for what is no direction.
/// On the circle of directions these are the next but one about a straight neighbour, and the next about a diagonal one.
template <Direction d>
[[gnu::always_inline]] inline std::uint8_t touches(FlowCode code) {
    constexpr auto reach = static_cast<std::uint8_t>(is_diagonal(d) ? 1 : 2);
    const auto turned = static_cast<std::uint8_t>(static_cast<std::uint8_t>(code + 8 + reach - flow_code(d)) & 7);
    return static_cast<std::uint8_t>(static_cast<std::uint8_t>(turned <= 2 * reach) & static_cast<std::uint8_t>(code < 8));
}

template <class Z>
struct PassKey {
    Z higher = 0;
    Crossing crossing;
};

/// The order of passes.hpp. The lower of the two elevations is looked up only where the higher ones are equal.
template <class Z>
class LiesLower {
public:
    explicit LiesLower(const Patch<Z>& z) : z_(&z) {}
    bool operator()(const PassKey<Z>& a, const PassKey<Z>& b) const {
        return a.higher != b.higher ? a.higher < b.higher : breaks_tie(a.crossing, b.crossing);
    }
    [[nodiscard]] Z lower_of(const Crossing& crossing) const {
        const Z own = (*z_)[crossing.position];
        if (crossing.code == flow_root) return own;
        return std::min(own, (*z_)[crossing.position + z_->shape().step(static_cast<Direction>(crossing.code))]);
    }

private:
    [[nodiscard]] bool breaks_tie(const Crossing& a, const Crossing& b) const {
        const Z lower_a = lower_of(a);
        const Z lower_b = lower_of(b);
        if (lower_a != lower_b) return lower_a < lower_b;
        return a.position != b.position ? a.position < b.position : a.code < b.code;
    }
    const Patch<Z>* z_;
};

/// What to add to a position for each code; nothing for what is no direction.
using Steps = std::array<Position, 16>;

/// A bit for each of the `onward` neighbours that is of another node.
RILLCLOCK_VECTORISED
void compare_row(const Node* here, const Node* below, std::uint8_t* __restrict differences, Position columns) {
    for (Position i = 0; i < columns; ++i) {
        const Node own = here[i];
        const Node bits = Node{here[i + 1] != own} | Node{below[i + 1] != own} << 1U | Node{below[i] != own} << 2U |
                          Node{(below - 1)[i] != own} << 3U;
        differences[i] = static_cast<std::uint8_t>(bits);
    }
}

/// Leaves a bit only where the pass may be the lowest between its basins. `here` and `below` are the codes of cells that fall.
RILLCLOCK_VECTORISED
void drop_higher_passes(const FlowCode* here, const FlowCode* below, std::uint8_t* __restrict differences, Position columns) {
    for (Position i = 0; i < columns; ++i) {
        const FlowCode own = here[i];
        const int east = touches<Direction::east>(own) | touches<Direction::west>(here[i + 1]);
        const int south_east = touches<Direction::south_east>(own) | touches<Direction::north_west>(below[i + 1]);
        const int south = touches<Direction::south>(own) | touches<Direction::north>(below[i]);
        const int south_west = touches<Direction::south_west>(own) | touches<Direction::north_east>((below - 1)[i]);
        const int higher = east | south_east << 1 | south << 2 | south_west << 3;
        differences[i] = static_cast<std::uint8_t>(differences[i] & ~higher);
    }
}

RILLCLOCK_VECTORISED
void look_up(const Node* __restrict nodes, Position* __restrict ends, Position count) {
    for (Position i = 0; i < count; ++i) ends[i] = nodes[ends[i]];
}

/// The nodes of a tile: numbers them, and writes to each position of a patch, halo included, the node it belongs to.
template <class Z>
class TileNodes {
public:
    TileNodes(Desk<Z>& desk, const TileBasins& basins, const std::vector<Node>& open, const std::vector<Node>& around)
        : shape_(desk.z.shape()), basins_(open) {
        basins_.push_back(0);
        basins_.insert(basins_.end(), around.begin(), around.end());
        std::sort(basins_.begin(), basins_.end());
        basins_.erase(std::unique(basins_.begin(), basins_.end()), basins_.end());
        number_ends(desk, basins, open, around);
        look_up(desk.nodes_of_ends.data(), desk.numbers.data(), shape_.size());
    }
    [[nodiscard]] std::size_t count() const { return count_; }
    [[nodiscard]] Node open_count() const { return static_cast<Node>(basins_.size()); }
    /// The basin of an open node, by its number in the whole raster.
    [[nodiscard]] Node basin(Node open_node) const { return basins_[open_node]; }

private:
    [[nodiscard]] Node node_of(Node basin) const {
        return static_cast<Node>(std::lower_bound(basins_.begin(), basins_.end(), basin) - basins_.begin());
    }
    void number_ends(Desk<Z>& desk, const TileBasins& basins, const std::vector<Node>& open, const std::vector<Node>& around) {
        std::vector<Node>& nodes = desk.nodes_of_ends;
        nodes.resize(std::size_t{shape_.size()} + 1);
        for (const Position end : basins.lowest) nodes[end] = no_node;
        for (std::size_t i = 0; i < open.size(); ++i) nodes[basins.rim_ends[i]] = node_of(open[i]);
        std::size_t place = 0;
        shape_.for_each_halo([&](Position p) {
            desk.numbers[p] = p;
            nodes[p] = node_of(around[place++]);
        });
        nodes[shape_.size()] = 0;
        count_ = basins_.size();
        for (const Position end : basins.lowest) {
            if (nodes[end] == no_node) nodes[end] = static_cast<Node>(count_++);
        }
    }
    static constexpr Node no_node = UINT32_MAX;

    PatchShape shape_;
    std::vector<Node> basins_;
    std::size_t count_ = 0;
};

/// Keeps the codes of cells whose next is lower, the others become undecided: `next` is what to add to a position for each code.
template <class Z>
[[gnu::always_inline]] inline void keep_falling(const Z* z, const FlowCode* codes, const Steps& next,
                                                FlowCode* __restrict falling, Position first, Position last) {
    const Position* steps = next.data();
    for (Position p = first; p < last; ++p) {
        const Position code = codes[p];
        const Position below = p + steps[code & 15U];
        const Position kept = z[below] < z[p] ? code : Position{flow_undecided};
        falling[p] = static_cast<FlowCode>(kept);
    }
}
RILLCLOCK_VECTORISED
void keep_falling_codes(const float* z, const FlowCode* codes, const Steps& next, FlowCode* __restrict falling, Position first,
                        Position last) {
    keep_falling(z, codes, next, falling, first, last);
}
RILLCLOCK_VECTORISED
void keep_falling_codes(const double* z, const FlowCode* codes, const Steps& next, FlowCode* __restrict falling, Position first,
                        Position last) {
    keep_falling(z, codes, next, falling, first, last);
}

/// Writes `desk.falling`. The halo may be level where the tile is not; of it only ways into the patch count, since others touch no
/// cell of the tile.
template <class Z>
void find_falling(Desk<Z>& desk, bool level) {
    desk.falling = desk.codes;
    const PatchShape& shape = desk.z.shape();
    Steps next{};
    std::copy(shape.steps().begin(), shape.steps().end(), next.begin());
    if (level) {
        keep_falling_codes(desk.z.data(), desk.codes.data(), next, desk.falling.data(), shape.position(0, 0),
                           shape.position(shape.rows() - 1, shape.columns()));
    }
    shape.for_each_halo([&](Position p) {
        const FlowCode code = desk.codes[p];
        const bool stays = is_direction(code) && shape.is_in_patch(neighbour(shape.row_column(p), static_cast<Direction>(code)));
        const bool falls = stays && desk.z[p + next[code]] < desk.z[p];
        desk.falling[p] = falls ? code : flow_undecided;
    });
}

template <class Z>
class CrossingFinder {
public:
    using Edge = KeyedEdge<PassKey<Z>>;

    CrossingFinder(const Desk<Z>& desk, std::vector<Edge>& edges) : desk_(desk), shape_(desk.z.shape()), less_(desk.z), edges_(edges) {}

    void find() {
        edges_.clear();
        const std::vector<bool> voids = rows_with_voids(desk_.z);
        const auto columns = static_cast<Position>(shape_.columns());
        std::vector<std::uint8_t> differences(columns + 8U);
        for (std::int64_t row = 0; row < shape_.rows(); ++row) {
            compare_row(desk_.numbers.at(row, 0), desk_.numbers.at(row + 1, 0), differences.data(), columns);
            drop_higher_passes(desk_.falling.at(row, 0), desk_.falling.at(row + 1, 0), differences.data(), columns);
            cross_from_row(shape_.position(row, 0), differences);
            const auto r = static_cast<std::size_t>(row);
            if (voids[r] || voids[r + 1] || voids[r + 2]) leave_from_row(shape_.position(row, 0));
        }
    }

private:
    /// Most cells have no pass; eight at a time are passed over.
    void cross_from_row(Position first, const std::vector<std::uint8_t>& differences) {
        for (std::size_t i = 0; i + 8 <= differences.size(); i += 8) {
            std::uint64_t eight = 0;
            std::memcpy(&eight, &differences[i], sizeof eight);
            for (; eight != 0; eight &= eight - 1) {
                const auto place = static_cast<unsigned>(std::countr_zero(eight));
                const unsigned byte = std::endian::native == std::endian::little ? place / 8 : 7 - place / 8;
                cross(first + static_cast<Position>(i) + byte, onward[place % 8]);
            }
        }
    }
    void cross(Position p, Direction d) {
        const Position beside = p + shape_.step(d);
        const Z own = desk_.z[p];
        const Z other = desk_.z[beside];
        if (own != own || other != other) return;
        keep({desk_.numbers[p], desk_.numbers[beside], {std::max(own, other), {p, flow_code(d)}}});
    }
    /// Of passes between the same two nodes the lowest is enough. Which were met lately is remembered; one that was forgotten is
    /// kept once more, which costs time alone.
    void keep(const Edge& edge) {
        std::uint32_t& met = lately_[((edge.a ^ edge.b) * 0x9E3779B1U + edge.a + edge.b) % lately_.size()];
        const bool again = met < edges_.size() && std::minmax(edge.a, edge.b) == std::minmax(edges_[met].a, edges_[met].b);
        if (!again) {
            met = static_cast<std::uint32_t>(edges_.size());
            edges_.push_back(edge);
        } else if (less_(edge.key, edges_[met].key)) {
            edges_[met] = edge;
        }
    }
    /// Passes out of the data.
    void leave_from_row(Position first) {
        const Position last = first + static_cast<Position>(shape_.columns());
        for (Position p = first; p < last; ++p) {
            const Node own = desk_.numbers[p];
            const Z level = desk_.z[p];
            if (own != 0 && level == level && !is_surrounded(desk_.z, p)) keep({own, 0, {level, {p, flow_root}}});
        }
    }

    const Desk<Z>& desk_;
    PatchShape shape_;
    LiesLower<Z> less_;
    std::vector<Edge>& edges_;
    std::array<std::uint32_t, 2048> lately_{};
};

/// Keeps the passes that the forest names, in a form that no longer needs the patch.
template <class Z>
class PassKeeper {
public:
    PassKeeper(const Desk<Z>& desk, const TileNodes<Z>& nodes, const std::vector<KeyedEdge<PassKey<Z>>>& edges)
        : desk_(desk), nodes_(nodes), edges_(edges) {}

    [[nodiscard]] TilePasses keep(const PartialForest& forest) {
        for (const PartEdge edge : forest.towards_open) kept_.ways.push_back(edge == no_part_edge ? edge : keep(edge));
        for (const PartEdge edge : forest.doubtful) {
            kept_.doubtful_places.push_back(keep(edge));
            kept_.doubtful.push_back(pass(edges_[edge], forest));
        }
        return std::move(kept_);
    }

private:
    PartEdge keep(PartEdge edge) {
        kept_.passes.push_back({edges_[edge].a, edges_[edge].b, edges_[edge].key.crossing});
        return static_cast<PartEdge>(kept_.passes.size() - 1);
    }
    [[nodiscard]] Pass pass(const KeyedEdge<PassKey<Z>>& edge, const PartialForest& forest) const {
        return {.higher = edge.key.higher,
                .lower = LiesLower<Z>(desk_.z).lower_of(edge.key.crossing),
                .cell = desk_.z.shape().cell(edge.key.crossing.position),
                .code = edge.key.crossing.code,
                .basin = nodes_.basin(forest.tree[edge.a]),
                .other_basin = nodes_.basin(forest.tree[edge.b])};
    }

    const Desk<Z>& desk_;
    const TileNodes<Z>& nodes_;
    const std::vector<KeyedEdge<PassKey<Z>>>& edges_;
    TilePasses kept_;
};

}  // namespace

template <class Z>
TilePasses find_tile_passes(Desk<Z>& desk, bool level, const TileBasins& basins, const std::vector<Node>& open,
                            const std::vector<Node>& around) {
    find_falling(desk, level);
    const TileNodes<Z> nodes(desk, basins, open, around);
    std::vector<KeyedEdge<PassKey<Z>>> edges;
    CrossingFinder<Z>(desk, edges).find();
    const LiesLower<Z> lies_lower(desk.z);
    PartialForestSolver<PassKey<Z>, LiesLower<Z>> solver(edges, nodes.count(), nodes.open_count(), lies_lower);
    return PassKeeper<Z>(desk, nodes, edges).keep(solver.solve());
}

template TilePasses find_tile_passes(Desk<float>&, bool, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);
template TilePasses find_tile_passes(Desk<double>&, bool, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);

}  // namespace rillclock
