#pragma once

#include <algorithm>
#include <vector>

#include "rillclock/graph/partial_forest.hpp"
#include "tiled_terrain.hpp"

namespace rillclock {

/// One step over a pass, from the cell with the smaller index of the two; `flow_root` as code means out of the data.
struct Crossing {
    Position position = 0;
    FlowCode code = flow_root;
};

/// What a crossing is compared by, but for what its place tells.
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

/// Finds where water may cross between nodes of a tile or leave the data from it: for each pair of nodes the lowest
/// pass that the tile knows, and perhaps some that are higher. Takes elevations and codes with their halo, and nodes in
/// `desk.numbers`. Where not `level`, every direction in the tile falls.
///
/// A pass between x and y is left out where the cell below x is lower than x and touches y, or the other way round:
/// that cell and y are a lower pass between the same two basins. Source: Cordonnier, Bovy & Braun 2019 (the graph of basins and its
/// passes); what is left out is ours. Cost: linear in the cells, in vector registers, and the pairs that are left.
template <class Z>
[[nodiscard]] std::vector<KeyedEdge<PassKey<Z>>> find_crossings(Desk<Z>& desk, bool level);

}  // namespace rillclock
