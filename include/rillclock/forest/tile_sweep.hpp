#pragma once

#include <algorithm>
#include <cstdint>
#include <limits>
#include <span>
#include <type_traits>
#include <vector>

#include "rillclock/forest/sweep.hpp"
#include "rillclock/forest/tiled_forest.hpp"
#include "rillclock/raster/large_memory.hpp"

namespace rillclock {

/// The sweeps of sweep.hpp in three stages: each tile alone (`collect_down`, `collect_up`), once over the exits (`solve`), each tile again
/// (`fill_down`, `fill_up`). Sweeps of one direction share their walk over a tile: that walk, not the arithmetic, is what they cost.
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
    static constexpr Value nothing = 0;   ///< changes nothing when joined
    static Value start(const down::Sum<W>& channel, Local cell) { return channel.weight(cell); }
    static Value join(Value a, Value b) { return a + b; }
    static Value sent(const down::Sum<W>&, Local, Value value) { return value; }
};

template <class S>
struct Rule<down::Max<S>> {
    using Value = std::int64_t;
    static constexpr bool moves = true;
    static constexpr Value nothing = 0;
    static Value start(const down::Max<S>&, Local) { return 0; }
    static Value join(Value a, Value b) { return std::max(a, b); }
    static Value sent(const down::Max<S>& channel, Local cell, Value value) { return value + channel.step(cell); }
};

template <class O>
struct Rule<down::Min<O>> {
    using Value = double;
    static constexpr bool moves = false;
    static constexpr Value nothing = std::numeric_limits<double>::infinity();
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

template <class S>
struct Rule<up::AddLanes<S>> {
    using Value = up::Lanes;
    static Value own(const up::AddLanes<S>& channel, Local cell, bool is_root) { return is_root ? Value{} : channel.steps(cell); }
    static Value combine(const Value& near, const Value& far) { return near + far; }
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

/// What a channel's values are: 64-bit integers for sums and distances, doubles for levels, 32-bit numbers for labels.
template <class Channel>
using SweptValue = typename tile_sweep_detail::Rule<Channel>::Value;

namespace tile_sweep_detail {

/// Sets every cell of a tile to its start, voids to 0.
template <class Field, class Start>
void start_field(const TileFlow& flow, Field& field, Start start) {
    using Value = typename Field::value_type;
    field.resize(flow.size());
    if (flow.order().size() == flow.size()) {
        for (Local cell = 0; cell < flow.size(); ++cell) field[cell] = start(cell);
        return;
    }
    for (Local cell = 0; cell < flow.size(); ++cell) field[cell] = flow.code(cell) == flow_void ? Value{} : start(cell);
}

template <class Borders, class Channel, class Field>
struct DownPart;
template <class Borders, class Channel, class Field>
struct UpPart;

}  // namespace tile_sweep_detail

/// What reaches the passed cells of all tiles of their own tile's water, from the first stage of a sweep down to the third. Of a tile where more than
/// one cell in eight is passed nothing is kept, so that it is a byte a cell at most; its whole field is made again instead.
template <class Value>
class PassedValues {
public:
    explicit PassedValues(const TiledForest& forest) : first_(forest.tiles().count() + 1U, 0) {
        for (Tile tile = 0; tile < forest.tiles().count(); ++tile) {
            const Local count = forest.passed_count(tile);
            first_[tile + 1U] = first_[tile] + (count <= forest.tiles().window(tile).size() / 8 ? count : 0);
        }
        values_ = std::vector<Value, ZeroMemory<Value>>(first_.back());
    }
    /// Whether a tile that water passes keeps its values.
    [[nodiscard]] bool is_kept(Tile tile) const { return first_[tile] != first_[tile + 1U]; }
    /// Bytes that the values take.
    [[nodiscard]] std::size_t bytes() const { return values_.size() * sizeof(Value); }
    /// Keeps nothing any more, of any tile.
    void clear() {
        std::fill(first_.begin(), first_.end(), 0);
        values_ = {};
    }
    /// By passed cell, in the order of TilePassage::cells; none where they are not kept.
    [[nodiscard]] std::span<Value> of(Tile tile) { return std::span(values_).subspan(first_[tile], first_[tile + 1U] - first_[tile]); }

private:
    std::vector<std::size_t> first_;   ///< by tile
    std::vector<Value, ZeroMemory<Value>> values_;
};

/// What each exit sends on to the next tile in a sweep down.
template <class Value_>
class DownBorders {
public:
    using Value = Value_;
    explicit DownBorders(const TiledForest& forest)
        : forest_(&forest), sent_(forest.exit_count()), moved_(forest.exit_count(), 0) {}

