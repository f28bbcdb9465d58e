#pragma once

#include <optional>

namespace rillclock {

/// How many threads GDAL's own variable, GDAL_NUM_THREADS, asks for; none where it is not set, names no number from 1 to 1024, or is
/// ALL_CPUS.
[[nodiscard]] std::optional<unsigned> gdal_threads();

/// While it lives, GDAL packs blocks on so many threads, where GDAL_NUM_THREADS is not set. Not to be made by two threads at a time.
class GdalThreadLimit {
public:
    explicit GdalThreadLimit(unsigned threads);
    GdalThreadLimit(const GdalThreadLimit&) = delete;
    GdalThreadLimit& operator=(const GdalThreadLimit&) = delete;
    ~GdalThreadLimit();

private:
    bool is_set_ = false;
};

}  // namespace rillclock
