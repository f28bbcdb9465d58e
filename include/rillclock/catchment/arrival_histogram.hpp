#pragma once

#include <cstdint>
#include <mutex>
#include <span>
#include <unordered_map>
#include <vector>

#include "rillclock/catchment/arrival_tally.hpp"
#include "rillclock/surface/land.hpp"

namespace rillclock {

/// How times of arrival are binned.
struct HistogramRules {
    FixedTime bin = to_fixed(5);   ///< width
    double storm_factor = 1.0;     ///< of the one storm, or of the reference storm where each point has its own
    Storms storms = Storms::one;
    bool by_slope = false;         ///< whether the slope of the land counts; else all is taken as flat
};

/// The land of one kind that arrives within one bin. Bins are those of the time to the root, so that a further point
/// only shares them out. Under one storm `storm_bin` is 0 and `fixed_bin` is of the whole time; else each part has its own.
/// Land whose times are stretched to a stated one lies in bin 0, shifted to its first arrival.
struct HistogramEntry {
    StepTime shift = {};   ///< of times to the root, where ways are stated below
    StepTime width = {};   ///< from the first arrival to the last, where a bin was stretched; 0 where it is as it was binned
    std::int32_t storm_bin = 0;
    std::int32_t fixed_bin = 0;
    LandKind kind = {};
    FixedArea area = 0;
};

/// Land by bin and kind, sparse, in a fixed order.
class ArrivalHistogram {
public:
    ArrivalHistogram() = default;
    /// Entries in any order; those of one bin and kind are put together.
    explicit ArrivalHistogram(std::vector<HistogramEntry> entries);

    [[nodiscard]] std::span<const HistogramEntry> entries() const { return entries_; }
    /// Moves all entries by a shift.
    void shift_by(const StepTime& shift);
    /// Adds those of other land. Cost: linear in both.
    void add(const ArrivalHistogram& other);
    [[nodiscard]] FixedArea area() const;

private:
    std::vector<HistogramEntry> entries_;
};

/// Gathers the histograms of every subarea while tiles are worked on threads. What it comes to does not depend on their
/// order.
class HistogramTally {
public:
    HistogramTally(const TiledTravel& travel, std::size_t points, const HistogramRules& rules)
        : travel_(travel), rules_(rules), subareas_(points) {}

    /// Adds the cells of a tile whose times and owners are on the desk. Safe to call from several threads.
    void add(const TileDesk& desk);
    /// By number − 1; to be taken once all tiles are in.
    [[nodiscard]] std::vector<ArrivalHistogram> take();

private:
    struct Key {
        std::int32_t storm_bin;
        std::int32_t fixed_bin;
        LandKind kind;
        bool operator==(const Key&) const = default;
    };
    struct KeyHash {
        std::size_t operator()(const Key& key) const;
    };
    using Sums = std::unordered_map<Key, FixedArea, KeyHash>;
    [[nodiscard]] Key key_of(const TileDesk& desk, Local local) const;

    const TiledTravel& travel_;
    HistogramRules rules_;
    std::mutex mutex_;
    std::vector<Sums> subareas_;
};

/// The bin that a time falls into, also below 0.
[[nodiscard]] constexpr std::int64_t bin_of(FixedTime time, FixedTime bin) {
    return time >= 0 ? time / bin : -((-time + bin - 1) / bin);
}

}  // namespace rillclock
