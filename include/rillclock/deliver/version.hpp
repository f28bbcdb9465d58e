#pragma once

#include <string_view>

namespace rillclock {

/// The version of this library, as CMakeLists.txt states it.
extern const std::string_view version_text;

}  // namespace rillclock
