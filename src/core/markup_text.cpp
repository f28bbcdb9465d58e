#include "rillclock/core/markup_text.hpp"

namespace rillclock {

std::string markup_text(std::string_view text, LineBreaks breaks) {
    std::string safe;
    for (const char c : text) {
        switch (c) {
            case '&': safe += "&amp;"; break;
            case '<': safe += "&lt;"; break;
            case '>': safe += "&gt;"; break;
            case '"': safe += "&quot;"; break;
            case '\'': safe += "&#39;"; break;
            default: {
                const bool stays = static_cast<unsigned char>(c) >= 0x20U || (c == '\n' && breaks == LineBreaks::kept);
                safe += stays ? c : ' ';
            }
        }
    }
    return safe;
}

}  // namespace rillclock
