#pragma once

#include "reference/plain/basins.hpp"
#include "reference/plain/flow_forest.hpp"

namespace rillclock {

/// The flow forest of a terrain: where each cell's water goes, with depressions and flats settled, once and for all.
///
/// Promise: flow leaves every depression over its lowest pass and is opened through there (no cell's elevation is changed); on
/// level ground it takes an exact shortest way out; roots are the border cells where water leaves the data. The answer follows from
/// the elevations and ground lengths alone, ties being broken by written rules.
///
/// Method (Cordonnier, Bovy & Braun 2019): steepest descent; open flats; basins of what is left; the minimum spanning tree of the
/// passes between basins; reversal of the way from each basin's pass back to its lowest cell. Basins are disjoint, so the
/// reversals do not meet. Why it is right: the tree's way from a basin to the outside has the least possible highest pass, and after
/// the reversal every cell of the basin flows along it.
///
/// Cost: linear but for the sorting of passes. `elevations`: NaN where void; at least one cell that is not.
[[nodiscard]] FlowForest flow_forest_of(const Elevations& elevations, const Ground& ground);

/// Opens each basin towards its pass, in `codes` as they are once open flats are settled; closed flats drain to where they are opened.
void open_basins(const Elevations& elevations, const Basins& basins, Raster<FlowCode>& codes);

/// Spill elevation: the lowest level at which the water of a cell gets out, max(own elevation, that of the cell below), in the file's
/// unit; NaN where void. Equal to the classic depression-filled surface.
[[nodiscard]] Elevations spill_elevations(const FlowForest& forest, const Elevations& elevations);

}  // namespace rillclock
