#include "rillclock/io/library_versions.hpp"

#include <cpl_error.h>
#include <gdal.h>
#include <ogr_srs_api.h>
#include <proj.h>

namespace rillclock {

std::string gdal_version() {
    return GDALVersionInfo("RELEASE_NAME");
}

std::string proj_version() {
    return proj_info().version;
}

bool proj_database_opens() {
    CPLPushErrorHandler(CPLQuietErrorHandler);
    OGRSpatialReferenceH system = OSRNewSpatialReference(nullptr);
    const bool opens = OSRImportFromEPSG(system, 4326) == OGRERR_NONE;
    OSRDestroySpatialReference(system);
    CPLPopErrorHandler();
    return opens;
}

}  // namespace rillclock
