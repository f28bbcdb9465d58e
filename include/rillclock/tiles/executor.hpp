#pragma once

#include <cstddef>
#include <functional>
#include <memory>

namespace rillclock {

/// Runs independent pieces of work, tiles mostly, on threads.
///
/// Promise: every item is worked once, in any order; `for_each` returns when all are done. Where items throw, the exception of
/// the smallest item that threw is thrown on, after the others are done or skipped. What is computed must not depend on the order.
class Executor {
public:
    /// How the threads are kept: by oneTBB, or plainly (for the thread sanitizer, which oneTBB confuses).
    enum class Kind { task_arena, plain_threads };

    /// `threads` of 0 means as many as `usable_threads`.
    explicit Executor(unsigned threads = 0, Kind kind = Kind::task_arena);
    ~Executor();
    Executor(Executor&&) noexcept;
    Executor& operator=(Executor&&) noexcept;

    [[nodiscard]] unsigned threads() const { return threads_; }
    /// Calls `work(item)` for every item from 0 to count − 1.
    void for_each(std::size_t count, const std::function<void(std::size_t)>& work) const;

private:
    struct Arena;
    unsigned threads_;
    std::unique_ptr<Arena> arena_;   ///< none where threads are plain
};

/// Threads this process may use: the processors it may run on, and no more than a container's quota of processor time allows.
[[nodiscard]] unsigned usable_threads();

}  // namespace rillclock
