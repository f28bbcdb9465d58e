#pragma once

#include <cstddef>
#include <unordered_map>

#include "rillclock/catchment/arrival_bins.hpp"

namespace rillclock {

/// Area by both parts of the time to the root, for catchments whose storm is not known yet, or that are part of several
/// catchments with a storm each.
///
/// A bin holds cells that agree to one second in each part, the storm part taken under a reference storm; one cell
/// stands for all of them, the last to arrive under the reference. So under a storm factor s no cell is taken to arrive
/// more than 1 + s/s_ref seconds off, and every time told is that of a cell. Bins are at most as many as cells; those
/// of cells past sheet flow share their storm part.
class StormBins {
public:
    /// Adds a cell of that area; the reference storm decides which head of a bin is kept.
    void add(const Head& head, FixedArea area, double reference_factor);
    /// Adds all bins of another set of cells.
    void take(StormBins&& other, double reference_factor);
    /// The arrivals under one storm.
    [[nodiscard]] ArrivalBins under(double storm_factor) const;

private:
    struct Key {
        std::int64_t storm_second;
        std::int64_t fixed_second;
        bool operator==(const Key&) const = default;
    };
    struct KeyHash {
        std::size_t operator()(const Key& key) const {
            return (static_cast<std::size_t>(key.fixed_second) * 0x9E3779B97F4A7C15ULL) ^
                   static_cast<std::size_t>(key.storm_second);
        }
    };
    struct Bin {
        FixedArea area = 0;
        Head last;
    };
    void add(const Key& key, const Bin& bin, double reference_factor);

    std::unordered_map<Key, Bin, KeyHash> bins_;
};

}  // namespace rillclock
