#include "rillclock/deliver/version.hpp"

namespace rillclock {

const std::string_view version_text = RILLCLOCK_VERSION;

}  // namespace rillclock
