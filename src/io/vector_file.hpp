#pragma once

#include <gdal_priv.h>

#include <filesystem>
#include <string>

namespace rillclock {

class GdalSession;

/// GDAL's drivers of files and folders that hold their shapes themselves, a null pointer at the end. All that are not among them reach for
/// networks, servers or data sources of the system, start other programs, or open nothing that lies on a disk.
[[nodiscard]] const char* const* local_vector_drivers();

/// What is to be opened, and how a sentence names it.
struct VectorRequest {
    std::filesystem::path path;
    std::string called;   ///< "point file inlets.gpkg"
    std::string wanted;   ///< "points", "lines"
};

/// Opens shapes that lie on the disk, for reading: a file, a folder that is one data set (a file geodatabase), or an archive (zip) that
/// holds one data set, or several shapefiles in one folder. Nothing is fetched that they name, and nothing written beside them (but by GDAL
/// itself where a virtual layer names a GML file without a schema).
///
/// Throws Error (inputs) where the path is no such thing or an address, with what it seems to be, where a virtual layer does
/// more than put local files together, or an archive holds none or several data sets.
[[nodiscard]] GDALDatasetUniquePtr open_vectors(const VectorRequest& request, const GdalSession& session);

}  // namespace rillclock
