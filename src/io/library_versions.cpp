#include "rillclock/io/library_versions.hpp"

#include <gdal.h>
#include <proj.h>

namespace rillclock {

std::string gdal_version() {
    return GDALVersionInfo("RELEASE_NAME");
}

std::string proj_version() {
    return proj_info().version;
}

}  // namespace rillclock
