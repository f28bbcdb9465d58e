#include "rillclock/io/gdal_session.hpp"

#include <cpl_conv.h>
#include <cpl_error.h>

#include <thread>

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

TEST_CASE("a failure on any thread since the mark is thrown, with what was being done") {
    const GdalSession session;
    const GdalMark before = session.mark();
    std::thread([] { CPLError(CE_Failure, CPLE_FileIO, "no space left"); }).join();
    const std::string sentence =
        sentence_of([&] { session.throw_if_failed(before, Fault::machine, "Writing a.tif failed"); }, Fault::machine);
    CHECK(sentence == "Writing a.tif failed: no space left");
}

TEST_CASE("failures before the mark do not count") {
    const GdalSession session;
    CPLError(CE_Failure, CPLE_AppDefined, "long ago");
    CHECK_NOTHROW(session.throw_if_failed(session.mark(), Fault::inputs, "x"));
}

TEST_CASE("equal warnings are told once") {
    const GdalSession session;
    const GdalMark before = session.mark();
    CPLError(CE_Warning, CPLE_AppDefined, "odd");
    CPLError(CE_Warning, CPLE_AppDefined, "odd");
    CHECK(session.warnings_since(before) == std::vector<std::string>{"odd"});
    CHECK(session.failure_since(before).empty());
}

TEST_CASE("settings of the process come back with the end of the last session") {
    CPLSetConfigOption("GDAL_VRT_ENABLE_PYTHON", "YES");
    {
        const GdalSession first;
        const GdalSession second;
        CHECK(std::string(CPLGetConfigOption("GDAL_VRT_ENABLE_PYTHON", "")) == "NO");
    }
    CHECK(std::string(CPLGetConfigOption("GDAL_VRT_ENABLE_PYTHON", "")) == "YES");
    CPLSetConfigOption("GDAL_VRT_ENABLE_PYTHON", nullptr);
}
