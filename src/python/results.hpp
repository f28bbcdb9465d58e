#pragma once

#include <pybind11/pybind11.h>

#include <filesystem>

#include "rillclock/run/travel_times.hpp"

namespace rillclock {

/// Adds the types of results to the module: Notice, TravelTimes, Result.
void add_results(pybind11::module_& module);

/// What is known of every cell, as an object of the module's TravelTimes; its arrays take over the rasters.
[[nodiscard]] pybind11::object travel_times_object(TravelTimes&& times);

/// A result folder, as an object of the module's Result. Throws an input error where the folder is no result.
[[nodiscard]] pybind11::object result_object(const std::filesystem::path& folder);

}  // namespace rillclock
