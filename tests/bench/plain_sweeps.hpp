#pragma once

#include <cstdint>

#include "rillclock/forest/flow_code.hpp"

namespace rillclock::bench {

/// Contributing area in cells by the plain walk over the whole raster, against which the sweeps down are measured.
///
/// Each cell without tributaries starts a walk that ends where other tributaries are still awaited (G. Zhou, H. Wei, S.
/// Fu, A fast and simple algorithm for calculating flow accumulation matrices from raster digital elevation, Frontiers
/// of Earth Science 13, 2019). Codes without a cycle. Linear.
[[nodiscard]] Raster<std::int64_t> plain_accumulation(const Raster<FlowCode>& codes);

/// Distance to the root by walks over the whole raster, against which the sweeps up are measured: from each cell down
/// to the first whose distance is known, and back. `straight` and `diagonal` are lengths of steps. Codes without a
/// cycle. Linear.
[[nodiscard]] Raster<std::int64_t> plain_distance(const Raster<FlowCode>& codes, std::int64_t straight,
                                                  std::int64_t diagonal);

}  // namespace rillclock::bench
