#pragma once

#include <cstddef>
#include <cstdint>
#include <span>
#include <tuple>
#include <utility>

#include "reference/plain/flow_forest.hpp"
#include "rillclock/forest/sweep.hpp"

namespace rillclock {

/// The two sweeps over a flow forest in their plain form, over the whole raster. A sweep takes any number of channels (see rillclock/forest/sweep.hpp)
/// and returns a tuple with the result of each. Cost: linear in the cells, for each channel.
namespace down {

/// The result of `Max`: the greatest value, and the cell where the way that brings it begins.
struct Farthest {
    Raster<std::int64_t> value;
    Raster<Cell> head;
};

}  // namespace down

namespace sweep_detail {

/// What a channel gives.
template <class Channel>
struct ResultOf;
template <class W>
struct ResultOf<down::Sum<W>> { using type = Raster<std::int64_t>; };
/// Among equal ways that arrive, that of the tributary with the smaller index wins.
template <class S>
struct ResultOf<down::Max<S>> { using type = down::Farthest; };
template <class O>
struct ResultOf<down::Min<O>> { using type = Raster<double>; };
template <class S>
struct ResultOf<up::Add<S>> { using type = Raster<std::int64_t>; };
template <class O>
struct ResultOf<up::Max<O>> { using type = Raster<double>; };
template <class L>
struct ResultOf<up::First<L>> { using type = Raster<std::uint32_t>; };

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
[[nodiscard]] std::tuple<typename sweep_detail::ResultOf<Channels>::type...> sweep_down(const FlowForest& forest, const Channels&... channels) {
    std::tuple<typename sweep_detail::ResultOf<Channels>::type...> results;
    sweep_detail::run(forest, forest.order(), results, std::tie(channels...), std::index_sequence_for<Channels...>());
    return results;
}

/// Sweeps from roots to divides. Void cells keep 0. Returns a tuple with each channel's result.
template <class... Channels>
[[nodiscard]] std::tuple<typename sweep_detail::ResultOf<Channels>::type...> sweep_up(const FlowForest& forest, const Channels&... channels) {
    std::tuple<typename sweep_detail::ResultOf<Channels>::type...> results;
    const auto order = forest.order();
    sweep_detail::run(forest, sweep_detail::Backwards<std::span<const Cell>>{order}, results, std::tie(channels...),
                      std::index_sequence_for<Channels...>());
    return results;
}

}  // namespace rillclock
