#include "stop_signal.hpp"

#include <csignal>
#include <ctime>

namespace rillclock {
namespace {

/// A signal so soon after the first is the same wish: some programs send it to a process and to its group.
constexpr std::time_t same_wish_s = 2;

volatile std::sig_atomic_t received = 0;
volatile std::time_t received_at = 0;

void receive(int signal) {
    const std::time_t now = std::time(nullptr);
    if (received == 0) {
        received = signal;
        received_at = now;
    } else if (now - received_at >= same_wish_s) {
        // The user does not want to wait: what the signal does by default happens once this function has returned.
        std::signal(signal, SIG_DFL);
        std::raise(signal);
    }
}

}  // namespace

void listen_for_signals() {
    std::signal(SIGINT, receive);
    std::signal(SIGTERM, receive);
    std::signal(SIGXFSZ, SIG_IGN);
    std::signal(SIGPIPE, SIG_IGN);
}

int stop_signal() { return received; }

}  // namespace rillclock
