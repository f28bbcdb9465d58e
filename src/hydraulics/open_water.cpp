#include "rillclock/hydraulics/open_water.hpp"

#include <cmath>

namespace rillclock {

Speed wave_celerity(Length mean_depth) {
    return metres_per_second(std::sqrt(standard_gravity * mean_depth.si()));
}

}  // namespace rillclock
