#pragma once

#include <cstdint>
#include <span>
#include <vector>

#include "rillclock/raster/raster.hpp"
#include "rillclock/travel/step.hpp"

namespace rillclock {

/// A cell whose water may be the last to arrive, with its time to the root.
struct Head {
    Cell cell = no_cell;
    StepTime time;
};

/// Whether `a` arrives later than `b` under a storm factor; of equal ones the cell with the smaller index counts as the later.
[[nodiscard]] bool arrives_later(const Head& a, const Head& b, double storm_factor);

/// Area by time of arrival, in bins of one second of time to the root; each bin knows its last cell. Bins lie in one array, earliest first:
/// points along a river hand thousands of them on, and ask for shares of them, thousands of times. New seconds wait apart until they are a good
/// part of all, so that a way of a million seconds, which comes tile by tile, does not move all of them for each tile.
class ArrivalBins {
public:
    /// The cells of one second of time to the root: their area, and the last of them.
    struct Bin {
        std::int64_t second = 0;
        FixedArea area = 0;
        Head last;
    };
    /// Adds a cell of that area, whose bin follows from its time under the storm factor, the same for all that is ever added.
    void add(const Head& head, FixedArea area, double storm_factor);
    /// Adds bins that were gathered elsewhere, in any order; those of one second become one.
    void add(std::vector<Bin> bins, double storm_factor);
    /// Adds all bins of another set of cells.
    void take(ArrivalBins&& other, double storm_factor);
    /// Puts new seconds in their places. What is asked of bins that are not settled settles a copy of them each time.
    void settle();
    [[nodiscard]] FixedArea area() const { return area_; }
    /// The last cell of the least set of bins, earliest first, that holds at least `share` of the area: no later than a second
    /// after the exact answer, and itself the time of a cell.
    [[nodiscard]] Head by_share(double share) const;
    /// The same for several shares, which rise, in one go.
    [[nodiscard]] std::vector<Head> by_shares(std::span<const double> shares) const;
    /// The last cell once the latest bins are left out that together hold no more than `share` of the area.
    [[nodiscard]] Head last_without(double share) const;

    /// The bin of a time to the root.
    [[nodiscard]] static std::int64_t second_of(const StepTime& time, double storm_factor);

private:
    void add_in_order(std::span<const Bin> bins, double storm_factor);
    [[nodiscard]] std::span<const Bin> in_order(ArrivalBins& room) const;

    std::vector<Bin> bins_;      ///< by second
    std::vector<Bin> fresh_;     ///< of seconds that bins_ does not have, in any order, some more than once
    double storm_factor_ = 1.0;  ///< under which all were added
    FixedArea area_ = 0;         ///< of all bins
};

}  // namespace rillclock
