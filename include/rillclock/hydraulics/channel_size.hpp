#pragma once

#include <span>
#include <string_view>

#include "rillclock/core/quantity_text.hpp"

namespace rillclock {

/// Bankfull size of natural channels by contributing area, of one region.
///
/// Source: Bieger, Rathjens, Allen and Arnold, "Development and evaluation of bankfull hydraulic geometry relationships
/// for the physiographic regions of the United States", J. Am. Water Resour. Assoc. 51(3), 2015. Values from memory: a
/// default to check against the paper. For natural perennial streams, not for drains, gutters or swales.
struct ChannelSize {
    std::string_view region;
    PowerLaw width;  ///< top width
    PowerLaw depth;  ///< mean depth
};

/// The published sets, the whole of the United States first.
[[nodiscard]] std::span<const ChannelSize> channel_sizes();

}  // namespace rillclock
