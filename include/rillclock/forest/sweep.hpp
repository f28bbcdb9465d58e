#pragma once

#include <algorithm>
#include <array>
#include <cstddef>
#include <cstdint>

namespace rillclock {

/// The closed set of channels that the two sweeps over a flow forest carry.
///
/// A sweep down goes from divides to roots, a sweep up from roots to divides. The weights of a channel are a function of the cell alone and do
/// not change while the sweep runs: what depends on a swept value becomes the weight of a later sweep. Only such channels can be cut into
/// tiles and put together again (tile_sweep.hpp). Sums are integers, so that they do not depend on the order in which they were made.
namespace down {

/// total(c) = weight(c) + Σ total(tributaries of c).
template <class Weight>
struct Sum {
    Weight weight;
};

/// value(c) = the greatest of value(t) + step(t) over the tributaries t of c; 0 where there are none.
template <class Step>
struct Max {
    Step step;
};

/// value(c) = the least of own(c) and the values of its tributaries.
template <class Own>
struct Min {
    Own own;
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
};

/// `Add` of several totals at a time, from 0 up: one walk serves them all. What would be more than `most` is `most`, in whatever order the
/// steps are added.
struct Lanes {
    static constexpr std::size_t count = 8;
    static constexpr std::int32_t most = (1 << 30) - 64;   ///< the same as a float
    std::array<std::int32_t, count> total{};

    [[nodiscard]] friend Lanes operator+(const Lanes& a, const Lanes& b) {
        Lanes sum;
        for (std::size_t lane = 0; lane < count; ++lane) sum.total[lane] = std::min(a.total[lane] + b.total[lane], most);
        return sum;
    }
};

/// totals(c) = steps(c) + totals(the cell below c); 0 at roots.
template <class Steps>
struct AddLanes {
    Steps steps;
};

/// value(c) = the greater of own(c) and the value of the cell below.
template <class Own>
struct Max {
    Own own;
};

/// value(c) = label(c) where that is not 0, else the value of the cell below: the first label met on the way down.
template <class Label>
struct First {
    Label label;
};

template <class Step>
Add(Step) -> Add<Step>;
template <class Steps>
AddLanes(Steps) -> AddLanes<Steps>;
template <class Own>
Max(Own) -> Max<Own>;
template <class Label>
First(Label) -> First<Label>;

}  // namespace up

}  // namespace rillclock
