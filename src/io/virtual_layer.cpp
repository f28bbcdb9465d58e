#include "virtual_layer.hpp"

#include <cpl_string.h>
#include <gdal.h>

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
        // GDAL opens sources with any of its drivers: whichever takes the file must be one that holds its shapes itself.
        const GDALDriverH driver = GDALIdentifyDriverEx(source.c_str(), GDAL_OF_VECTOR, nullptr, nullptr);
        if (driver == nullptr || CSLFindString(local_vector_drivers(), GDALGetDriverShortName(driver)) < 0)
            throw input_error("The source " + source.string() + " of the virtual layer " + vrt.string() +
                              " is no file that holds shapes itself; let the layer name such a one.");
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
