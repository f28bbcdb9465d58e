#pragma once

#include <string_view>
#include <vector>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// A segment with all that its row in a table or its feature on a map needs to know.
struct SegmentRow {
    const Outlet* outlet = nullptr;
    const PointPath* path = nullptr;
    const Segment* segment = nullptr;
    std::string_view path_name;       ///< "governing" or "longest"
    std::size_t number = 0;           ///< from 1, along the path
    double time_s = 0.0;
    double pond_time_s = 0.0;
    double running_s = 0.0;           ///< from the head of the path to this segment's end

    [[nodiscard]] double formula_s() const { return time_s - pond_time_s; }
};

/// The rows of one path, in order.
[[nodiscard]] std::vector<SegmentRow> segment_rows(const Outlet& outlet, const PointPath& path, std::string_view path_name);

/// The rows of a point's governing path, and of its longest path where that begins elsewhere.
[[nodiscard]] std::vector<SegmentRow> segment_rows(const Outlet& outlet);

/// Where a segment runs: from its first to its last place, in the DEM's coordinates, every cell centre between.
[[nodiscard]] std::vector<Place> segment_places(const StudyResult& result, const SegmentRow& row);

/// The same within the first `steps` of its path, from cell to cell; nothing where it begins below them.
[[nodiscard]] std::vector<Place> segment_places(const StudyResult& result, const SegmentRow& row, std::size_t steps);

/// The first and the last of its places.
[[nodiscard]] Place segment_begin(const StudyResult& result, const SegmentRow& row);
[[nodiscard]] Place segment_end(const StudyResult& result, const SegmentRow& row);

}  // namespace rillclock
