#pragma once

#include <string>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// `tables/outlets.csv`: one row a design point, in the order of their numbers. Column names carry the units.
[[nodiscard]] std::string outlets_table(const StudyResult& result);

/// `tables/segments.csv`: one row a segment of every point's governing path, then of its longest path where that is another.
///
/// A row holds what its formula needs; recomputed from the printed numbers it holds to 0.1 %. Times in seconds have six
/// decimals, so that the rows of a path add up to its time to a millisecond.
[[nodiscard]] std::string segments_table(const StudyResult& result);

/// `tables/storms.csv`: one row a point and return period, where the study has rain by duration: time, intensity, governing head, path
/// length and time of sheet flow under the point's own storm. The intensity is empty where the rain does not reach the time.
[[nodiscard]] std::string storms_table(const StudyResult& result);

/// `tables/iterations.csv`: one row a round of the iteration for the storm of a point and return period, where sheet flow depends on it.
[[nodiscard]] std::string iterations_table(const StudyResult& result);

/// `tables/methods.csv`: one row a point and method that takes its catchment as one lump: whether it is applicable or why not, its time,
/// and the ratio to the time along the governing path.
[[nodiscard]] std::string methods_table(const StudyResult& result);

/// `tables/subareas.csv`: one row a point, return period and listed subarea above it: own time, time of the way, arrival, slack, share of
/// the area; those with less slack first.
[[nodiscard]] std::string subareas_table(const StudyResult& result);

/// `tables/peaks.csv`: one row a point and return period: the coefficient, the whole area's peak and the partial area's, the window that makes it,
/// and what the shortcut of handbooks gives.
[[nodiscard]] std::string peaks_table(const StudyResult& result);

/// `tables/time_area.csv`: one row a point, return period and duration: the search for the partial area, to be followed by hand.
[[nodiscard]] std::string time_area_table(const StudyResult& result);

/// `tables/pipes.csv`: one row a pipe: what is stated of it, its capacity, velocity and time, and its design flow where that was asked for.
[[nodiscard]] std::string pipes_table(const StudyResult& result);

/// `tables/handover.csv`: one row a subarea: area, coefficients, own time, next point and time of the way; enough to rebuild every peak of whole
/// areas by hand.
[[nodiscard]] std::string handover_table(const StudyResult& result);

/// `tables/drawn_catchments.csv`: one row a hand-drawn catchment: its area and that of the elevations, what both have and what one has alone, and
/// the share of the former in all three.
[[nodiscard]] std::string drawn_catchments_table(const StudyResult& result);

/// `tables/land.csv`: one row a point and kind of land (cover class, soil group, slope of the land) in its catchment: cells and area in
/// the whole of it and in the point's own subarea, curve number and runoff coefficient where the book has them.
[[nodiscard]] std::string land_table(const StudyResult& result);

/// `tables/review.csv`: one row a notice, those with the greatest effect on the time first; the last column is a person's.
[[nodiscard]] std::string review_table(const StudyResult& result);

}  // namespace rillclock
