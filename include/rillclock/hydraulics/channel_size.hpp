#pragma once

#include <span>
#include <string_view>

#include "rillclock/core/quantity_text.hpp"

namespace rillclock {

/// Bankfull size of natural channels by contributing area, of one region.
///
/// Source of all but the last: Bieger, Rathjens, Allen and Arnold, "Development and evaluation of bankfull hydraulic geometry relationships
/// for the physiographic regions of the United States", J. Am. Water Resour. Assoc. 51(3), 2015. Values from memory: a
/// default to check against the paper. Their smallest catchment is not known here; 0.5 km² is that of a like compilation (Wilkerson et al.,
/// Water Resour. Res., 2014: 1018 sites of the United States, 0.50 to 22 000 km²). Of the last: Harman et al., Bankfull hydraulic geometry
/// relationships for North Carolina streams, 1999, rural Piedmont, 0.2 to 128 square miles (from memory).
/// For natural perennial streams, not for drains, gutters or swales.
struct ChannelSize {
    std::string_view region;
    PowerLaw width;  ///< top width
    PowerLaw depth;  ///< mean depth
    Area from;       ///< smallest area they are taken to be made from
};

/// The published sets, the whole of the United States first.
[[nodiscard]] std::span<const ChannelSize> channel_sizes();
/// The set of that region; null where there is none.
[[nodiscard]] const ChannelSize* find_channel_size(std::string_view region);

}  // namespace rillclock
