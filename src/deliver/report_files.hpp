#pragma once

#include <string_view>

namespace rillclock {

/// Texts that the report is made with, kept in the program itself; put there by CMake. The map's library is Leaflet, as Debian has it.
[[nodiscard]] std::string_view report_style();
[[nodiscard]] std::string_view report_first_script();
[[nodiscard]] std::string_view report_script();
[[nodiscard]] std::string_view leaflet_style();
[[nodiscard]] std::string_view leaflet_script();
[[nodiscard]] std::string_view leaflet_licence();

}  // namespace rillclock
