#include "rillclock/raster/cell_outlines.hpp"

#include <algorithm>
#include <array>
#include <cstdint>
#include <map>
#include <numeric>
#include <optional>
#include <utility>

namespace rillclock {
namespace {

/// Neighbouring cells of one row: the columns from `first` to before `end`.
struct OutlineRun {
    std::int64_t row = 0;
    std::int64_t first = 0;
    std::int64_t end = 0;
};

std::vector<OutlineRun> runs_of(std::vector<Cell> cells, const Grid& grid) {
    std::sort(cells.begin(), cells.end());
    std::vector<OutlineRun> runs;
    for (const Cell cell : cells) {
        const RowColumn at = grid.row_column(cell);
        const bool goes_on = !runs.empty() && runs.back().row == at.row && runs.back().end == at.column;
        if (goes_on) ++runs.back().end;
        else runs.push_back({at.row, at.column, at.column + 1});
    }
    return runs;
}

/// A set of cells cut into parts: cells that share edges are of one part.
class Parts {
public:
    explicit Parts(std::vector<Cell> cells, const Grid& grid) : runs_(runs_of(std::move(cells), grid)), parent_(runs_.size()) {
        std::iota(parent_.begin(), parent_.end(), std::size_t{0});
        // Runs of two rows are met side by side.
        for (std::size_t upper = 0, lower = 0; lower < runs_.size();) {
            const OutlineRun& u = runs_[upper];
            const OutlineRun& l = runs_[lower];
            const bool beside = u.row + 1 == l.row;
            if (beside && u.first < l.end && l.first < u.end) join(root(upper), root(lower));
            const bool upper_is_done = u.row + 1 < l.row || (beside && u.end <= l.end);
            ++(upper_is_done ? upper : lower);
        }
        for (std::size_t run = 0; run < runs_.size(); ++run) parent_[run] = root(run);
    }

    [[nodiscard]] const std::vector<OutlineRun>& runs() const { return runs_; }
    [[nodiscard]] std::size_t part_of_run(std::size_t run) const { return parent_[run]; }
    /// The run that holds a cell; none where it is not of the set.
    [[nodiscard]] std::optional<std::size_t> run_at(std::int64_t row, std::int64_t column) const {
        const auto after = std::upper_bound(runs_.begin(), runs_.end(), std::pair(row, column),
                                            [](const auto& at, const OutlineRun& run) { return at < std::pair(run.row, run.first); });
        if (after == runs_.begin()) return std::nullopt;
        const auto run = std::prev(after);
        if (run->row != row || column >= run->end) return std::nullopt;
        return static_cast<std::size_t>(run - runs_.begin());
    }

private:
    /// The smaller run stands for both.
    void join(std::size_t a, std::size_t b) { parent_[std::max(a, b)] = std::min(a, b); }
    [[nodiscard]] std::size_t root(std::size_t run) {
        while (parent_[run] != run) run = parent_[run] = parent_[parent_[run]];
        return run;
    }

    std::vector<OutlineRun> runs_;
    std::vector<std::size_t> parent_;
};

/// Ways along the edges of cells, each a left turn after the one before.
enum class Heading : std::uint8_t { east, north, west, south };

constexpr std::array<RowColumn, 4> step_of = {RowColumn{0, 1}, {-1, 0}, {0, -1}, {1, 0}};
/// The cell to the left and to the right of an edge that leaves a corner; a corner has the numbers of the cell south-east of it.
constexpr std::array<RowColumn, 4> left_of = {RowColumn{-1, 0}, {-1, -1}, {0, -1}, {0, 0}};
constexpr std::array<RowColumn, 4> right_of = {RowColumn{0, 0}, {-1, 0}, {-1, -1}, {0, -1}};

Heading turned(Heading heading, int left_turns) { return static_cast<Heading>((static_cast<int>(heading) + left_turns + 4) % 4); }

RowColumn moved(const RowColumn& at, const RowColumn& by) { return {at.row + by.row, at.column + by.column}; }

/// A closed way of corners, the part's cells on its left.
using Ring = std::vector<RowColumn>;

/// Twice the area within a ring, positive where it is counterclockwise.
std::int64_t twice_ring_area(const Ring& ring) {
    std::int64_t sum = 0;
    for (std::size_t i = 1; i < ring.size(); ++i) sum += ring[i].column * ring[i - 1].row - ring[i - 1].column * ring[i].row;
    return sum;
}

class Outliner {
public:
    explicit Outliner(const Parts& parts) : parts_(parts), walked_(parts.runs().size()) {}

    /// Rings of each part by the part's number.
    std::map<std::size_t, std::vector<Ring>> rings() {
        std::map<std::size_t, std::vector<Ring>> rings;
        for (std::size_t run = 0; run < parts_.runs().size(); ++run) {
            const OutlineRun& cells = parts_.runs()[run];
            // Every ring has an edge that goes south; it does so along the west of the first cell of a run.
            if (walked_[run]) continue;
            const std::size_t part = parts_.part_of_run(run);
            rings[part].push_back(ring_from({cells.row, cells.first}, part));
        }
        return rings;
    }

private:
    /// Follows the edge of a part, whose cells are on the left, from a corner south and round to it.
    Ring ring_from(const RowColumn& start, std::size_t part) {
        Ring ring;
        RowColumn at = start;
        Heading heading = Heading::south;
        do {
            if (heading == Heading::south) walked_[*parts_.run_at(at.row, at.column)] = true;
            at = moved(at, step_of[static_cast<std::size_t>(heading)]);
            const Heading next = next_heading(at, heading, part);
            if (next != heading) ring.push_back(at);
            heading = next;
        } while (!(at == start && heading == Heading::south));
        ring.push_back(ring.front());
        return ring;
    }

    /// The way on from a corner: right where the part lies ahead on the right, so that a part that touches itself at a corner is left
    /// with a ring on either side; else straight on, else left around the cell.
    [[nodiscard]] Heading next_heading(const RowColumn& corner, Heading heading, std::size_t part) const {
        for (const int turn : {-1, 0}) {
            const Heading way = turned(heading, turn);
            const bool own_left = is_of(part, moved(corner, left_of[static_cast<std::size_t>(way)]));
            const bool own_right = is_of(part, moved(corner, right_of[static_cast<std::size_t>(way)]));
            if (own_left && !own_right) return way;
        }
        return turned(heading, 1);
    }
    [[nodiscard]] bool is_of(std::size_t part, const RowColumn& cell) const {
        const auto run = parts_.run_at(cell.row, cell.column);
        return run && parts_.part_of_run(*run) == part;
    }

    const Parts& parts_;
    std::vector<bool> walked_;   ///< whether a ring went south along the west of a run
};

Line placed(const Ring& ring, const Grid& grid) {
    Line line;
    for (const RowColumn& corner : ring) {
        line.push_back({grid.left + static_cast<double>(corner.column) * grid.cell_width,
                        grid.top - static_cast<double>(corner.row) * grid.cell_height});
    }
    return line;
}

}  // namespace

std::vector<Polygon> cell_outlines(std::vector<Cell> cells, const Grid& grid) {
    const Parts parts(std::move(cells), grid);
    std::vector<Polygon> polygons;
    for (auto& [part, rings] : Outliner(parts).rings()) {
        std::stable_partition(rings.begin(), rings.end(), [](const Ring& ring) { return twice_ring_area(ring) > 0; });
        Polygon polygon;
        for (const Ring& ring : rings) polygon.rings.push_back(placed(ring, grid));
        polygons.push_back(std::move(polygon));
    }
    return polygons;
}

}  // namespace rillclock
