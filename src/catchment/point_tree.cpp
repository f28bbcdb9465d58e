#include "rillclock/catchment/point_tree.hpp"

#include "rillclock/core/error.hpp"

namespace rillclock {

std::vector<PointNumber> PointTree::last_points() const {
    std::vector<PointNumber> last(next.size() + 1, 0);
    for (auto number = upstream_first.rbegin(); number != upstream_first.rend(); ++number) {
        last[*number] = next_of(*number) == 0 ? *number : last[next_of(*number)];
    }
    return last;
}

PointTree point_tree(std::vector<PointNumber> next) {
    PointTree tree{.next = std::move(next), .upstream_first = {}};
    std::vector<std::uint32_t> waiting(tree.next.size() + 1, 0);
    for (const PointNumber below : tree.next) ++waiting[below];
    for (PointNumber number = 1; number <= tree.next.size(); ++number) {
        if (waiting[number] == 0) tree.upstream_first.push_back(number);
    }
    for (std::size_t i = 0; i < tree.upstream_first.size(); ++i) {
        const PointNumber below = tree.next_of(tree.upstream_first[i]);
        if (below != 0 && --waiting[below] == 0) tree.upstream_first.push_back(below);
    }
    if (tree.upstream_first.size() != tree.next.size()) throw bug("the design points follow one another in a circle");
    return tree;
}

}  // namespace rillclock
