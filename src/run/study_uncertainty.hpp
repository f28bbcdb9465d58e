#pragma once

#include <optional>
#include <vector>

#include "rillclock/study/uncertainty.hpp"
#include "study_data.hpp"

namespace rillclock {

/// What a study's draws are made from.
struct UncertaintyParts {
    const Study& study;
    const StudyRain& rain;
    const SurfaceData& surface;
    const TiledTravel& travel;
    const TiledOwners& owners;
    const std::vector<DesignPoint>& points;
    const PointTree& tree;
    const std::vector<PointHeads>& heads;
};

/// Whether each class of the book, by position, is met in the data.
[[nodiscard]] std::vector<bool> classes_met(const CoverBook& book, const std::vector<ClassCount>& counts);

/// Keeps heads, and draws; none where the study does not ask for it.
[[nodiscard]] std::optional<Uncertainty> uncertainty_of_study(const UncertaintyParts& parts, const Progress& progress);

/// Names the cover classes of the data whose roughness has no range, since those are drawn as if they were known.
[[nodiscard]] Notices notices_of_ranges(const Study& study, const SurfaceData& surface);

}  // namespace rillclock
