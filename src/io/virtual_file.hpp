#pragma once

#include <cpl_minixml.h>

#include <filesystem>
#include <memory>
#include <string>
#include <vector>

namespace rillclock {

using XmlTree = std::unique_ptr<CPLXMLNode, decltype(&CPLDestroyXMLNode)>;

/// The first 1024 bytes of a file, by which GDAL knows what it is.
[[nodiscard]] std::string beginning_of(const std::filesystem::path& path);

/// Whether GDAL takes a node for what has that name: an element or an attribute, in capitals or not.
[[nodiscard]] bool is_called(const CPLXMLNode& node, const char* name);

/// The file that the text of a node names, from the folder of the virtual file where it says so. Throws Error (inputs) where it is an
/// address, a path of GDAL's own or a text in place of a file; `what` is the file's kind in the sentence, `as` the source's.
[[nodiscard]] std::filesystem::path source_named(const CPLXMLNode& node, const std::filesystem::path& file, const std::string& what, const std::string& as);

/// The virtual files that are being looked at, each named by the one before.
class VirtualChain {
public:
    /// `what` they are in sentences: "virtual raster"; `anew`: how one is made: "build it anew with gdalbuildvrt".
    VirtualChain(std::string what, std::string anew) : what_(std::move(what)), anew_(std::move(anew)) {}

    /// Goes into a file. Throws Error (inputs) where it is there already, lies more than 8 deep or is not well-formed.
    [[nodiscard]] XmlTree enter(const std::filesystem::path& path);
    void leave() { chain_.pop_back(); }

private:
    std::string what_;
    std::string anew_;
    std::vector<std::filesystem::path> chain_;
};

}  // namespace rillclock
