#pragma once

#include <string>

namespace rillclock {

/// The version of the GDAL that runs, as "3.6.2".
[[nodiscard]] std::string gdal_version();
/// The version of the PROJ that runs, as "9.1.1".
[[nodiscard]] std::string proj_version();

/// Whether PROJ finds its database; without it no reference system is known.
[[nodiscard]] bool proj_database_opens();

}  // namespace rillclock
