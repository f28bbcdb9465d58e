#pragma once

#include <string_view>

namespace rillclock {

/// A text without the blanks at its ends; empty where it is nothing but blanks. Views the text that it was given.
[[nodiscard]] constexpr std::string_view trimmed(std::string_view text, std::string_view blanks = " \t\r\n") {
    const auto first = text.find_first_not_of(blanks);
    return first == std::string_view::npos ? std::string_view{} : text.substr(first, text.find_last_not_of(blanks) - first + 1);
}

}  // namespace rillclock
