#include "virtual_layer.hpp"

#include <cpl_string.h>
#include <gdal.h>

#include <array>

#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "vector_file.hpp"
#include "virtual_file.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

class VirtualLayerCheck {
public:
    void check(const fs::path& path) {
        const XmlTree tree = chain_.enter(path);
        check_nodes(tree.get(), path);
        chain_.leave();
    }

private:
    void check_nodes(const CPLXMLNode* first, const fs::path& vrt) {
        for (const CPLXMLNode* node = first; node; node = node->psNext) {
            if (is_called(*node, "SrcSQL")) refuse(vrt, "reads its sources by SQL");
            if (is_called(*node, "OpenOptions")) refuse(vrt, "opens its sources with options of its own");
            if (is_called(*node, "SrcDataSource")) check_source(*node, vrt);
            check_nodes(node->psChild, vrt);
        }
    }

    [[noreturn]] static void refuse(const fs::path& vrt, const std::string& does) {
        throw input_error("The virtual layer " + vrt.string() + " " + does + ", which is refused; make a GeoPackage of it: ogr2ogr " +
                          vrt.stem().string() + ".gpkg " + vrt.string() + ".");
    }

    void check_source(const CPLXMLNode& node, const fs::path& vrt) {
        const fs::path source = source_named(node, vrt, "virtual layer", "source");
        std::error_code ignored;
        if (!fs::is_regular_file(source, ignored) && !fs::is_directory(source, ignored))
            throw input_error("The virtual layer " + vrt.string() + " names the source " + source.string() +
                              ", which is not there; put it back, or let the layer name another.");
        if (is_virtual_layer(source)) return check(source);
        if (!holds_shapes(source))
            throw input_error("The source " + source.string() + " of the virtual layer " + vrt.string() +
                              " is no file that holds shapes itself; let the layer name such a one.");
    }

    /// GDAL opens sources with any of its drivers, one after the other: one that we read must take the file, and none of the others.
    static bool holds_shapes(const fs::path& source) {
        if (GDALIdentifyDriverEx(source.c_str(), GDAL_OF_VECTOR, local_vector_drivers(), nullptr) == nullptr) return false;
        for (int i = 0; i < GDALGetDriverCount(); ++i) {
            const char* const name = GDALGetDriverShortName(GDALGetDriver(i));
            const std::array alone = {name, static_cast<const char*>(nullptr)};
            if (CSLFindString(local_vector_drivers(), name) >= 0) continue;
            if (GDALIdentifyDriverEx(source.c_str(), GDAL_OF_VECTOR, alone.data(), nullptr) != nullptr) return false;
        }
        return true;
    }

    VirtualChain chain_{"virtual layer", "let it name the files that hold the shapes"};
};

}  // namespace

bool is_virtual_layer(const fs::path& path) { return beginning_of(path).find("<OGRVRTDataSource") != std::string::npos; }

void check_virtual_layer(const fs::path& path) {
    const GdalSession session;
    VirtualLayerCheck().check(path);
}

}  // namespace rillclock
