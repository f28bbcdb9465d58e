#include "rillclock/tiles/usable_memory.hpp"

#include <sys/resource.h>

#include <catch2/catch.hpp>

#include <cmath>

#include "machine_files.hpp"

namespace rillclock {
namespace {

TEST_CASE("without containers the memory of the machine is the limit") {
    const testing::Machine machine;
    CHECK(usable_memory(machine.root()).bytes == 8388608.0 * 1024.0);
    CHECK(usable_memory(machine.root()).set_by == "the machine");
}

TEST_CASE("a container of the second version limits a process by the least of its groups") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/batch/job\n");
    machine.put("sys/fs/cgroup/batch/job/memory.max", "max\n");
    machine.put("sys/fs/cgroup/batch/memory.max", "2000000000\n");
    machine.put("sys/fs/cgroup/memory.max", "3000000000\n");
    CHECK(usable_memory(machine.root()).bytes == 2e9);
    CHECK(usable_memory(machine.root()).set_by == "the container");
}

TEST_CASE("within a container that sees itself as the whole, the limit stands at the top") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    machine.put("sys/fs/cgroup/memory.max", "536870912\n");
    CHECK(usable_memory(machine.root()).bytes == 536870912.0);
}

TEST_CASE("a container of the first version limits a process under the memory controller alone") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "9:name=systemd:/\n4:memory:/box\n0::/\n");
    machine.put("sys/fs/cgroup/memory/box/memory.limit_in_bytes", "1000000000\n");
    machine.put("sys/fs/cgroup/memory/memory.limit_in_bytes", "9223372036854771712\n");
    CHECK(usable_memory(machine.root()).bytes == 1e9);
}

TEST_CASE("a container that may have more than the machine has is limited by the machine") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    machine.put("sys/fs/cgroup/memory.max", "64000000000\n");
    CHECK(usable_memory(machine.root()).set_by == "the machine");
}

TEST_CASE("files that are not there set no limit") {
    const testing::Machine machine;
    machine.put("proc/meminfo", "");
    CHECK(std::isinf(usable_memory(machine.root()).bytes));
}

// The thread sanitizer's own space is larger than any limit that could be set.
#ifndef __SANITIZE_THREAD__
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
#endif

}  // namespace
}  // namespace rillclock
