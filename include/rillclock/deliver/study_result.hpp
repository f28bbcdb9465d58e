#pragma once

#include <algorithm>
#include <optional>
#include <span>
#include <string>
#include <vector>

#include "rillclock/catchment/drawn_catchments.hpp"
#include "rillclock/catchment/outlet.hpp"
#include "rillclock/catchment/point_network.hpp"
#include "rillclock/catchment/study_regions.hpp"
#include "rillclock/core/notice.hpp"
#include "rillclock/io/elevation_file.hpp"
#include "rillclock/io/reference_system.hpp"
#include "rillclock/study/peaks.hpp"
#include "rillclock/study/study.hpp"
#include "rillclock/study/point_methods.hpp"
#include "rillclock/study/study_rain.hpp"
#include "rillclock/study/uncertainty.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {

/// A file the answer came from.
struct InputFile {
    std::string role;      ///< "elevation"
    std::string name;      ///< as the study names it
    std::string sha256;
};

/// How many cells of the data have a surface class.
struct ClassCount {
    int code = 0;
    std::int64_t cells = 0;
};

/// How many cells of the data have a soil group, or none.
struct SoilCount {
    CellSoil soil = CellSoil::unknown;
    std::int64_t cells = 0;
};

/// What is known of the data as a whole.
struct DataSummary {
    std::int64_t cells = 0;        ///< of the grid
    std::int64_t void_cells = 0;
    std::vector<ClassCount> classes;
    std::vector<SoilCount> soils = {};    ///< where the study has a raster of them
};

/// Everything a finished study has to say; what the writers of this room write, and they compute nothing.
struct StudyResult {
    const Study& study;
    const ResolvedStudy& resolved;
    const TravelRules& rules;
    const StudyRain& rain;
    const Grid& grid;
    const ReferenceSystem& system;
    const ElevationFormat& format;
    const CoverBook& book;
    std::span<const MappedSection> sections;   ///< that mapped channels state
    std::span<const SurfaceHydraulics> surface_classes;
    const std::vector<Outlet>& outlets;
    const std::vector<PointMethods>& methods;   ///< of each outlet
    const StudyNetwork& network;
    const StudyPeaks& peaks;                    ///< nothing where the study has no rain by duration
    const Notices& notices;            ///< by effect on the time, the greatest first
    const std::vector<InputFile>& inputs;
    const DataSummary& data;
    std::span<const std::string> reviewed = {};   ///< a person's word on each notice; empty where there is none at all
    std::span<const DrawnDifference> drawn = {};   ///< hand-drawn catchments beside those of the elevations, by point
    const Uncertainty* uncertainty = nullptr;   ///< null where the study does not ask for it
    const IsochroneRules* isochrones = nullptr; ///< null where the study does not ask for them
};

/// The intensity of the storm that a point's paths and segments are for; none where sheet flow does not depend on it.
[[nodiscard]] inline std::optional<Intensity> sheet_intensity(const StudyResult& result, const Outlet& outlet) {
    if (!result.study.timing.is_kinematic()) return std::nullopt;
    return outlet.storms[result.rain.raster].iteration.intensity();
}

/// The section that the mapped channel of a segment states; null elsewhere.
[[nodiscard]] inline const MappedSection* section_of(const StudyResult& result, const Segment& segment) {
    const bool is_stated = segment.reach_from != nullptr && segment.reach_from->section != no_section;
    return is_stated ? &result.sections[segment.reach_from->section] : nullptr;
}

/// Whether pipes or stated times shorten or lengthen ways, which the times of cells know nothing of: those are over the ground.
[[nodiscard]] inline bool has_stated_times(const StudyResult& result) {
    return std::any_of(result.network.edits.begin(), result.network.edits.end(), [](const PointEdit& edit) { return edit.changes_times(); });
}

/// The name of a design point.
[[nodiscard]] inline const std::string& point_name(const StudyResult& result, PointNumber number) {
    return result.outlets[number - 1].point.name;
}

/// What lengths along the grid were multiplied with.
[[nodiscard]] inline double step_weight(const StudyResult& result) {
    return result.study.surface.unbiased_lengths ? unbiased_step_weight : 1.0;
}

/// The 2-year 24-hour depth of a point: that of its rain zone, where there are zones.
[[nodiscard]] inline const std::optional<Length>& two_year_depth(const StudyResult& result, const Outlet& outlet) {
    return result.rain.depth_of(outlet.rain_zone.number);
}

/// The cover class of a segment; null in channels, where the cover does not matter.
[[nodiscard]] inline const CoverClass* cover_of(const StudyResult& result, const Segment& segment) {
    return segment.surface ? &result.book.classes()[*segment.surface] : nullptr;
}

}  // namespace rillclock
