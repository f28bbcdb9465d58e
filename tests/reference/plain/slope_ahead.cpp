#include "reference/plain/slope_ahead.hpp"

#include <cstddef>
#include <optional>
#include <utility>
#include <vector>

#include "slope_rules.hpp"

namespace rillclock {
namespace {

/// A whole tree begins at its root: nothing lies beyond.
std::optional<ProfilePlace> nothing_beyond() { return std::nullopt; }

class Walk {
public:
    Walk(const SlopeInputs& inputs, const SlopeRules& rules)
        : in_(inputs), at_top_(rules, inputs.metres_per_elevation_unit),
          result_{.slope = Raster<float>(inputs.forest.rows(), inputs.forest.columns()),
                  .falls_within = Raster<std::uint8_t>(inputs.forest.rows(), inputs.forest.columns())} {}

    /// Visits the tree of a root, each cell after the one below it.
    void visit_tree(Cell root) {
        FlowProfile path(nothing_beyond);
        pending_.push_back({root, 0});
        while (!pending_.empty()) {
            const auto [cell, position] = pending_.back();
            pending_.pop_back();
            visit(path, cell, position);
            in_.forest.for_each_upstream(cell, [&](Cell up) { pending_.push_back({up, position + 1}); });
        }
    }

    [[nodiscard]] SlopeAhead result() { return std::move(result_); }

private:
    struct Pending {
        Cell cell;
        std::size_t position;
    };

    template <class Profile>
    void visit(Profile& path, Cell cell, std::size_t position) {
        const GroundKind kind = in_.kind[cell];
        path.put(position, {.distance_m = from_fixed(in_.flow_distance[cell]), .level = in_.spill[cell],
                            .concentrated = kind != GroundKind::overland});
        result_.slope[cell] = position == 0 ? static_cast<float>(at_top_.floor(kind)) : at_top_.slope(path, kind);
        result_.falls_within[cell] = at_top_.falls_within(path) ? 1 : 0;
    }

    const SlopeInputs& in_;
    SlopeAtTop at_top_;
    SlopeAhead result_;
    std::vector<Pending> pending_;
};

}  // namespace

SlopeAhead slope_ahead(const SlopeInputs& inputs, const SlopeRules& rules) {
    Walk walk(inputs, rules);
    for (const Cell cell : inputs.forest.order()) {
        if (inputs.forest.is_root(cell)) walk.visit_tree(cell);
    }
    return walk.result();
}

}  // namespace rillclock
