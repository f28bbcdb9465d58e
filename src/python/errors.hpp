#pragma once

#include <pybind11/pybind11.h>

namespace rillclock {

/// Adds the exceptions to the module: Error, of it InputError (a ValueError) and MachineError (a RuntimeError) by who can put it right, and
/// Stopped. What the library throws becomes one of them, with the same sentence.
void add_errors(pybind11::module_& module);

}  // namespace rillclock
