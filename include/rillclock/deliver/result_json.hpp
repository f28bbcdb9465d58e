#pragma once

#include <string>
#include <vector>

#include "rillclock/deliver/study_result.hpp"
#include "rillclock/tiles/executor.hpp"

namespace rillclock {

/// The text of `result.json`, its points apart, so that who needs few of them reads no others.
struct ResultText {
    std::string frame;                  ///< all but the points: the list `outlets` is empty
    std::vector<std::string> outlets;   ///< by number − 1

    [[nodiscard]] std::string whole() const;
};

/// `result.json`, the manifest of a result: every figure, the parameters as used, the checksums of the inputs, the versions, the
/// notices and the cautions. In SI whatever the study reports in; times also in minutes. The same inputs give the same bytes.
/// The points are put into words on the executor's threads.
[[nodiscard]] ResultText result_json(const StudyResult& result, const Executor& executor);

}  // namespace rillclock
