#pragma once

#include <cpl_error.h>

namespace rillclock {

/// While it lives, what GDAL reports on this thread is dropped: for questions to which "no" is an ordinary answer.
class QuietGdal {
public:
    QuietGdal() { CPLPushErrorHandler(CPLQuietErrorHandler); }
    QuietGdal(const QuietGdal&) = delete;
    QuietGdal& operator=(const QuietGdal&) = delete;
    ~QuietGdal() { CPLPopErrorHandler(); }
};

}  // namespace rillclock
