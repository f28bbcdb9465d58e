#pragma once

#include "rillclock/core/notice.hpp"

namespace rillclock {

/// The notices with their texts as whole sentences, a capital letter first and a full stop last, wherever in the program they came from.
[[nodiscard]] Notices in_sentences(Notices notices);

}  // namespace rillclock
