#pragma once

#include <optional>
#include <vector>

#include "rillclock/catchment/arrival_histogram.hpp"
#include "rillclock/io/result_folder.hpp"
#include "overview.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "study_data.hpp"

namespace rillclock {

/// What the last pass over the raster works on.
struct LastPass {
    const Study& study;
    const StudyRain& rain;
    const TerrainData& terrain;
    const TiledTravel& travel;
    const TiledOwners& owners;
    const std::vector<DesignPoint>& points;
    const PointTree& tree;
    ResultFolder& folder;
    const Progress& progress;
    /// Where outlines and the report's pictures are gathered; filled by the pass.
    std::optional<StudyRegions>& regions;
    OverviewSampler& overview;
    /// Points whose whole catchment has isochrones besides those of the last points.
    const std::vector<PointNumber>& isochrone_catchments;
    HistogramTally* histograms = nullptr;   ///< filled where peaks are asked for
};

/// Makes everything about each tile once more: writes the rasters and gathers the arrivals, from which each point's
/// heads are found.
///
/// Where each point has a storm of its own the raster is passed twice, since times in travel_time.tif depend on storms
/// that are solved from the arrivals. Throws an input error where a storm does not settle.
[[nodiscard]] std::vector<PointHeads> heads_and_rasters(const LastPass& pass);

/// The same without the rasters.
[[nodiscard]] std::vector<PointHeads> heads_alone(const LastPass& pass);

}  // namespace rillclock
