#include "local_file.hpp"

#include <algorithm>
#include <array>
#include <fstream>
#include <string_view>

#include "rillclock/core/error.hpp"

namespace rillclock {

namespace fs = std::filesystem;

bool is_address(const std::string& text) {
    return text.find("://") != std::string::npos || text.starts_with("/vsi") || text.find('<') != std::string::npos;
}

void check_local_file(const fs::path& path, const std::string& called) {
    std::error_code problem;
    if (is_address(path.string()))
        throw input_error("The " + called + " is an address and not a local file; download or unpack it first.");
    const fs::file_status status = fs::status(path, problem);
    if (status.type() == fs::file_type::not_found)
        throw input_error("The " + called +
                          " does not exist; look at the path, which counts from the study file's folder.");
    if (problem) throw machine_error("The " + called + " cannot be looked at: " + problem.message() + ".");
    if (fs::is_directory(status)) throw input_error("The " + called + " is a folder; name the file in it.");
    if (!fs::is_regular_file(status))
        throw input_error("The " + called + " is no plain file; name a file on the disk.");
    if (fs::file_size(path) == 0)
        throw input_error("The " + called + " is empty (0 bytes); copy or download it again.");
    if (!std::ifstream(path, std::ios::binary))
        throw machine_error("The " + called + " cannot be opened for reading; look at its permissions.");
}

std::string seeming_kind(const fs::path& path) {
    std::array<char, 512> bytes{};
    std::ifstream file(path, std::ios::binary);
    file.read(bytes.data(), static_cast<std::streamsize>(bytes.size()));
    const std::string_view begin(bytes.data(), static_cast<std::size_t>(file.gcount()));
    if (begin.starts_with("PK\x03\x04")) return "it is a zip archive: unpack it first";
    if (begin.starts_with("\x1f\x8b")) return "it is packed with gzip: unpack it first";
    if (begin.find("<html") != std::string_view::npos || begin.find("<!DOCTYPE html") != std::string_view::npos)
        return "it is a web page, perhaps a failed download: download the file again";
    const bool is_text = std::all_of(begin.begin(), begin.end(), [](char c) {
        return static_cast<unsigned char>(c) >= 32U || c == '\n' || c == '\r' || c == '\t';
    });
    return is_text ? "it is a text: look whether it is the file that was meant"
                   : "its content is not known or damaged: copy or download it again";
}

}  // namespace rillclock
