#pragma once

#include <algorithm>
#include <cstdint>
#include <span>
#include <type_traits>
#include <vector>

#include "rillclock/forest/sweep.hpp"
#include "rillclock/forest/tiled_forest.hpp"

namespace rillclock {

/// The sweeps of sweep.hpp in three stages: each tile alone (`collect`), once over the exits (`solve`), each tile again (`fill`).
///
/// Channels are those of the closed set, their weights functions of a tile's cells (`Local`). All that is kept between the stages is a
/// value for each exit; a tile's whole field is made from it whenever it is wanted, and need not be kept. What comes out does not
/// depend on tiles or threads: sums are of integers, greatest and least are exact.
namespace tile_sweep_detail {

template <class Channel>
struct Rule;

template <class W>
struct Rule<down::Sum<W>> {
    using Value = std::int64_t;
    static constexpr bool moves = false;
    static Value start(const down::Sum<W>& channel, Local cell) { return channel.weight(cell); }
    static Value join(Value a, Value b) { return a + b; }
    static Value sent(const down::Sum<W>&, Local, Value value) { return value; }
};

template <class S>
struct Rule<down::Max<S>> {
    using Value = std::int64_t;
    static constexpr bool moves = true;
    static Value start(const down::Max<S>&, Local) { return 0; }
    static Value join(Value a, Value b) { return std::max(a, b); }
    static Value sent(const down::Max<S>& channel, Local cell, Value value) { return value + channel.step(cell); }
};

template <class O>
struct Rule<down::Min<O>> {
    using Value = double;
    static constexpr bool moves = false;
    static Value start(const down::Min<O>& channel, Local cell) { return channel.own(cell); }
    static Value join(Value a, Value b) { return std::min(a, b); }
    static Value sent(const down::Min<O>&, Local, Value value) { return value; }
};

template <class S>
struct Rule<up::Add<S>> {
    using Value = std::int64_t;
    static Value own(const up::Add<S>& channel, Local cell, bool is_root) { return is_root ? 0 : channel.step(cell); }
    static Value combine(Value near, Value far) { return near + far; }
};

template <class O>
struct Rule<up::Max<O>> {
    using Value = double;
    static Value own(const up::Max<O>& channel, Local cell, bool) { return channel.own(cell); }
    static Value combine(Value near, Value far) { return std::max(near, far); }
};

template <class L>
struct Rule<up::First<L>> {
    using Value = std::uint32_t;
    static Value own(const up::First<L>& channel, Local cell, bool) { return channel.label(cell); }
    static Value combine(Value near, Value far) { return near != 0 ? near : far; }
};

}  // namespace tile_sweep_detail

template <class Channel>
using SweptValue = typename tile_sweep_detail::Rule<Channel>::Value;

/// What each exit sends on to the next tile in a sweep down.
template <class Value>
class DownBorders {
public:
    explicit DownBorders(const TiledForest& forest)
        : forest_(&forest), sent_(forest.exit_count()), moved_(forest.exit_count(), 0) {}

    /// First stage: what leaves a tile of the water that begins in it. `field` is room for a value a cell.
    template <class Channel>
    void collect(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field) {
        using Rule = tile_sweep_detail::Rule<Channel>;
        run(flow, channel, field, [](auto&) {});
        for (std::size_t i = 0; i < flow.exits().size(); ++i) {
            const Local exit = flow.exits()[i];
            sent_[forest_->first_exit(tile) + i] = Rule::sent(channel, exit, field[exit]);
        }
        if constexpr (Rule::moves) collect_moves(tile, flow, channel, field);
    }

    /// Second stage: lets the water of all exits run on through the tiles below.
    template <class Channel>
    void solve() {
        using Rule = tile_sweep_detail::Rule<Channel>;
        for (const Exit exit : forest_->exit_order()) {
            const Exit next = forest_->next(exit);
            if (next != no_exit) sent_[next] = Rule::join(sent_[next], sent_[exit] + moved_value(exit));
        }
    }

    /// Third stage: the field of a tile, void cells 0.
    template <class Channel>
    void fill(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field) const {
        using Rule = tile_sweep_detail::Rule<Channel>;
        run(flow, channel, field, [&](auto& values) {
            for (const Inlet& inlet : forest_->inlets(tile)) {
                values[inlet.to] = Rule::join(values[inlet.to], sent_[inlet.exit]);
            }
        });
    }

private:
    [[nodiscard]] Value moved_value(Exit exit) const {
        if constexpr (std::is_same_v<Value, std::int64_t>) return moved_[exit];
        else return 0;
    }

