#include <catch2/catch.hpp>

#include "reference/drawings.hpp"
#include "reference/heap_flood.hpp"
#include "reference/plain/flow_directions.hpp"

namespace rillclock {
namespace {

bool same(const Elevations& a, const Elevations& b) {
    for (Cell cell = 0; cell < static_cast<Cell>(a.size()); ++cell) {
        if (!(a[cell] == b[cell] || (std::isnan(a[cell]) && std::isnan(b[cell])))) return false;
    }
    return a.size() == b.size();
}

TEST_CASE("flow leaves every depression over its lowest pass: spill elevation equals the textbook flood") {
    for (unsigned seed = 0; seed < 1500; ++seed) {
        std::mt19937 random(seed);
        const double void_share = seed % 3 == 0 ? 0.1 : 0.0;
        const Elevations z = drawings::random_terrain(random, seed % 2 == 0 ? 3 : 1000, void_share);
        const FlowForest forest = flow_forest_of(z, Ground::planar(metres(2), metres(3)));
        INFO("seed " << seed);
        REQUIRE(same(spill_elevations(forest, z), reference::heap_flood(z)));
    }
}

TEST_CASE("every cell that is not void reaches a root, and roots lie on the border") {
    for (unsigned seed = 0; seed < 500; ++seed) {
        std::mt19937 random(seed);
        const Elevations z = drawings::random_terrain(random, 3, 0.05);
        // The forest's constructor refuses cycles and ways out of the data.
        const FlowForest forest = flow_forest_of(z, Ground::planar(metres(1), metres(1)));
        INFO("seed " << seed);
        for (const Cell cell : forest.order()) {
            if (forest.is_root(cell)) REQUIRE(is_border(z, {forest.row(cell), cell % z.columns()}));
        }
    }
}

}  // namespace
}  // namespace rillclock
