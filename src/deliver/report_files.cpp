#include "report_files.hpp"

#include <cstddef>

extern "C" {
extern const char rillclock_report_style[];
extern const char rillclock_report_style_end[];
extern const char rillclock_report_first_script[];
extern const char rillclock_report_first_script_end[];
extern const char rillclock_report_script[];
extern const char rillclock_report_script_end[];
extern const char rillclock_leaflet_style[];
extern const char rillclock_leaflet_style_end[];
extern const char rillclock_leaflet_script[];
extern const char rillclock_leaflet_script_end[];
extern const char rillclock_leaflet_licence[];
extern const char rillclock_leaflet_licence_end[];
}

namespace rillclock {
namespace {

std::string_view between(const char* begin, const char* end) { return {begin, static_cast<std::size_t>(end - begin)}; }

}  // namespace

std::string_view report_style() { return between(rillclock_report_style, rillclock_report_style_end); }
std::string_view report_first_script() { return between(rillclock_report_first_script, rillclock_report_first_script_end); }
std::string_view report_script() { return between(rillclock_report_script, rillclock_report_script_end); }
std::string_view leaflet_style() { return between(rillclock_leaflet_style, rillclock_leaflet_style_end); }
std::string_view leaflet_script() { return between(rillclock_leaflet_script, rillclock_leaflet_script_end); }
std::string_view leaflet_licence() { return between(rillclock_leaflet_licence, rillclock_leaflet_licence_end); }

}  // namespace rillclock
