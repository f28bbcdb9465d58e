#include "rillclock/hydraulics/roughness.hpp"

#include <catch2/catch.hpp>

#include <cstddef>
#include <vector>

namespace rillclock {
namespace {

TEST_CASE("every table of n says its source, and every row is in order and no sheet-flow n") {
    for (const RoughnessTable& table : roughness_tables()) {
        INFO(table.of);
        CHECK_FALSE(table.source.empty());
        CHECK(table.entries.size() >= 5);
        for (const RoughnessEntry& row : table.entries) {
            INFO(row.surface);
            CHECK(row.least > 0.008);
            CHECK(row.least <= row.typical);
            CHECK(row.typical <= row.greatest);
            CHECK(row.greatest <= 0.15);
        }
    }
}

TEST_CASE("the tables have the rows that tests/published/roughness.txt holds one by one") {
    std::vector<std::size_t> rows;
    for (const RoughnessTable& table : roughness_tables()) rows.push_back(table.entries.size());
    CHECK(rows == std::vector<std::size_t>{7, 17, 8, 11, 10});
}

TEST_CASE("streets come first: a troweled concrete gutter has 0.012 and rough asphalt 0.016") {
    // FHWA, HEC-22, table 4-3, from memory.
    const RoughnessTable& streets = roughness_tables().front();
    CHECK(streets.of == "streets and gutters");
    CHECK(streets.entries[0].typical == 0.012);
    CHECK(streets.entries[2].typical == 0.016);
}

}  // namespace
}  // namespace rillclock
