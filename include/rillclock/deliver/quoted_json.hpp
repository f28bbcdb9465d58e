#pragma once

#include <string>

namespace rillclock {

/// A text as a string of JSON, its quotes included; bytes that are no UTF-8 become the replacement character.
[[nodiscard]] std::string quoted_json(const std::string& text);

}  // namespace rillclock
