#pragma once

#include <cpl_conv.h>

#include <string>

namespace rillclock {

/// Sets a configuration option of GDAL for this thread, for as long as it lives.
class ThreadOption {
public:
    ThreadOption(const char* key, const char* value) : key_(key) {
        const char* former = CPLGetThreadLocalConfigOption(key, nullptr);
        if (former) former_ = former;
        had_former_ = former != nullptr;
        CPLSetThreadLocalConfigOption(key, value);
    }
    ThreadOption(const ThreadOption&) = delete;
    ThreadOption& operator=(const ThreadOption&) = delete;
    ~ThreadOption() { CPLSetThreadLocalConfigOption(key_, had_former_ ? former_.c_str() : nullptr); }

private:
    const char* key_;
    std::string former_;
    bool had_former_ = false;
};

}  // namespace rillclock
