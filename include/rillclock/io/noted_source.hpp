#pragma once

#include "rillclock/core/notice.hpp"
#include "rillclock/raster/blocks.hpp"

namespace rillclock {

/// A source that notes what it meets while it is read.
template <class T>
class NotedSource : public BlockSource<T> {
public:
    /// What the windows read so far brought up. A cell read twice counts twice.
    [[nodiscard]] virtual Notices notices() const = 0;
};

}  // namespace rillclock
