#pragma once

#include <optional>
#include <span>
#include <string>
#include <vector>

#include "rillclock/travel/channel_reach.hpp"

namespace rillclock {

/// The fields of a file of channels that state a line's section, all optional; short enough for every format. A trapezoid has `depth_…` and
/// `width_…` (of the bottom) or `side_slope` (run over rise) or both; a gutter has `cross_fall` (rise over run) and `spread_…`; `n`
/// goes with either, or alone with a size by area.
[[nodiscard]] std::span<const std::string> channel_fields();

/// The section that the fields of a line state; none where all are empty. `standard_n` where n is. `subject` begins errors: "line 3
/// of the channels 'brook.gpkg'". Throws an input error for numbers out of range and for fields that do not make one section.
[[nodiscard]] std::optional<MappedSection> section_of(const std::vector<std::optional<double>>& numbers, double standard_n,
                                                      const std::string& subject);

}  // namespace rillclock
