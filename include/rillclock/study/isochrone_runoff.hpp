#pragma once

#include <optional>
#include <span>
#include <vector>

#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/study/peaks.hpp"

namespace rillclock {

/// What runs off within an isochrone band, at the return period that the bands' times are for.
struct BandRunoff {
    Area runoff;                            ///< C·A of the band: of each subarea's part, with the coefficient of the whole subarea
    Area running;                           ///< of this band and all earlier ones of its scope and point
    Duration time;                          ///< by which all of the band has arrived: its end, or the greatest time where that comes first
    std::optional<Intensity> intensity;     ///< of rain as long as that, or as the least time; none where the rain ends before
    std::optional<Discharge> flow;          ///< of that intensity and the running C·A
};

/// What the runoff of bands is made from.
struct BandRunoffInputs {
    const Study& study;
    const StudyRain& rain;
    std::span<const Outlet> outlets;
    const StudyPeaks& peaks;
    Duration step;                          ///< between isochrones
};

/// For each band, in their order; nothing where the study has no peaks, or where a subarea within the bands of the same scope and
/// point has no coefficient. Coefficients hold their frequency factor, as those of the hand-over table do, so that every flow can be
/// found again from that, the areas and the rain. Cost: linear in the bands and their parts.
[[nodiscard]] std::vector<std::optional<BandRunoff>> band_runoffs(std::span<const IsochroneBand> bands, const BandRunoffInputs& in);

}  // namespace rillclock
