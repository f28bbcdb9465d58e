#pragma once

#include <cstdint>
#include <tuple>
#include <utility>

#include "rillclock/forest/flow_forest.hpp"

namespace rillclock {

/// The two sweeps over a flow forest, and the closed set of channels they carry.
///
/// A sweep down goes from divides to roots, a sweep up from roots to divides. A sweep takes any number of channels and returns a
/// tuple with the result of each. The weights of a channel are a function of the cell alone and do not change while the sweep
/// runs: what depends on a swept value becomes the weight of a later sweep. Only such channels can be cut into tiles and put together
/// again. Sums are integers, so that they do not depend on the order in which they were made.
///
/// Cost: linear in the cells, for each channel.
namespace down {

/// total(c) = weight(c) + Σ total(tributaries of c).
template <class Weight>
struct Sum {
    Weight weight;
    using Result = Raster<std::int64_t>;
};

/// The result of `Max`: the greatest value, and the cell where the way that brings it begins.
struct Farthest {
    Raster<std::int64_t> value;
    Raster<Cell> head;
};

/// value(c) = the greatest of value(t) + step(t) over the tributaries t of c; 0, with itself as head, where there are none.
/// Among equal ones the tributary with the smaller index wins.
template <class Step>
struct Max {
    Step step;
    using Result = Farthest;
};

/// value(c) = the least of own(c) and the values of its tributaries.
template <class Own>
struct Min {
    Own own;
    using Result = Raster<double>;
};

template <class Weight>
Sum(Weight) -> Sum<Weight>;
template <class Step>
Max(Step) -> Max<Step>;
template <class Own>
Min(Own) -> Min<Own>;

}  // namespace down

namespace up {

/// total(c) = step(c) + total(the cell below c); 0 at roots.
template <class Step>
struct Add {
    Step step;
    using Result = Raster<std::int64_t>;
};

/// value(c) = the greater of own(c) and the value of the cell below.
template <class Own>
struct Max {
    Own own;
    using Result = Raster<double>;
};

/// value(c) = label(c) where that is not 0, else the value of the cell below: the first label met on the way down.
template <class Label>
struct First {
    Label label;
    using Result = Raster<std::uint32_t>;
};

template <class Step>
Add(Step) -> Add<Step>;
template <class Own>
Max(Own) -> Max<Own>;
template <class Label>
First(Label) -> First<Label>;

}  // namespace up

namespace sweep_detail {

template <class T>
Raster<T> like(const FlowForest& forest) {
    return Raster<T>(forest.rows(), forest.columns());
}

template <class W>
void prepare(const FlowForest& f, const down::Sum<W>&, Raster<std::int64_t>& result) {
    result = like<std::int64_t>(f);
}
template <class W>
void settle(const FlowForest& f, const down::Sum<W>& channel, Cell cell, Raster<std::int64_t>& result) {
    std::int64_t total = channel.weight(cell);
    f.for_each_upstream(cell, [&](Cell from) { total += result[from]; });
    result[cell] = total;
}

template <class S>
void prepare(const FlowForest& f, const down::Max<S>&, down::Farthest& result) {
    result = {like<std::int64_t>(f), like<Cell>(f)};
}
template <class S>
void settle(const FlowForest& f, const down::Max<S>& channel, Cell cell, down::Farthest& result) {
    std::int64_t greatest = 0;
    Cell head = no_cell;
    f.for_each_upstream(cell, [&](Cell from) {
        const std::int64_t arriving = result.value[from] + channel.step(from);
        if (head != no_cell && arriving <= greatest) return;
        greatest = arriving;
        head = result.head[from];
    });
    result.value[cell] = greatest;
    result.head[cell] = head == no_cell ? cell : head;
}

template <class O>
void prepare(const FlowForest& f, const down::Min<O>&, Raster<double>& result) {
    result = like<double>(f);
}
template <class O>
void settle(const FlowForest& f, const down::Min<O>& channel, Cell cell, Raster<double>& result) {
    double least = channel.own(cell);
    f.for_each_upstream(cell, [&](Cell from) { least = result[from] < least ? result[from] : least; });
    result[cell] = least;
}

template <class S>
void prepare(const FlowForest& f, const up::Add<S>&, Raster<std::int64_t>& result) {
    result = like<std::int64_t>(f);
}
template <class S>
void settle(const FlowForest& f, const up::Add<S>& channel, Cell cell, Raster<std::int64_t>& result) {
    const Cell below = f.downstream(cell);
    result[cell] = below == no_cell ? 0 : channel.step(cell) + result[below];
}

template <class O>
void prepare(const FlowForest& f, const up::Max<O>&, Raster<double>& result) {
    result = like<double>(f);
}
template <class O>
void settle(const FlowForest& f, const up::Max<O>& channel, Cell cell, Raster<double>& result) {
    const Cell below = f.downstream(cell);
    const double own = channel.own(cell);
    result[cell] = below == no_cell || result[below] < own ? own : result[below];
}

template <class L>
void prepare(const FlowForest& f, const up::First<L>&, Raster<std::uint32_t>& result) {
    result = like<std::uint32_t>(f);
}
template <class L>
void settle(const FlowForest& f, const up::First<L>& channel, Cell cell, Raster<std::uint32_t>& result) {
    const Cell below = f.downstream(cell);
    const std::uint32_t own = channel.label(cell);
    result[cell] = own != 0 || below == no_cell ? own : result[below];
}

template <class Cells, class Results, class Channels, std::size_t... I>
void run(const FlowForest& f, const Cells& cells, Results& results, const Channels& channels,
         std::index_sequence<I...>) {
    (prepare(f, std::get<I>(channels), std::get<I>(results)), ...);
    for (const Cell cell : cells) (settle(f, std::get<I>(channels), cell, std::get<I>(results)), ...);
}

/// A sequence read backwards; `std::views::reverse` is beyond the linter we use.
template <class Sequence>
struct Backwards {
    const Sequence& sequence;
    auto begin() const { return sequence.rbegin(); }
    auto end() const { return sequence.rend(); }
};

}  // namespace sweep_detail

/// Sweeps from divides to roots. Void cells keep 0. Returns a tuple with each channel's result.
template <class... Channels>
[[nodiscard]] std::tuple<typename Channels::Result...> sweep_down(const FlowForest& forest, const Channels&... channels) {
    std::tuple<typename Channels::Result...> results;
    sweep_detail::run(forest, forest.order(), results, std::tie(channels...), std::index_sequence_for<Channels...>());
    return results;
}

/// Sweeps from roots to divides. Void cells keep 0. Returns a tuple with each channel's result.
template <class... Channels>
[[nodiscard]] std::tuple<typename Channels::Result...> sweep_up(const FlowForest& forest, const Channels&... channels) {
    std::tuple<typename Channels::Result...> results;
    const auto order = forest.order();
    sweep_detail::run(forest, sweep_detail::Backwards<std::span<const Cell>>{order}, results, std::tie(channels...),
                      std::index_sequence_for<Channels...>());
    return results;
}

}  // namespace rillclock
