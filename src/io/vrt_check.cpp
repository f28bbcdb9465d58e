#include "rillclock/io/vrt_check.hpp"

#include <cpl_minixml.h>

#include <algorithm>
#include <array>
#include <fstream>
#include <memory>
#include <string>
#include <string_view>
#include <vector>

#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;
using XmlTree = std::unique_ptr<CPLXMLNode, decltype(&CPLDestroyXMLNode)>;

std::string beginning_of(const fs::path& path) {
    std::array<char, 1024> bytes{};
    std::ifstream file(path, std::ios::binary);
    file.read(bytes.data(), static_cast<std::streamsize>(bytes.size()));
    return {bytes.data(), static_cast<std::size_t>(file.gcount())};
}

bool is_xml(const std::string& beginning) {
    const std::size_t first = beginning.find_first_not_of(" \t\r\n\xEF\xBB\xBF");
    return first != std::string::npos && beginning[first] == '<';
}

class VirtualRasterCheck {
public:
    void check(const fs::path& path) {
        const fs::path real = fs::canonical(path);
        if (std::find(chain_.begin(), chain_.end(), real) != chain_.end())
            throw input_error("The virtual raster " + path.string() +
                              " names itself among its tiles; build it anew with "
                              "gdalbuildvrt.");
        if (chain_.size() >= 8)
            throw input_error("The virtual raster " + chain_.front().string() +
                              " is built of virtual rasters more than 8 deep; make one of its tiles directly with "
                              "gdalbuildvrt.");
        chain_.push_back(real);
        const XmlTree tree(CPLParseXMLFile(path.c_str()), &CPLDestroyXMLNode);
        if (!tree)
            throw input_error("The virtual raster " + path.string() +
                              " is not well-formed XML; build it anew with "
                              "gdalbuildvrt.");
        check_nodes(tree.get(), path);
        chain_.pop_back();
    }

private:
    void check_nodes(const CPLXMLNode* first, const fs::path& vrt) {
        for (const CPLXMLNode* node = first; node; node = node->psNext) {
            if (node->eType != CXT_Element) continue;
            const std::string_view name = node->pszValue;
            if (name == "VRTRasterBand") check_band(node, vrt);
            if (name == "SourceFilename" || name == "SourceDataset") check_tile(node, vrt);
            check_nodes(node->psChild, vrt);
        }
    }

    static void check_band(const CPLXMLNode* node, const fs::path& vrt) {
        const std::string_view kind = CPLGetXMLValue(node, "subClass", "");
        if (kind == "VRTRawRasterBand")
            throw input_error(
                "The virtual raster " + vrt.string() +
                " reads raw bytes of other files (VRTRawRasterBand), which is refused; make a GeoTIFF of it "
                "with gdal_translate.");
        if (kind == "VRTDerivedRasterBand" || CPLGetXMLNode(node, "PixelFunctionType"))
            throw input_error("The virtual raster " + vrt.string() +
                              " computes its cells by a pixel function, which is refused; make a GeoTIFF of it with "
                              "gdal_translate.");
    }

    void check_tile(const CPLXMLNode* node, const fs::path& vrt) {
        const std::string name = CPLGetXMLValue(node, "", "");
        const bool is_relative = std::string_view(CPLGetXMLValue(node, "relativeToVRT", "0")) == "1";
        const fs::path tile = is_relative ? vrt.parent_path() / name : fs::path(name);
        if (name.starts_with("/vsi") || tile.string().starts_with("/vsi") || name.find("://") != std::string::npos ||
            name.find('<') != std::string::npos)
            throw input_error(
                "The virtual raster " + vrt.string() + " names \"" + name.substr(0, 120) +
                "\" as a tile; only plain local files are read: download or unpack it and build the virtual "
                "raster anew with gdalbuildvrt.");
        std::error_code ignored;
        if (!fs::is_regular_file(tile, ignored))
            throw input_error("The virtual raster " + vrt.string() + " names the tile " + tile.string() +
                              ", which is not there; put it back, or build the virtual raster anew with gdalbuildvrt.");
        check_content(tile, vrt);
    }

    void check_content(const fs::path& tile, const fs::path& vrt) {
        if (is_virtual_raster(tile)) return check(tile);
        if (is_xml(beginning_of(tile)))
            throw input_error("The tile " + tile.string() + " of the virtual raster " + vrt.string() +
                              " is a text that describes data elsewhere; only files that hold their cells are read.");
    }

    std::vector<fs::path> chain_;
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
