#pragma once

#include <mutex>
#include <vector>

#include "rillclock/catchment/arrivals.hpp"
#include "rillclock/travel/tiled_travel.hpp"

namespace rillclock {

/// Whether one storm times all points, or each has its own.
enum class Storms { one, by_point };

/// Gathers the arrivals of every subarea while tiles are worked on threads. What it comes to does not depend on their order.
class ArrivalTally {
public:
    /// `storm_factor` is that of the one storm, or of the reference storm where each point has its own.
    ArrivalTally(const TiledTravel& travel, std::size_t points, double storm_factor, Storms storms = Storms::one)
        : travel_(travel), storm_factor_(storm_factor), storms_(storms), subareas_(points) {}

    /// Adds the cells of a tile whose times and owners are on the desk. Safe to call from several threads.
    void add(const TileDesk& desk);
    /// By number − 1; to be taken once all tiles are in.
    [[nodiscard]] std::vector<Arrivals> take() { return std::move(subareas_); }

private:
    const TiledTravel& travel_;
    double storm_factor_;
    Storms storms_;
    std::mutex mutex_;
    std::vector<Arrivals> subareas_;
};

/// Whether a cell has the edge of the data or a void beside it, from the codes.
[[nodiscard]] bool is_beside_edge(const Raster<FlowCode>& codes, Cell cell);

}  // namespace rillclock
