#pragma once

namespace rillclock {

/// From now on SIGINT and SIGTERM ask the run to stop; another one, two seconds later or more, ends the process at once. Signals that would end the process where
/// a failed write should be reported instead (a file grown too large, a closed pipe) are ignored.
void listen_for_signals();

/// The signal that asked to stop; 0 where none did.
[[nodiscard]] int stop_signal();

}  // namespace rillclock
