#pragma once

#include <chrono>
#include <string>

#include "rillclock/core/progress.hpp"

namespace rillclock {

/// Shows the stages of a run on standard error: a line for each when it ends, with its time and cells per second; on a terminal a bar
/// while it runs. Silent where asked to be. Stops the run once a signal came.
class StageLog {
public:
    explicit StageLog(bool quiet);

    /// Takes a report; returns false where the run should stop.
    bool report(const StageProgress& progress);

private:
    void draw_bar(const StageProgress& progress);
    void clear_bar();

    bool quiet_;
    bool on_terminal_;
    bool bar_drawn_ = false;
    std::string stage_;
    std::chrono::steady_clock::time_point begun_;
    std::chrono::steady_clock::time_point drawn_;
};

}  // namespace rillclock
