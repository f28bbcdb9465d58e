#pragma once

#include <cstdint>
#include <functional>
#include <string_view>

#include "rillclock/core/error.hpp"

namespace rillclock {

/// What a stage of the run reports while it works.
struct StageProgress {
    std::string_view stage;      ///< a few words: "flow directions"
    std::int64_t done = 0;       ///< of `total`, in the stage's own unit
    std::int64_t total = 0;      ///< 0 where it cannot be told
    bool finished = false;       ///< true once, at the end of the stage
};

/// The caller's ear and hand: told of progress, and may ask to stop. A default-made one is silent.
class Progress {
public:
    Progress() = default;
    /// `report` returns false to stop the run; it is called on the thread that runs the stage.
    explicit Progress(std::function<bool(const StageProgress&)> report) : report_(std::move(report)) {}

    /// Passes the report on. Throws Cancelled where the caller wants to stop.
    void tell(const StageProgress& progress) const {
        if (report_ && !report_(progress)) throw Cancelled();
    }

private:
    std::function<bool(const StageProgress&)> report_;
};

}  // namespace rillclock
