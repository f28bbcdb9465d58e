#include "virtual_file.hpp"

#include <cpl_port.h>

#include <algorithm>
#include <array>
#include <cstdlib>
#include <fstream>

#include "local_file.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {

namespace fs = std::filesystem;

std::string beginning_of(const fs::path& path) {
    std::array<char, 1024> bytes{};
    std::ifstream file(path, std::ios::binary);
    file.read(bytes.data(), static_cast<std::streamsize>(bytes.size()));
    return {bytes.data(), static_cast<std::size_t>(file.gcount())};
}

bool is_called(const CPLXMLNode& node, const char* name) {
    return (node.eType == CXT_Element || node.eType == CXT_Attribute) && EQUAL(node.pszValue, name);
}

fs::path source_named(const CPLXMLNode& node, const fs::path& file, const std::string& what, const std::string& as) {
    const std::string name = CPLGetXMLValue(&node, "", "");
    const bool is_relative = std::strtol(CPLGetXMLValue(&node, "relativeToVRT", "0"), nullptr, 10) != 0;   // as GDAL reads it
    fs::path source = is_relative ? file.parent_path() / name : fs::path(name);
    if (is_address(name) || is_address(source.string()))
        throw input_error("The " + what + " " + file.string() + " names \"" + name.substr(0, 120) + "\" as a " + as +
                          "; only plain local files are read: download or unpack it and build the " + what + " anew.");
    return source;
}

XmlTree VirtualChain::enter(const fs::path& path) {
    const fs::path real = fs::canonical(path);
    if (std::find(chain_.begin(), chain_.end(), real) != chain_.end())
        throw input_error("The " + what_ + " " + path.string() + " names itself among what it is built of; " + anew_ + ".");
    if (chain_.size() >= 8)
        throw input_error("The " + what_ + " " + chain_.front().string() + " is built of others more than 8 deep; " + anew_ + ".");
    XmlTree tree(CPLParseXMLFile(path.c_str()), &CPLDestroyXMLNode);
    if (!tree) throw input_error("The " + what_ + " " + path.string() + " is not well-formed XML; " + anew_ + ".");
    chain_.push_back(real);
    return tree;
}

}  // namespace rillclock
