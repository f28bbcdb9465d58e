#pragma once

#include <cstddef>
#include <vector>

#include "rillclock/deliver/study_result.hpp"

namespace rillclock {

/// What of a path is its own branch in the tree of all paths: from its head down to where a path begins that has its branch already.
struct PathBranch {
    std::size_t steps = 0;              ///< from cell to cell, from the head on; none where all of it runs with others
    const Outlet* joins = nullptr;      ///< the point whose path goes on from there; null where the branch ends at the path's own point
    bool joins_governing = true;        ///< which of its two
};

/// The tree that governing and longest paths of all points make together, each step in one of them: thousands of paths of one river have as
/// many cells as the river, not as all of them laid end to end. Larger catchments come first, so that a path never ends before one that joins
/// it does, and the governing path of a last point is all its own.
struct PathBranches {
    std::vector<PathBranch> governing;   ///< by number − 1
    std::vector<PathBranch> longest;
};

/// Cost: the cells of the tree.
[[nodiscard]] PathBranches path_branches(const StudyResult& result);

}  // namespace rillclock
