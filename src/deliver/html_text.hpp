#pragma once

#include <string>
#include <string_view>

#include "rillclock/core/number_text.hpp"

namespace rillclock {

/// Names are anything a file may hold: nothing of them becomes markup, in texts and in attributes alike.
inline std::string html_text(std::string_view text) {
    std::string safe;
    for (const char c : text) {
        switch (c) {
            case '&': safe += "&amp;"; break;
            case '<': safe += "&lt;"; break;
            case '>': safe += "&gt;"; break;
            case '"': safe += "&quot;"; break;
            case '\'': safe += "&#39;"; break;
            default: safe += static_cast<unsigned char>(c) < 0x20U && c != '\n' ? ' ' : c;
        }
    }
    return safe;
}

/// Minutes as they are read: three digits, no more than a decimal.
inline std::string shown_minutes(double s) {
    const double min = s / 60.0;
    return min < 10 ? significant(min, 3) : fixed_decimals(min, 1);
}

}  // namespace rillclock
