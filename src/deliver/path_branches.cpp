#include "path_branches.hpp"

#include <unordered_map>

#include "rillclock/deliver/headlines.hpp"

namespace rillclock {
namespace {

/// Which path goes on from a cell.
struct Owner {
    const Outlet* outlet = nullptr;
    bool governing = true;
};

class BranchMaker {
public:
    PathBranch branch(const Outlet& outlet, bool governing) {
        const std::vector<Cell>& cells = governing ? outlet.governing.cells : outlet.longest.cells;
        for (std::size_t position = 0; position + 1 < cells.size(); ++position) {
            const auto [found, is_new] = owners_.try_emplace(cells[position], Owner{&outlet, governing});
            if (!is_new) return {.steps = position, .joins = found->second.outlet, .joins_governing = found->second.governing};
        }
        return {.steps = cells.size() - 1};
    }

private:
    std::unordered_map<Cell, Owner> owners_;   ///< by the cell that a step of their branch begins with
};

}  // namespace

PathBranches path_branches(const StudyResult& result) {
    PathBranches branches{.governing = std::vector<PathBranch>(result.outlets.size()), .longest = std::vector<PathBranch>(result.outlets.size())};
    BranchMaker maker;
    for (const std::size_t i : by_area(result)) {
        branches.governing[i] = maker.branch(result.outlets[i], true);
        branches.longest[i] = maker.branch(result.outlets[i], false);
    }
    return branches;
}

}  // namespace rillclock
