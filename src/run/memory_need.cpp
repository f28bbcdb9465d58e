#include "rillclock/run/memory_need.hpp"

#include "rillclock/core/number_text.hpp"

namespace rillclock {

std::string bytes_text(double bytes) {
    return bytes < 1e9 ? significant(bytes / 1e6, 3) + " MB" : significant(bytes / 1e9, 3) + " GB";
}

std::optional<std::string> lack_of_memory(const MemoryTask& task, const MemoryLimit& limit) {
    const double need = memory_need(task);
    if (!(need > limit.bytes)) return std::nullopt;
    return "a run over " + significant(static_cast<double>(task.cells) / 1e6, 3) + " million cells needs about " + bytes_text(need) +
           " of memory, and " + limit.set_by + " allows " + bytes_text(limit.bytes) +
           "; cut out the part of the elevations that is needed (gdal_translate -projwin), or run it where there is more memory";
}

}  // namespace rillclock
