#pragma once

#include <vector>

#include "rillclock/catchment/arrival_bins.hpp"
#include "rillclock/catchment/catchment_ground.hpp"
#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/catchment/storm_bins.hpp"

namespace rillclock {

/// The cells that no other exceeds in both parts of the time: among them is the last to arrive under any storm. They are kept by cell, so
/// that the order in which they were added does not show.
class Front {
public:
    /// Adds a cell; those that it exceeds in both parts go.
    void add(const Head& head) {
        if (!is_exceeded(head)) take_in(head);
    }
    /// Adds all cells of another front.
    void add(const Front& other);
    [[nodiscard]] const std::vector<Head>& heads() const { return heads_; }
    /// The head that arrives last. The front must not be empty.
    [[nodiscard]] Head last_to_arrive(double storm_factor) const;

private:
    [[nodiscard]] static bool exceeds_in_both(const StepTime& a, const StepTime& b) { return a.fixed >= b.fixed && a.storm >= b.storm; }
    /// Of equal times the smaller cell is kept.
    [[nodiscard]] bool is_exceeded(const Head& head) const {
        for (const Head& kept : heads_) {
            if (exceeds_in_both(kept.time, head.time) && (kept.time != head.time || kept.cell <= head.cell)) return true;
        }
        return false;
    }
    void take_in(const Head& head);

    std::vector<Head> heads_;
};

/// A cell as it counts among the arrivals of its subarea.
struct ArrivingCell {
    Head head;
    FixedArea area = 0;               ///< of the cell alone
    FixedLength flow_distance = 0;    ///< to the root
    bool is_border = false;           ///< beside the edge of the data or a void
};

/// What is known of a set of cells that drain through one point: its subarea, or its whole catchment. What it comes to does not depend
/// on the order in which cells and sets are added.
struct Arrivals {
    FixedArea area = 0;
    std::int64_t border_cells = 0;
    Cell farthest = no_cell;                  ///< greatest flow distance; of equal ones the smaller cell
    FixedLength farthest_distance = 0;        ///< to the root
    Front front;
    ArrivalBins bins;           ///< where one storm times all points
    StormBins storm_bins;       ///< where each point has its own
    CatchmentGround ground;     ///< where it was looked at

    /// Adds a cell; the storm factor tells its bin where one storm times all points.
    void add(const ArrivingCell& cell, double storm_factor);
    /// All but the bins of a cell.
    void add_unbinned(const ArrivingCell& cell) {
        area += cell.area;
        border_cells += cell.is_border ? 1 : 0;
        add_farthest(cell.head.cell, cell.flow_distance);
        front.add(cell.head);
    }
    /// Adds another set of cells, which it uses up.
    void add(Arrivals&& other, double storm_factor);

private:
    void add_farthest(Cell cell, FixedLength distance) {
        const bool is_first = farthest == no_cell;
        if (!is_first && (distance < farthest_distance || (distance == farthest_distance && cell > farthest))) return;
        farthest = cell;
        farthest_distance = distance;
    }
};

}  // namespace rillclock
