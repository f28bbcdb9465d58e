#include "tile_crossings.hpp"

#include <bit>
#include <cmath>
#include <cstring>

#include "rillclock/core/vectorised.hpp"
#include "tile_descent.hpp"

namespace rillclock {
namespace {

/// The four directions from a cell to neighbours with a greater index.
constexpr std::array<Direction, 4> onward = {Direction::east, Direction::south_east, Direction::south,
                                             Direction::south_west};

/// Whether the cell that lies in the way of `code` touches the neighbour in direction `d`; false for what is no
/// direction. On the circle of directions these are the next but one about a straight neighbour, and the next about a
/// diagonal one.
template <Direction d>
[[gnu::always_inline]] inline std::uint8_t touches(FlowCode code) {
    constexpr auto reach = static_cast<std::uint8_t>(is_diagonal(d) ? 1 : 2);
    const auto turned = static_cast<std::uint8_t>(static_cast<std::uint8_t>(code + 8 + reach - flow_code(d)) & 7);
    return static_cast<std::uint8_t>(static_cast<std::uint8_t>(turned <= 2 * reach) &
                                     static_cast<std::uint8_t>(code < 8));
}

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

/// Leaves a bit only where the pass may be the lowest between its basins. `here` and `below` are the codes of cells
/// that fall.
RILLCLOCK_VECTORISED
void drop_higher_passes(const FlowCode* here, const FlowCode* below, std::uint8_t* __restrict differences,
                        Position columns) {
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

/// Keeps the codes of cells whose next is lower, the others become undecided: `next` is what to add to a position for
/// each code.
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
void keep_falling_codes(const float* z, const FlowCode* codes, const Steps& next, FlowCode* __restrict falling,
                        Position first, Position last) {
    keep_falling(z, codes, next, falling, first, last);
}
RILLCLOCK_VECTORISED
void keep_falling_codes(const double* z, const FlowCode* codes, const Steps& next, FlowCode* __restrict falling,
                        Position first, Position last) {
    keep_falling(z, codes, next, falling, first, last);
}

/// Writes `desk.falling`. The halo may be level where the tile is not; of it only ways into the patch count, since
/// others touch no cell of the tile.
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
        const bool stays =
            is_direction(code) && shape.is_in_patch(neighbour(shape.row_column(p), static_cast<Direction>(code)));
        const bool falls = stays && desk.z[p + next[code]] < desk.z[p];
        desk.falling[p] = falls ? code : flow_undecided;
    });
}

template <class Z>
class CrossingFinder {
public:
    using Edge = KeyedEdge<PassKey<Z>>;

    explicit CrossingFinder(const Desk<Z>& desk) : desk_(desk), shape_(desk.z.shape()), less_(desk.z) {}

    [[nodiscard]] std::vector<Edge> find() {
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
        return std::move(edges_);
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
        if (std::isnan(own) || std::isnan(other)) return;
        keep({desk_.numbers[p], desk_.numbers[beside], {std::max(own, other), {p, flow_code(d)}}});
    }
    /// Of passes between the same two nodes the lowest is enough. Which were met lately is remembered; one that was
    /// forgotten is kept once more, which costs time alone.
    void keep(const Edge& edge) {
        std::uint32_t& met = lately_[((edge.a ^ edge.b) * 0x9E3779B1U + edge.a + edge.b) % lately_.size()];
        const bool again =
            met < edges_.size() && std::minmax(edge.a, edge.b) == std::minmax(edges_[met].a, edges_[met].b);
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
            if (own != 0 && !std::isnan(level) && !is_surrounded(desk_.z, p)) keep({own, 0, {level, {p, flow_root}}});
        }
    }

    const Desk<Z>& desk_;
    PatchShape shape_;
    LiesLower<Z> less_;
    std::vector<Edge> edges_;
    std::array<std::uint32_t, 2048> lately_{};
};

}  // namespace

template <class Z>
std::vector<KeyedEdge<PassKey<Z>>> find_crossings(Desk<Z>& desk, bool level) {
    find_falling(desk, level);
    return CrossingFinder<Z>(desk).find();
}

template std::vector<KeyedEdge<PassKey<float>>> find_crossings(Desk<float>&, bool);
template std::vector<KeyedEdge<PassKey<double>>> find_crossings(Desk<double>&, bool);

}  // namespace rillclock
