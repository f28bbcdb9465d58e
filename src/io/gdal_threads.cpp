#include "rillclock/io/gdal_threads.hpp"

#include <cpl_conv.h>

#include <charconv>
#include <string>
#include <string_view>

namespace rillclock {
namespace {

constexpr const char* variable = "GDAL_NUM_THREADS";
constexpr unsigned most_threads = 1024;   // as --threads takes them

}  // namespace

std::optional<unsigned> gdal_threads() {
    const std::string_view text = CPLGetConfigOption(variable, "");
    unsigned threads = 0;
    const auto [end, problem] = std::from_chars(text.data(), text.data() + text.size(), threads);
    if (problem != std::errc() || end != text.data() + text.size() || threads < 1 || threads > most_threads) return std::nullopt;
    return threads;
}

GdalThreadLimit::GdalThreadLimit(unsigned threads) : is_set_(CPLGetConfigOption(variable, nullptr) == nullptr) {
    if (is_set_) CPLSetConfigOption(variable, std::to_string(threads).c_str());
}

GdalThreadLimit::~GdalThreadLimit() {
    if (is_set_) CPLSetConfigOption(variable, nullptr);
}

}  // namespace rillclock
