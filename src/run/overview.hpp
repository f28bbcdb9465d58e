#pragma once

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/deliver/report.hpp"
#include "rillclock/terrain/elevation_store.hpp"

namespace rillclock {

/// Gathers the report's small pictures of the rasters strip by strip.
class OverviewSampler {
public:
    explicit OverviewSampler(const Grid& grid);

    void look(const RegionStrip& strip);
    /// With the relief, from the elevations.
    [[nodiscard]] ReportOverview take(const ElevationStore& elevations, double metres_per_unit, Length cell_side);

private:
    std::int64_t rows_;
    std::int64_t columns_;
    ReportOverview overview_;
};

}  // namespace rillclock
