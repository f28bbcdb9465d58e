#pragma once

#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <string>

namespace rillclock::testing {

/// The files of a machine that tell what a process may use, in a folder that goes with it. 8 GiB of memory unless a test says otherwise.
class Machine {
public:
    Machine() {
        std::string name = (std::filesystem::temp_directory_path() / "rillclock-machine-XXXXXX").string();
        root_ = mkdtemp(name.data());
        put("proc/meminfo", "MemTotal:        8388608 kB\nMemFree:          200000 kB\n");
    }
    ~Machine() { std::filesystem::remove_all(root_); }
    Machine(const Machine&) = delete;
    Machine& operator=(const Machine&) = delete;

    void put(const std::string& path, const std::string& content) const {
        std::filesystem::create_directories((root_ / path).parent_path());
        std::ofstream(root_ / path) << content;
    }
    [[nodiscard]] const std::filesystem::path& root() const { return root_; }

private:
    std::filesystem::path root_;
};

}  // namespace rillclock::testing
