#include "rillclock/terrain/passes.hpp"

#include <tuple>

namespace rillclock {

bool lies_lower(const Pass& a, const Pass& b) {
    return std::tie(a.higher, a.lower, a.cell, a.code) < std::tie(b.higher, b.lower, b.cell, b.code);
}

}  // namespace rillclock
