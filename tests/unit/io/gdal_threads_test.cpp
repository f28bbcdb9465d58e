#include "rillclock/io/gdal_threads.hpp"

#include <catch2/catch.hpp>
#include <cpl_conv.h>

#include <string>

namespace rillclock {
namespace {

constexpr const char* variable = "GDAL_NUM_THREADS";

/// Sets GDAL's variable for a while.
class Variable {
public:
    explicit Variable(const char* value) { CPLSetConfigOption(variable, value); }
    Variable(const Variable&) = delete;
    Variable& operator=(const Variable&) = delete;
    ~Variable() { CPLSetConfigOption(variable, nullptr); }
};

TEST_CASE("GDAL's variable asks for a number of threads, or for none in particular") {
    CHECK_FALSE(gdal_threads());
    for (const char* none : {"ALL_CPUS", "", "0", "-2", "3 or 4", "1025", "99999999999"}) {
        INFO(none);
        const Variable set(none);
        CHECK_FALSE(gdal_threads());
    }
    const Variable set("3");
    CHECK(gdal_threads() == 3U);
}

TEST_CASE("GDAL packs on as many threads as the work has, unless its variable says otherwise") {
    {
        const GdalThreadLimit limit(5);
        CHECK(CPLGetConfigOption(variable, "none") == std::string("5"));
    }
    CHECK(CPLGetConfigOption(variable, "none") == std::string("none"));
    const Variable set("7");
    {
        const GdalThreadLimit limit(5);
        CHECK(CPLGetConfigOption(variable, "none") == std::string("7"));
    }
    CHECK(CPLGetConfigOption(variable, "none") == std::string("7"));
}

}  // namespace
}  // namespace rillclock