    /// `let_in` adds what comes from other tiles, before anything flows.
    template <class Channel, class LetIn>
    static void run(const TileFlow& flow, const Channel& channel, std::vector<Value>& field, LetIn let_in) {
        using Rule = tile_sweep_detail::Rule<Channel>;
        field.assign(flow.size(), Value{});
        for (const Local cell : flow.order()) field[cell] = Rule::start(channel, cell);
        let_in(field);
        for (const Local cell : flow.order()) {
            const Local below = flow.down(cell);
            if (below < ends_here) field[below] = Rule::join(field[below], Rule::sent(channel, cell, field[cell]));
        }
    }

    /// How much a value grows on its way from where it comes in to where it leaves, the exit's own step included.
    template <class Channel>
    void collect_moves(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field) {
        const auto order = flow.order();
        for (std::size_t i = order.size(); i-- > 0;) {
            const Local below = flow.down(order[i]);
            if (below == ends_here) field[order[i]] = 0;
            else field[order[i]] = channel.step(order[i]) + (below == leaves_tile ? 0 : field[below]);
        }
        for (const Inlet& inlet : forest_->inlets(tile)) moved_[inlet.exit] = field[inlet.to];
    }

    const TiledForest* forest_;
    std::vector<Value> sent_;
    std::vector<std::int64_t> moved_;   ///< by exit: along the path that its water takes through the next tile
};

/// What each exit finds below it, in the tiles that its water goes on to, in a sweep up.
template <class Value>
class UpBorders {
public:
    explicit UpBorders(const TiledForest& forest) : forest_(&forest), below_(forest.exit_count()) {}

    /// First stage: what lies along the tile's own part of the paths that come into it.
    template <class Channel>
    void collect(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field) {
        run(tile, flow, channel, field, false);
        for (const Inlet& inlet : forest_->inlets(tile)) below_[inlet.exit] = field[inlet.to];
    }

    /// Second stage: adds to each exit what lies beyond the tile below it.
    template <class Channel>
    void solve() {
        using Rule = tile_sweep_detail::Rule<Channel>;
        const auto order = forest_->exit_order();
        for (std::size_t i = order.size(); i-- > 0;) {
            const Exit next = forest_->next(order[i]);
            if (next != no_exit) below_[order[i]] = Rule::combine(below_[order[i]], below_[next]);
        }
    }

    /// Third stage: the field of a tile, void cells 0.
    template <class Channel>
    void fill(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field) const {
        run(tile, flow, channel, field, true);
    }

    /// The value of the cell that an exit drains to.
    [[nodiscard]] const Value& below(Exit exit) const { return below_[exit]; }

private:
    template <class Channel>
    void run(Tile tile, const TileFlow& flow, const Channel& channel, std::vector<Value>& field, bool with_below) const {
        using Rule = tile_sweep_detail::Rule<Channel>;
        field.assign(flow.size(), Value{});
        if (with_below) {
            for (std::size_t i = 0; i < flow.exits().size(); ++i) field[flow.exits()[i]] = below_[forest_->first_exit(tile) + i];
        }
        const auto order = flow.order();
        for (std::size_t i = order.size(); i-- > 0;) {
            const Local cell = order[i];
            const Local below = flow.down(cell);
            const Value own = Rule::own(channel, cell, below == ends_here);
            const bool has_below = below < ends_here || (below == leaves_tile && with_below);
            field[cell] = has_below ? Rule::combine(own, field[below < ends_here ? below : cell]) : own;
        }
    }

    const TiledForest* forest_;
    std::vector<Value> below_;
};

/// Works on all tiles: `work(tile, desk)`, the desk's `flow` having been read. `Desk` holds a TileFlow and whatever room the work needs.
template <class Desk, class Work>
void for_each_tile(const TiledForest& forest, const Executor& executor, Workspaces<Desk>& desks, Work work) {
    executor.for_each(forest.tiles().count(), [&](std::size_t tile) {
        const auto desk = desks.lease();
        desk->flow.read(forest.codes(), forest.tiles().window(static_cast<Tile>(tile)));
        work(static_cast<Tile>(tile), *desk);
    });
}

}  // namespace rillclock
