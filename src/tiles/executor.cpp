#include "rillclock/tiles/executor.hpp"

#include <oneapi/tbb/global_control.h>
#include <oneapi/tbb/parallel_for.h>
#include <oneapi/tbb/task_arena.h>
#include <sched.h>

#include <algorithm>
#include <atomic>
#include <exception>
#include <limits>
#include <mutex>
#include <thread>
#include <vector>

#include "rillclock/tiles/processor_quota.hpp"

namespace rillclock {
namespace {

/// Keeps the exception of the smallest item that threw.
class FirstFailure {
public:
    template <class Work>
    void guard(std::size_t item, const Work& work) {
        if (failed_.load(std::memory_order_relaxed)) return;
        try {
            work(item);
        } catch (...) {
            const std::lock_guard lock(mutex_);
            if (item < item_) {
                item_ = item;
                what_ = std::current_exception();
            }
            failed_.store(true, std::memory_order_relaxed);
        }
    }
    void throw_on() const {
        if (what_) std::rethrow_exception(what_);
    }

private:
    std::mutex mutex_;
    std::atomic<bool> failed_ = false;
    std::size_t item_ = std::numeric_limits<std::size_t>::max();
    std::exception_ptr what_;
};

unsigned allowed_processors() {
    cpu_set_t allowed;
    CPU_ZERO(&allowed);
    if (sched_getaffinity(0, sizeof allowed, &allowed) != 0) return std::max(1U, std::thread::hardware_concurrency());
    return std::max(1U, static_cast<unsigned>(CPU_COUNT(&allowed)));
}

#ifdef RILLCLOCK_PLAIN_THREADS
constexpr bool may_use_arena = false;   // for the thread sanitizer
#else
constexpr bool may_use_arena = true;
#endif

}  // namespace

struct Executor::Arena {
    explicit Arena(unsigned threads)
        : limit(oneapi::tbb::global_control::max_allowed_parallelism, threads), tasks(static_cast<int>(threads)) {}
    oneapi::tbb::global_control limit;  // more threads than processors only where they were asked for
    oneapi::tbb::task_arena tasks;
};

Executor::Executor(unsigned threads, Kind kind)
    : threads_(threads == 0 ? usable_threads() : threads),
      arena_(may_use_arena && kind == Kind::task_arena && threads_ > 1 ? std::make_unique<Arena>(threads_) : nullptr) {}
Executor::~Executor() = default;
Executor::Executor(Executor&&) noexcept = default;
Executor& Executor::operator=(Executor&&) noexcept = default;

void Executor::for_each(std::size_t count, const std::function<void(std::size_t)>& work) const {
    FirstFailure failure;
    if (arena_) {
        arena_->tasks.execute([&] {
            oneapi::tbb::parallel_for(std::size_t{0}, count, [&](std::size_t item) { failure.guard(item, work); });
        });
    } else {
        std::atomic<std::size_t> next = 0;
        const auto take_items = [&] {
            for (std::size_t item = next++; item < count; item = next++) failure.guard(item, work);
        };
        std::vector<std::jthread> others;
        for (std::size_t i = 1; i < std::min<std::size_t>(threads_, count); ++i) others.emplace_back(take_items);
        take_items();
    }
    failure.throw_on();
}

unsigned usable_threads() { return threads_within(processor_quota(), allowed_processors()); }

}  // namespace rillclock