    /// This channel's part in a sweep over one tile: `field` takes a value a cell.
    template <class Channel, class Field>
    [[nodiscard]] auto part(const Channel& channel, Field& field) {
        return tile_sweep_detail::DownPart<DownBorders, Channel, Field>{*this, channel, field};
    }
    /// The same of a tile whose passed cells keep, or have kept, what of its own water reaches them: a value each in `own`, or none at all.
    template <class Channel, class Field>
    [[nodiscard]] auto part(const Channel& channel, Field& field, std::span<Value> own) {
        return tile_sweep_detail::DownPart<DownBorders, Channel, Field>{*this, channel, field, own};
    }
    /// The same of borders that are only read.
    template <class Channel, class Field>
    [[nodiscard]] auto part(const Channel& channel, Field& field) const {
        return tile_sweep_detail::DownPart<const DownBorders, Channel, Field>{*this, channel, field};
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

private:
    template <class, class, class>
    friend struct tile_sweep_detail::DownPart;

    [[nodiscard]] Value moved_value(Exit exit) const {
        if constexpr (std::is_same_v<Value, std::int64_t>) return moved_[exit];
        else return 0;
    }

    const TiledForest* forest_;
    std::vector<Value> sent_;
    std::vector<std::int64_t> moved_;   ///< by exit: along the path that its water takes through the next tile
};

/// What each exit finds below it, in the tiles that its water goes on to, in a sweep up.
template <class Value_>
class UpBorders {
public:
    using Value = Value_;
    explicit UpBorders(const TiledForest& forest) : forest_(&forest), below_(forest.exit_count()) {}

    /// This channel's part in a sweep over one tile: `field` takes a value a cell.
    template <class Channel, class Field>
    [[nodiscard]] auto part(const Channel& channel, Field& field) {
        return tile_sweep_detail::UpPart<UpBorders, Channel, Field>{*this, channel, field};
    }
    /// The same of borders that are only read.
    template <class Channel, class Field>
    [[nodiscard]] auto part(const Channel& channel, Field& field) const {
        return tile_sweep_detail::UpPart<const UpBorders, Channel, Field>{*this, channel, field};
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

    /// The value of the cell that an exit drains to.
    [[nodiscard]] const Value& below(Exit exit) const { return below_[exit]; }

private:
    template <class, class, class>
    friend struct tile_sweep_detail::UpPart;

    const TiledForest* forest_;
    std::vector<Value> below_;
};

namespace tile_sweep_detail {

template <class Borders, class Channel, class Field>
struct DownPart {
    using Rule = tile_sweep_detail::Rule<Channel>;
    using Value = typename Borders::Value;
    static constexpr bool moves = Rule::moves;
    Borders& borders;
    Channel channel;
    Field& field;                ///< a vector of values
    std::span<Value> own = {};   ///< by passed cell: what reaches it of the water that begins in the tile; empty where that is not kept

    void keep_own(const TilePassage& passage) const {
        for (std::size_t i = 0; i < own.size(); ++i) own[i] = field[passage.cells()[i].cell];
    }
    void start_passed(const TilePassage& passage) const {
        field.resize(passage.frame().size());
        for (const auto& passed : passage.cells()) field[passed.cell] = Rule::nothing;
    }
    void add_own(const TilePassage& passage) const {
        for (std::size_t i = 0; i < own.size(); ++i) {
            const Local cell = passage.cells()[i].cell;
            field[cell] = Rule::join(field[cell], own[i]);
        }
    }
    void start(const TileFlow& flow) const {
        start_field(flow, field, [this](Local cell) { return Rule::start(channel, cell); });
    }
    /// Adds what comes from other tiles, before anything flows.
    void let_in(Tile tile) const {
        for (const Inlet& inlet : borders.forest_->inlets(tile)) field[inlet.to] = Rule::join(field[inlet.to], borders.sent_[inlet.exit]);
    }
    void send(Local cell, Local below) const { field[below] = Rule::join(field[below], Rule::sent(channel, cell, field[cell])); }
    void keep_sent(Tile tile, const TileFlow& flow) const {
        const Exit first = borders.forest_->first_exit(tile);
        for (std::size_t i = 0; i < flow.exits().size(); ++i) {
            const Local exit = flow.exits()[i];
            borders.sent_[first + i] = Rule::sent(channel, exit, field[exit]);
        }
    }
    /// How much a value grows on its way from a cell to where it leaves the tile, the exit's own step included.
    void move(Local cell, Local below) const {
        if constexpr (moves) {
            if (below == ends_here) field[cell] = 0;
            else field[cell] = channel.step(cell) + (below == leaves_tile ? 0 : field[below]);
        }
    }
    void keep_moved(Tile tile) const {
        if constexpr (moves) {
            for (const Inlet& inlet : borders.forest_->inlets(tile)) borders.moved_[inlet.exit] = field[inlet.to];
        }
    }
};

template <class Borders, class Channel, class Field>
struct UpPart {
    using Rule = tile_sweep_detail::Rule<Channel>;
    using Value = typename Borders::Value;
    Borders& borders;
    Channel channel;
    Field& field;   ///< a vector of values

