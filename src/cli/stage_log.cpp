#include "stage_log.hpp"

#include <spdlog/spdlog.h>
#include <unistd.h>

#include <cstdio>

#include "stop_signal.hpp"

namespace rillclock {
namespace {

using Seconds = std::chrono::duration<double>;
constexpr int bar_width = 30;
constexpr Seconds least_redraw{0.1};

std::string rate_text(std::int64_t cells, Seconds time) {
    const double per_second = static_cast<double>(cells) / std::max(time.count(), 1e-6);
    return per_second >= 1e6 ? fmt::format("{:.1f} million cells/s", per_second / 1e6)
                             : fmt::format("{:.0f} cells/s", per_second);
}

}  // namespace

StageLog::StageLog(bool quiet) : quiet_(quiet), on_terminal_(isatty(STDERR_FILENO) != 0) {}

bool StageLog::report(const StageProgress& progress) {
    const auto now = std::chrono::steady_clock::now();
    if (stage_ != progress.stage) {
        stage_ = progress.stage;
        begun_ = now;
    }
    if (progress.finished) {
        clear_bar();
        const Seconds time = now - begun_;
        if (!quiet_) spdlog::info("{:<20} {:>7.2f} s  {}", progress.stage, time.count(), rate_text(progress.total, time));
    } else if (on_terminal_ && !quiet_ && now - drawn_ >= least_redraw) {
        drawn_ = now;
        draw_bar(progress);
    }
    return stop_signal() == 0;
}

void StageLog::draw_bar(const StageProgress& progress) {
    const double share = progress.total > 0 ? static_cast<double>(progress.done) / static_cast<double>(progress.total) : 0.0;
    const int full = static_cast<int>(share * bar_width);
    const std::string bar = std::string(static_cast<std::size_t>(full), '=') + std::string(static_cast<std::size_t>(bar_width - full), ' ');
    fmt::print(stderr, "\r{:<20} [{}] {:3.0f} %", progress.stage, bar, 100.0 * share);
    std::fflush(stderr);
    bar_drawn_ = true;
}

void StageLog::clear_bar() {
    if (!bar_drawn_) return;
    fmt::print(stderr, "\r{:<60}\r", "");
    bar_drawn_ = false;
}

}  // namespace rillclock
