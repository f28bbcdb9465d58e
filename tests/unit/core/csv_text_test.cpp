#include "rillclock/core/csv_text.hpp"

#include <catch2/catch.hpp>

namespace rillclock {
namespace {

using Catch::Contains;
using Fields = std::vector<std::string>;

TEST_CASE("a table has a header and rows that know their line") {
    const CsvTable table = parse_csv("code,name\n11,Water\n\n41,Forest\n", "t.csv");
    CHECK(table.header == Fields{"code", "name"});
    REQUIRE(table.rows.size() == 2);
    CHECK(table.rows[1].fields == Fields{"41", "Forest"});
    CHECK(table.rows[1].line == 4);
    CHECK(table.column("name") == 1U);
    CHECK_FALSE(table.column("Name"));
}

TEST_CASE("a byte order mark, CRLF and a missing last line end change nothing") {
    const CsvTable table = parse_csv(
        "\xEF\xBB\xBF"
        "a,b\r\n1,2\r\n3,4",
        "t.csv");
    CHECK(table.header == Fields{"a", "b"});
    REQUIRE(table.rows.size() == 2);
    CHECK(table.rows[0].fields == Fields{"1", "2"});
    CHECK(table.rows[1].fields == Fields{"3", "4"});
}

TEST_CASE("a quoted field keeps commas, quotes, blanks and line ends") {
    const CsvTable table = parse_csv("a,b\n\"x, \"\"y\"\"\", \" z\n w\" \n3,\n", "t.csv");
    REQUIRE(table.rows.size() == 2);
    CHECK(table.rows[0].fields == Fields{"x, \"y\"", " z\n w"});
    CHECK(table.rows[1].line == 4);
    CHECK(table.rows[1].fields == Fields{"3", ""});
}

TEST_CASE("blanks around an unquoted field are dropped") {
    CHECK(parse_csv("a , b\n 1 ,\t2\n", "t.csv").rows[0].fields == Fields{"1", "2"});
}

TEST_CASE("a row with another number of fields is refused with its line") {
    CHECK_THROWS_WITH(parse_csv("a,b\n1,2\n1,2,3\n", "t.csv"),
                      Contains("t.csv, line 3") && Contains("3 fields") && Contains("has 2"));
}

TEST_CASE("semicolons and tabs are refused by name") {
    CHECK_THROWS_WITH(parse_csv("a;b\n1;2\n", "t.csv"), Contains("t.csv, line 1") && Contains("semicolons"));
    CHECK_THROWS_WITH(parse_csv("a\tb\n1\t2\n", "t.csv"), Contains("tabs"));
}

TEST_CASE("a quote that does not close is refused with the line it opens on") {
    CHECK_THROWS_WITH(parse_csv("a,b\n1,\"2\n3,4\n", "t.csv"), Contains("t.csv, line 2") && Contains("does not close"));
    CHECK_THROWS_WITH(parse_csv("a,b\n\"1\"x,2\n", "t.csv"), Contains("text follows a closing quote"));
}

TEST_CASE("a text without a header is refused") {
    CHECK_THROWS_WITH(parse_csv("", "t.csv"), Contains("holds no table"));
    CHECK_THROWS_WITH(parse_csv("\n \r\n", "t.csv"), Contains("holds no table"));
}

TEST_CASE("what is written is read back the same") {
    const Fields fields{"plain", "with, comma", "with \"quote\"", "two\nlines", " blanks ", "", "3.5"};
    const CsvTable table = parse_csv("a,b,c,d,e,f,g\n" + csv_line(fields), "t.csv");
    REQUIRE(table.rows.size() == 1);
    CHECK(table.rows[0].fields == fields);
}

TEST_CASE("plain fields are written without quotes") {
    CHECK(csv_line(Fields{"a b", "", "3.5"}) == "a b,,3.5\n");
    CHECK(csv_line(Fields{"a,b", "say \"x\""}) == "\"a,b\",\"say \"\"x\"\"\"\n");
}

}  // namespace
}  // namespace rillclock
