#pragma once

#include <string>
#include <vector>

#include "rillclock/core/notice.hpp"

namespace rillclock {

/// What was noticed of one kind.
struct NoticedKind {
    const Notice* first = nullptr;           ///< the one that stands first among the notices
    std::vector<std::string> other_points;   ///< at which others it was noticed too, in their order
};

/// The notices by kind, in the order of the first of each, so that none is hidden behind many of another. What is of no point stands
/// alone. The notices must outlive the answer.
[[nodiscard]] std::vector<NoticedKind> noticed_kinds(const Notices& notices);

/// "Likewise at 7 more: 'Weir', 'Mill bridge', 'Tramway bank', 'Orchard inlet' and 3 others."; nothing where there are no others.
[[nodiscard]] std::string likewise_words(const NoticedKind& kind);

}  // namespace rillclock
