#pragma once

#include <string>
#include <string_view>

#include "rillclock/core/markup_text.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {

/// Names are anything a file may hold: nothing of them becomes markup, in texts and in attributes alike.
inline std::string html_text(std::string_view text) { return markup_text(text, LineBreaks::kept); }

/// Minutes as they are read: three digits, no more than a decimal.
inline std::string shown_minutes(double s) {
    const double min = s / 60.0;
    return min < 10 ? significant(min, 3) : fixed_decimals(min, 1);
}

}  // namespace rillclock
