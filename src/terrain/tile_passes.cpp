#include "tile_passes.hpp"

#include <algorithm>
#include <bit>
#include <cstdlib>

#include "tile_descent.hpp"
#include "vectorised.hpp"

namespace rillclock {
namespace {

/// The four directions from a cell to neighbours with a greater index.
constexpr std::array<Direction, 4> onward = {Direction::east, Direction::south_east, Direction::south, Direction::south_west};

/// Whether a step in one direction and a step in another lead to neighbouring cells.
constexpr bool touch(Direction a, Direction b) {
    const int rows = row_step(a) - row_step(b);
    const int columns = column_step(a) - column_step(b);
    return rows >= -1 && rows <= 1 && columns >= -1 && columns <= 1;
}

/// For each direction as a bit which others touch it.
constexpr std::array<std::uint8_t, 8> touching = [] {
    std::array<std::uint8_t, 8> masks{};
    for (const Direction a : all_directions) {
        for (const Direction b : all_directions) {
            const unsigned bit = touch(a, b) ? 1U << static_cast<unsigned>(b) : 0U;
            masks[static_cast<std::size_t>(a)] = static_cast<std::uint8_t>(masks[static_cast<std::size_t>(a)] | bit);
        }
    }
    return masks;
}();

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

template <class Z>
class CrossingFinder {
public:
    using Edge = KeyedEdge<PassKey<Z>>;

    CrossingFinder(const Desk<Z>& desk, std::vector<Edge>& edges) : desk_(desk), shape_(desk.z.shape()), edges_(edges) {}

    void find() {
        edges_.clear();
        const std::vector<bool> voids = rows_with_voids(desk_.z);
        std::vector<std::uint8_t> differences(static_cast<std::size_t>(shape_.columns()));
        for (std::int64_t row = 0; row < shape_.rows(); ++row) {
            compare_row(desk_.numbers.at(row, 0), desk_.numbers.at(row + 1, 0), differences.data(),
                        static_cast<Position>(shape_.columns()));
            cross_from_row(shape_.position(row, 0), differences);
            const auto r = static_cast<std::size_t>(row);
            if (voids[r] || voids[r + 1] || voids[r + 2]) leave_from_row(shape_.position(row, 0));
        }
    }

private:
    void cross_from_row(Position first, const std::vector<std::uint8_t>& differences) {
        for (std::size_t i = 0; i < differences.size(); ++i) {
            for (unsigned bits = differences[i]; bits != 0; bits &= bits - 1) {
                cross(first + static_cast<Position>(i), onward[static_cast<std::size_t>(std::countr_zero(bits))]);
            }
        }
    }
    void cross(Position p, Direction d) {
        const Position beside = p + shape_.step(d);
        const Z own = desk_.z[p];
        const Z other = desk_.z[beside];
        if (own != own || other != other || has_lower_pass(p, d) || has_lower_pass(beside, opposite(d))) return;
        edges_.push_back({desk_.numbers[p], desk_.numbers[beside], {std::max(own, other), {p, flow_code(d)}}});
    }
    /// Whether the cell below `p` is lower and touches the cell in direction `d`.
    [[nodiscard]] bool has_lower_pass(Position p, Direction d) const {
        const FlowCode code = desk_.codes[p];
        if (!is_direction(code) || (unsigned{touching[static_cast<std::size_t>(d)]} >> code & 1U) == 0) return false;
        return desk_.z[p + shape_.step(static_cast<Direction>(code))] < desk_.z[p];
    }
    /// Passes out of the data.
    void leave_from_row(Position first) {
        const Position last = first + static_cast<Position>(shape_.columns());
        for (Position p = first; p < last; ++p) {
            const Node own = desk_.numbers[p];
            const Z level = desk_.z[p];
            if (own != 0 && level == level && !is_surrounded(desk_.z, p)) edges_.push_back({own, 0, {level, {p, flow_root}}});
        }
    }

    const Desk<Z>& desk_;
    PatchShape shape_;
    std::vector<Edge>& edges_;
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
TilePasses find_tile_passes(Desk<Z>& desk, const TileBasins& basins, const std::vector<Node>& open,
                            const std::vector<Node>& around) {
    const TileNodes<Z> nodes(desk, basins, open, around);
    std::vector<KeyedEdge<PassKey<Z>>> edges;
    CrossingFinder<Z>(desk, edges).find();
    const LiesLower<Z> lies_lower(desk.z);
    PartialForestSolver<PassKey<Z>, LiesLower<Z>> solver(edges, nodes.count(), nodes.open_count(), lies_lower);
    return PassKeeper<Z>(desk, nodes, edges).keep(solver.solve());
}

template TilePasses find_tile_passes(Desk<float>&, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);
template TilePasses find_tile_passes(Desk<double>&, const TileBasins&, const std::vector<Node>&, const std::vector<Node>&);

}  // namespace rillclock
