#pragma once

#include <cstddef>
#include <optional>
#include <vector>

#include "rillclock/catchment/outlet.hpp"
#include "rillclock/hydraulics/lump_methods.hpp"
#include "rillclock/study/lump_inputs.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {

/// A point's time by one of the methods that take its catchment as one lump.
struct MethodTime {
    const LumpMethod* method = nullptr;
    LumpTime answer;                   ///< with why it is not applicable, where it is not
    std::optional<double> ratio = {};  ///< to the time along the governing path; none where either is missing
};

/// How far apart the applicable methods lie.
struct MethodSpread {
    std::size_t methods = 0;
    Duration lowest = {};
    Duration median = {};  ///< of an even number the mean of the middle two
    Duration highest = {};
};

/// A point by all lump methods, in the order of `lump_methods()`.
struct PointMethods {
    CatchmentMeasures measures;
    std::vector<MethodTime> times;
    std::optional<MethodSpread> spread;  ///< none where no method is applicable
};

/// What a catchment is classed by, beside its ground.
struct MethodGround {
    const CoverBook& book;
    bool has_soil = false;           ///< whether the study says anything of soil groups
    PointLumpInputs stated = {};     ///< for this point; counts before the cover book
};

/// What was measured of a point's catchment: area; length, fall and equal-area slope of the longest path, its part
/// before the first channel or water; average slope of the land; mean elevation above the point; curve number, runoff
/// coefficient, impervious share and overland n averaged by area from the cover book (n without open water);
/// retardances and the county's K as stated, else those of the surface that prevails. What the book or study lacks is
/// left out, with the reason.
[[nodiscard]] CatchmentMeasures measures_of(const Outlet& outlet, const MethodGround& ground);

/// Times a point by every lump method. `rain` is the storm that the point's paths are for; empty where the study has
/// none.
[[nodiscard]] PointMethods point_methods(const Outlet& outlet, const MethodGround& ground,
                                         const IntensityOfDuration& rain);

}  // namespace rillclock
