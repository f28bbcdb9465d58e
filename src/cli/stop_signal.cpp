#include "stop_signal.hpp"

#include <csignal>

namespace rillclock {
namespace {

volatile std::sig_atomic_t received = 0;

void receive(int signal) {
    // The second time the default applies: the user does not want to wait.
    std::signal(signal, SIG_DFL);
    received = signal;
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
