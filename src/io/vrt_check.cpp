#include "rillclock/io/vrt_check.hpp"

#include <cpl_port.h>

#include <string>

#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "virtual_file.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;
bool is_xml(const std::string& beginning) {
    const std::size_t first = beginning.find_first_not_of(" \t\r\n\xEF\xBB\xBF");
    return first != std::string::npos && beginning[first] == '<';
}

/// Goes down the elements of a virtual raster, and into virtual rasters among its tiles, 8 deep at most.
class VirtualRasterCheck {
public:
    void check(const fs::path& path) {   // NOLINT(misc-no-recursion)
        const XmlTree tree = chain_.enter(path);
        check_nodes(tree.get(), path);
        chain_.leave();
    }

private:
    void check_nodes(const CPLXMLNode* first, const fs::path& vrt) {   // NOLINT(misc-no-recursion)
        for (const CPLXMLNode* node = first; node; node = node->psNext) {
            if (is_called(*node, "VRTRasterBand")) check_band(node, vrt);
            if (is_called(*node, "SourceFilename") || is_called(*node, "SourceDataset")) check_tile(*node, vrt);
            check_nodes(node->psChild, vrt);
        }
    }

    static void check_band(const CPLXMLNode* node, const fs::path& vrt) {
        const char* kind = CPLGetXMLValue(node, "subClass", "");
        if (EQUAL(kind, "VRTRawRasterBand"))
            throw input_error(
                "The virtual raster " + vrt.string() +
                " reads raw bytes of other files (VRTRawRasterBand), which is refused; make a GeoTIFF of it "
                "with gdal_translate.");
        if (EQUAL(kind, "VRTDerivedRasterBand") || CPLGetXMLNode(node, "PixelFunctionType"))
            throw input_error("The virtual raster " + vrt.string() +
                              " computes its cells by a pixel function, which is refused; make a GeoTIFF of it with "
                              "gdal_translate.");
    }

    void check_tile(const CPLXMLNode& node, const fs::path& vrt) {   // NOLINT(misc-no-recursion)
        const fs::path tile = source_named(node, vrt, "virtual raster", "tile");
        std::error_code ignored;
        if (!fs::is_regular_file(tile, ignored))
            throw input_error("The virtual raster " + vrt.string() + " names the tile " + tile.string() +
                              ", which is not there; put it back, or build the virtual raster anew with gdalbuildvrt.");
        check_content(tile, vrt);
    }

    void check_content(const fs::path& tile, const fs::path& vrt) {   // NOLINT(misc-no-recursion)
        if (is_virtual_raster(tile)) return check(tile);
        if (is_xml(beginning_of(tile)))
            throw input_error("The tile " + tile.string() + " of the virtual raster " + vrt.string() +
                              " is a text that describes data elsewhere; only files that hold their cells are read.");
    }

    VirtualChain chain_{"virtual raster", "build it anew with gdalbuildvrt"};
};

}  // namespace

bool is_virtual_raster(const fs::path& path) {
    return beginning_of(path).find("<VRTDataset") != std::string::npos;
}

void check_virtual_raster(const fs::path& path) {
    const GdalSession session;
    VirtualRasterCheck().check(path);
}

}  // namespace rillclock
