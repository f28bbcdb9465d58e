#include "rillclock/tiles/usable_memory.hpp"

#include <sys/resource.h>

#include <catch2/catch.hpp>

#include <cmath>
#include <cstdlib>
#include <fstream>
#include <string>

namespace rillclock {
namespace {

namespace fs = std::filesystem;

/// The files of a machine, as far as they tell of memory. 8 GiB of it unless a test says otherwise.
class Machine {
public:
    Machine() {
        std::string name = (fs::temp_directory_path() / "rillclock-machine-XXXXXX").string();
        root_ = mkdtemp(name.data());
        put("proc/meminfo", "MemTotal:        8388608 kB\nMemFree:          200000 kB\n");
    }
    ~Machine() { fs::remove_all(root_); }
    Machine(const Machine&) = delete;
    Machine& operator=(const Machine&) = delete;

    void put(const std::string& path, const std::string& content) const {
        fs::create_directories((root_ / path).parent_path());
        std::ofstream(root_ / path) << content;
    }
    [[nodiscard]] MemoryLimit limit() const { return usable_memory(root_); }

private:
    fs::path root_;
};

TEST_CASE("without containers the memory of the machine is the limit") {
    const Machine machine;
    CHECK(machine.limit().bytes == 8388608.0 * 1024.0);
    CHECK(machine.limit().set_by == "the machine");
}

TEST_CASE("a container of the second version limits a process by the least of its groups") {
    const Machine machine;
    machine.put("proc/self/cgroup", "0::/batch/job\n");
    machine.put("sys/fs/cgroup/batch/job/memory.max", "max\n");
    machine.put("sys/fs/cgroup/batch/memory.max", "2000000000\n");
    machine.put("sys/fs/cgroup/memory.max", "3000000000\n");
    CHECK(machine.limit().bytes == 2e9);
    CHECK(machine.limit().set_by == "the container");
}

TEST_CASE("within a container that sees itself as the whole, the limit stands at the top") {
    const Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    machine.put("sys/fs/cgroup/memory.max", "536870912\n");
    CHECK(machine.limit().bytes == 536870912.0);
}

TEST_CASE("a container of the first version limits a process under the memory controller alone") {
    const Machine machine;
    machine.put("proc/self/cgroup", "9:name=systemd:/\n4:memory:/box\n0::/\n");
    machine.put("sys/fs/cgroup/memory/box/memory.limit_in_bytes", "1000000000\n");
    machine.put("sys/fs/cgroup/memory/memory.limit_in_bytes", "9223372036854771712\n");
    CHECK(machine.limit().bytes == 1e9);
}

TEST_CASE("a container that may have more than the machine has is limited by the machine") {
    const Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    machine.put("sys/fs/cgroup/memory.max", "64000000000\n");
    CHECK(machine.limit().set_by == "the machine");
}

TEST_CASE("files that are not there set no limit") {
    const Machine machine;
    machine.put("proc/meminfo", "");
    CHECK(std::isinf(machine.limit().bytes));
}

TEST_CASE("a limit of the address space counts") {
    rlimit before{};
    REQUIRE(getrlimit(RLIMIT_AS, &before) == 0);
    rlimit small = before;
    small.rlim_cur = std::size_t{1} << 40U;   // 1 TiB: more than the test needs under any sanitizer but the address sanitizer's own space
    if (setrlimit(RLIMIT_AS, &small) != 0) return;
    const MemoryLimit limit = usable_memory();
    setrlimit(RLIMIT_AS, &before);
    CHECK(limit.bytes <= std::pow(2.0, 40));
}

}  // namespace
}  // namespace rillclock
