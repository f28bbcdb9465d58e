#pragma once

#include <array>
#include <string_view>

namespace rillclock {

/// What every result says about itself, wherever it is read.
inline constexpr std::array<std::string_view, 5> cautions = {
    "These are planning-level estimates, made from elevations and land cover that were not surveyed for this purpose.",
    "Formulas for time of concentration scatter widely: published comparisons find factors of two to five, and more.",
    "Local drainage criteria govern; where they name a method, a limit or a least time, those count and not the defaults here.",
    "Not for life-safety or flood-warning decisions.",
    "A licensed engineer must check the results before anything is designed or built on them.",
};

}  // namespace rillclock
