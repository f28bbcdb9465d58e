#pragma once

#include <span>
#include <string_view>
#include <vector>

#include "rillclock/hydraulics/methods.hpp"

namespace rillclock {

/// Manning's n of one lining or material, as printed; least and greatest are the typical value where only that is printed.
struct RoughnessEntry {
    std::string_view surface;
    double least = 0.0;
    double typical = 0.0;
    double greatest = 0.0;
};

/// One published table of Manning's n, for the n of a study's channels, mapped lines and pipes. Not for sheet flow, whose n is far
/// larger on the same ground.
struct RoughnessTable {
    std::string_view of;      ///< what it is of: "streets and gutters"
    std::string_view source;
    Trust trust = Trust::from_memory;
    std::string_view remark;  ///< what to know of it; may be empty
    std::vector<RoughnessEntry> entries;
};

/// All tables.
[[nodiscard]] std::span<const RoughnessTable> roughness_tables();

}  // namespace rillclock
