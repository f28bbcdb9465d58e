#include "rillclock/tiles/processor_quota.hpp"

#include <catch2/catch.hpp>

#include <algorithm>
#include <cmath>

#include "machine_files.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock {
namespace {

TEST_CASE("without containers there is no quota of processor time") {
    const testing::Machine machine;
    CHECK(std::isinf(processor_quota(machine.root())));
    machine.put("proc/self/cgroup", "0::/user.slice\n");
    CHECK(std::isinf(processor_quota(machine.root())));
}

TEST_CASE("the process's own group of the second version sets the quota, where the whole has none") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/batch/job\n");
    machine.put("sys/fs/cgroup/batch/job/cpu.max", "150000 100000\n");
    machine.put("sys/fs/cgroup/cpu.max", "max 100000\n");
    CHECK(processor_quota(machine.root()) == 1.5);
}

TEST_CASE("a group is held to the least quota of all that it is part of") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/batch/job\n");
    machine.put("sys/fs/cgroup/batch/job/cpu.max", "max 100000\n");
    machine.put("sys/fs/cgroup/batch/cpu.max", "100000 50000\n");
    machine.put("sys/fs/cgroup/cpu.max", "300000 100000\n");
    CHECK(processor_quota(machine.root()) == 2.0);
}

TEST_CASE("within a container that sees itself as the whole, the quota stands at the top") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    machine.put("sys/fs/cgroup/cpu.max", "50000 100000\n");
    CHECK(processor_quota(machine.root()) == 0.5);
}

TEST_CASE("groups of the first version set the quota under the folder of all controllers that are ruled together") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "9:name=systemd:/\n4:cpuacct,cpu:/box\n3:cpuset:/few\n");
    machine.put("sys/fs/cgroup/cpuacct,cpu/cpu.cfs_quota_us", "-1\n");
    machine.put("sys/fs/cgroup/cpuacct,cpu/cpu.cfs_period_us", "100000\n");
    CHECK(std::isinf(processor_quota(machine.root())));
    machine.put("sys/fs/cgroup/cpuacct,cpu/box/cpu.cfs_quota_us", "75000\n");
    machine.put("sys/fs/cgroup/cpuacct,cpu/box/cpu.cfs_period_us", "25000\n");
    CHECK(processor_quota(machine.root()) == 3.0);
}

TEST_CASE("a container of the first version that sees its own group at the top alone has its quota there") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "4:cpu,cpuacct:/docker/0123\n");
    machine.put("sys/fs/cgroup/cpu/cpu.cfs_quota_us", "200000\n");
    machine.put("sys/fs/cgroup/cpu/cpu.cfs_period_us", "100000\n");
    CHECK(processor_quota(machine.root()) == 2.0);
}

TEST_CASE("what is no number and what is not above zero sets no quota") {
    const testing::Machine machine;
    machine.put("proc/self/cgroup", "0::/\n");
    for (const char* content : {"", "max", "many 100000", "0 100000", "100000 0", "100000"}) {
        machine.put("sys/fs/cgroup/cpu.max", content);
        CHECK(std::isinf(processor_quota(machine.root())));
    }
}

TEST_CASE("threads are as many as processors, or as the quota has them with the last one in part, but one at least") {
    CHECK(threads_within(INFINITY, 8) == 8);
    CHECK(threads_within(16.0, 8) == 8);
    CHECK(threads_within(3.0, 8) == 3);
    CHECK(threads_within(1.5, 8) == 2);
    CHECK(threads_within(0.1, 8) == 1);
    CHECK(usable_threads() <= std::max(1.0, std::ceil(processor_quota())));
}

}  // namespace
}  // namespace rillclock
