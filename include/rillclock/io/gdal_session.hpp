#pragma once

#include <cstddef>
#include <string>
#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {

/// How much GDAL had reported at some moment.
struct GdalMark {
    std::size_t failures = 0;
    std::size_t warnings = 0;
};

/// While at least one lives, GDAL, OGR and PROJ of this process work the way a run needs them.
///
/// Nothing is printed: one handler collects what every thread reports. Nothing is fetched: no network for files or
/// datum grids, no program code in virtual rasters. The drivers are registered. What the process had set before is put
/// back when the last session ends. Every reader and writer of this folder holds a session of its own, so none can be
/// used without one; a run makes one first, so that a broken installation is found at once.
class GdalSession {
public:
    /// Throws Error (machine) where PROJ cannot open its database, since every reference system would then be unknown.
    GdalSession();
    GdalSession(const GdalSession&) : GdalSession() {}
    GdalSession& operator=(const GdalSession&) { return *this; }
    ~GdalSession();

    [[nodiscard]] GdalMark mark() const;
    /// Throws an Error of that fault where GDAL reported a failure since the mark, whatever its calls returned: on a
    /// full disk they return success. The sentence is `what`, a colon and GDAL's first words on it.
    void throw_if_failed(const GdalMark& since, Fault fault, const std::string& what) const;
    /// The first failure since the mark, or an empty text.
    [[nodiscard]] std::string failure_since(const GdalMark& since) const;
    /// Warnings since the mark, each text once; at most the last hundred of them.
    [[nodiscard]] std::vector<std::string> warnings_since(const GdalMark& since) const;
};

}  // namespace rillclock
