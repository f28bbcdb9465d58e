#pragma once

#include <array>
#include <map>
#include <vector>

#include "rillclock/catchment/point_tree.hpp"
#include "rillclock/travel/step.hpp"

namespace rillclock {

/// A cell whose water may be the last to arrive, with its time to the root.
struct Head {
    Cell cell = no_cell;
    StepTime time;
};

/// Whether `a` arrives later than `b` under a storm factor; of equal ones the cell with the smaller index counts as the later.
[[nodiscard]] bool arrives_later(const Head& a, const Head& b, double storm_factor);

/// The cells that no other exceeds in both parts of the time: among them is the last to arrive under any storm.
class Front {
public:
    void add(const Head& head);
    void add(const Front& other);
    [[nodiscard]] const std::vector<Head>& heads() const { return heads_; }
    /// The head that arrives last. The front must not be empty.
    [[nodiscard]] Head last_to_arrive(double storm_factor) const;

private:
    std::vector<Head> heads_;
};

/// Area by time of arrival, in bins of one second of time to the root; each bin knows its last cell.
class ArrivalBins {
public:
    struct Bin {
        FixedArea area = 0;
        Head last;
    };
    void add(const Head& head, FixedArea area, double storm_factor);
    /// Adds cells that were gathered elsewhere: all of one second of time to the root, `second`.
    void add(std::int64_t second, const Bin& bin, double storm_factor);
    void take(ArrivalBins&& other, double storm_factor);
    [[nodiscard]] FixedArea area() const;
    /// The last cell of the least set of bins, earliest first, that holds at least `share` of the area: no later than a second
    /// after the exact answer, and itself the time of a cell.
    [[nodiscard]] Head by_share(double share) const;
    /// The last cell once the latest bins are left out that together hold no more than `share` of the area.
    [[nodiscard]] Head last_without(double share) const;

    /// The bin of a time to the root.
    [[nodiscard]] static std::int64_t second_of(const StepTime& time, double storm_factor);

private:
    std::map<std::int64_t, Bin> bins_;
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
    ArrivalBins bins;

    void add(const ArrivingCell& cell, double storm_factor);
    /// All but the bins of a cell.
    void add_unbinned(const ArrivingCell& cell);
    void add(Arrivals&& other, double storm_factor);

private:
    void add_farthest(Cell cell, FixedLength distance);
};

}  // namespace rillclock
