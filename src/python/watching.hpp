#pragma once

#include <pybind11/pybind11.h>

#include "rillclock/core/progress.hpp"

namespace rillclock {

/// Tells a Python function of the progress of work that runs without the interpreter's lock, and looks for an interrupt at each report.
///
/// `function`: None, or called with (stage, done, total); where it returns False the work stops. What it raises, or an interrupt from the
/// keyboard, is thrown on.
[[nodiscard]] Progress watching(const pybind11::object& function);

}  // namespace rillclock
