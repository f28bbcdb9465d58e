#include "rillclock/run/demo.hpp"

#include <fstream>
#include <system_error>

#include "demo_files.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

void write_file(const std::filesystem::path& path, std::string_view content) {
    std::ofstream file(path, std::ios::binary);
    file.write(content.data(), static_cast<std::streamsize>(content.size()));
    file.close();
    if (!file) throw machine_error("'" + path.string() + "' cannot be written; check the disk and the folder's permissions");
}

}  // namespace

std::vector<std::string> write_demo(const std::filesystem::path& folder) {
    std::error_code failed;
    if (std::filesystem::exists(folder) && !std::filesystem::is_empty(folder, failed)) {
        throw input_error("'" + folder.string() + "' is there already and not an empty folder; name a new one");
    }
    std::filesystem::create_directories(folder, failed);
    if (failed) throw machine_error("the folder '" + folder.string() + "' cannot be made: " + failed.message());
    std::vector<std::string> names;
    for (const DemoFile& file : demo_files()) {
        write_file(folder / file.name, file.content);
        names.emplace_back(file.name);
    }
    return names;
}

}  // namespace rillclock