    void make_room(const TilePassage& passage) const { field.resize(passage.frame().size()); }
    void start(const TileFlow& flow) const {
        if (flow.order().size() == flow.size()) field.resize(flow.size());   // every cell will be set
        else field.assign(flow.size(), Value{});
    }
    void let_in(Tile tile, const TileFlow& flow) const {
        const Exit first = borders.forest_->first_exit(tile);
        for (std::size_t i = 0; i < flow.exits().size(); ++i) field[flow.exits()[i]] = borders.below_[first + i];
    }
    template <bool with_below>
    void take(Local cell, Local below) const {
        const Value own = Rule::own(channel, cell, below == ends_here);
        if (below < ends_here) field[cell] = Rule::combine(own, field[below]);
        else if (with_below && below == leaves_tile) field[cell] = Rule::combine(own, field[cell]);
        else field[cell] = own;
    }
    void keep_below(Tile tile) const {
        for (const Inlet& inlet : borders.forest_->inlets(tile)) borders.below_[inlet.exit] = field[inlet.to];
    }
};

template <class... Parts>
void send_all(const TileFlow& flow, const Parts&... parts) {
    for (const Local cell : flow.order()) {
        const Local below = flow.down(cell);
        if (below < ends_here) (parts.send(cell, below), ...);
    }
}

template <bool with_below, class... Parts>
void take_all(const TileFlow& flow, const Parts&... parts) {
    const auto order = flow.order();
    for (std::size_t i = order.size(); i-- > 0;) {
        const Local cell = order[i];
        const Local below = flow.down(cell);
        (parts.template take<with_below>(cell, below), ...);
    }
}

}  // namespace tile_sweep_detail

/// First stage of sweeps down, one walk over the tile for all of them: what leaves it of the water that begins in it.
template <class... Parts>
void collect_down(Tile tile, const TileFlow& flow, const Parts&... parts) {
    (parts.start(flow), ...);
    tile_sweep_detail::send_all(flow, parts...);
    (parts.keep_sent(tile, flow), ...);
    (parts.keep_own(flow.passage()), ...);
    if constexpr ((Parts::moves || ...)) {
        for (const auto& [cell, below] : flow.passage().cells()) (parts.move(cell, below), ...);
        (parts.keep_moved(tile), ...);
    }
}

/// Third stage of sweeps down: the fields of a tile, void cells 0.
template <class... Parts>
void fill_down(Tile tile, const TileFlow& flow, const Parts&... parts) {
    (parts.start(flow), ...);
    (parts.let_in(tile), ...);
    tile_sweep_detail::send_all(flow, parts...);
}

/// Third stage of sweeps down at the cells alone that other tiles' water passes, of parts that kept what is the tile's own there. Sets, and asks
/// for weights of, no other cell.
template <class... Parts>
void fill_passed_down(Tile tile, const TilePassage& passage, const Parts&... parts) {
    (parts.start_passed(passage), ...);
    (parts.let_in(tile), ...);
    const auto cells = passage.cells();
    for (std::size_t i = cells.size(); i-- > 0;) {
        if (cells[i].below < ends_here) (parts.send(cells[i].cell, cells[i].below), ...);
    }
    (parts.add_own(passage), ...);
}

/// First stage of sweeps up: what lies along the tile's own part of the paths that come into it. Sets, and asks for weights of, the cells that
/// these pass alone.
template <class... Parts>
void collect_up(Tile tile, const TilePassage& passage, const Parts&... parts) {
    (parts.make_room(passage), ...);
    for (const auto& [cell, below] : passage.cells()) (parts.template take<false>(cell, below), ...);
    (parts.keep_below(tile), ...);
}

/// The same of a tile whose whole flow was read.
template <class... Parts>
void collect_up(Tile tile, const TileFlow& flow, const Parts&... parts) {
    collect_up(tile, flow.passage(), parts...);
}

/// The same, and sets every cell to what lies on its path within the tile, void cells to 0.
template <class... Parts>
void collect_up_within(Tile tile, const TileFlow& flow, const Parts&... parts) {
    (parts.start(flow), ...);
    tile_sweep_detail::take_all<false>(flow, parts...);
    (parts.keep_below(tile), ...);
}

/// Third stage of sweeps up: the fields of a tile, void cells 0.
template <class... Parts>
void fill_up(Tile tile, const TileFlow& flow, const Parts&... parts) {
    (parts.start(flow), ...);
    (parts.let_in(tile, flow), ...);
    tile_sweep_detail::take_all<true>(flow, parts...);
}

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
