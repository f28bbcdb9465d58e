#include "rillclock/surface/cover_book.hpp"

#include <catch2/catch.hpp>

#include <cmath>

#include "rillclock/hydraulics/shallow_flow.hpp"

namespace rillclock {
namespace {

using Catch::Contains;

const std::string header = "code,name,n_low,n_typical,n_high,shallow_type,water_depth_m,source\n";

CoverBook book(const std::string& rows) {
    return parse_cover_book(header + rows, "town.csv");
}

TEST_CASE("a class has the numbers of its row") {
    const CoverBook town = book("7,Lawn,0.15,0.24,0.41,short-grass pasture,,TR-55 table 3-1\n");
    const CoverClass* lawn = town.find(7);
    REQUIRE(lawn != nullptr);
    CHECK(lawn->name == "Lawn");
    CHECK(lawn->n_low == 0.15);
    CHECK(lawn->n_typical == 0.24);
    CHECK(lawn->n_high == 0.41);
    CHECK(lawn->shallow_k == feet_per_second(6.962));
    CHECK(lawn->shallow_type == "short-grass pasture");
    CHECK_FALSE(lawn->paved);
    CHECK_FALSE(lawn->is_open_water());
    CHECK(lawn->source == "TR-55 table 3-1");
    CHECK_FALSE(lawn->from_memory);
}

TEST_CASE("a code the book does not have finds no class") {
    CHECK(book("7,Lawn,,0.24,,short-grass pasture,,own\n").find(8) == nullptr);
}

TEST_CASE("low and high roughness are the typical one where they are not given") {
    const CoverBook town = book("7,Lawn,,0.24,,short-grass pasture,,own\n");
    CHECK(town.find(7)->n_low == 0.24);
    CHECK(town.find(7)->n_high == 0.24);
}

TEST_CASE("a water depth makes a class open water") {
    const CoverBook town = book("1,Pond,,,,,1.5,own\n");
    CHECK(town.find(1)->is_open_water());
    CHECK(town.find(1)->water_depth == metres(1.5));
    const CoverBook in_feet =
        parse_cover_book("code,name,n_typical,water_depth_ft,source\n1,Pond,,5,own\n", "town.csv");
    CHECK(in_feet.find(1)->water_depth == feet(5));
}

TEST_CASE("pavement is paved, and a row may say otherwise") {
    CHECK(book("2,Street,,0.011,,pavement,,own\n").find(2)->paved);
    const std::string with_paved = "code,name,n_typical,shallow_type,paved,source\n";
    CHECK_FALSE(parse_cover_book(with_paved + "2,Gully,0.05,pavement,no,own\n", "town.csv").find(2)->paved);
    CHECK_THROWS_WITH(parse_cover_book(with_paved + "2,Gully,0.05,pavement,maybe,own\n", "town.csv"),
                      Contains("town.csv, line 2, column 5 (paved) is \"maybe\"; write yes or no"));
}

TEST_CASE("a velocity at slope one may stand in place of a type, in either unit") {
    const CoverBook si =
        parse_cover_book("code,name,n_typical,shallow_k_m_s,source\n3,Gravel,0.02,4.5,own\n", "town.csv");
    CHECK(si.find(3)->shallow_k == metres_per_second(4.5));
    CHECK(si.find(3)->shallow_type == "stated");
    const CoverBook us =
        parse_cover_book("code,name,n_typical,shallow_k_ft_s,source\n3,Gravel,0.02,15,own\n", "town.csv");
    CHECK(us.find(3)->shallow_k == feet_per_second(15));
}

TEST_CASE("n and radius of shallow flow may stand in place of a type, in either unit") {
    const std::string columns = "code,name,n_typical,shallow_n,shallow_radius_ft,shallow_radius_m,shallow_type,source\n";
    const CoverBook town = parse_cover_book(columns + "3,Swale,0.2,0.05,0.4,,,own\n", "town.csv");
    CHECK(in_feet(metres(town.find(3)->shallow_k.si())) == Approx(1.49 / 0.05 * std::pow(0.4, 2.0 / 3)));
    CHECK(town.find(3)->shallow_type == "conveyance");
    CHECK(parse_cover_book(columns + "3,Swale,0.2,0.05,,0.12192,,own\n", "town.csv").find(3)->shallow_k.si() ==
          Approx(town.find(3)->shallow_k.si()));
    for (const auto& [row, says] : {std::pair("3,S,0.2,0.05,,,,own", "without shallow_radius"), std::pair("3,S,0.2,,0.4,,,own", "a radius is given"),
                                    std::pair("3,S,0.2,0.05,0.4,0.1,,own", "shallow_radius_m is given too"),
                                    std::pair("3,S,0.2,0.05,0.4,,pavement,own", "n and radius of shallow flow are given too"),
                                    std::pair("3,S,0.2,5,0.4,,,own", "between 0 and 2"), std::pair("3,S,0.2,0,0.4,,,own", "(shallow_n)")})
        CHECK_THROWS_WITH(parse_cover_book(columns + row + "\n", "town.csv"), Contains("town.csv, line 2") && Contains(says));
}

TEST_CASE("a class's line on a chart has its name unless the book gives another") {
    const CoverBook town = parse_cover_book("code,name,n_typical,shallow_type,chart_line,source\n3,Lawn,0.2,pavement,turf,own\n4,Yard,0.2,pavement,,own\n", "town.csv");
    CHECK(town.find(3)->chart_line == "turf");
    CHECK(town.find(4)->chart_line == "Yard");
}

TEST_CASE("classes come in the order of their codes") {
    const CoverBook town = book("9,B,,0.1,,pavement,,own\n2,A,,0.1,,pavement,,own\n");
    CHECK(town.classes()[0].code == 2);
    CHECK(town.classes()[1].code == 9);
}

TEST_CASE("a roughness that is not above zero is refused with line and column") {
    for (const auto* wrong : {"-0.1", "0", "nan", "inf", "rough", "1e400"})
        CHECK_THROWS_WITH(book("\n7,Lawn,," + std::string(wrong) + ",,pavement,,own\n"),
                          Contains("town.csv, line 3, column 4 (n_typical) is \"" + std::string(wrong) + "\""));
    CHECK_THROWS_WITH(book("7,Lawn,,,,pavement,,own\n"), Contains("line 2, column 4 (n_typical) is empty"));
    CHECK_THROWS_WITH(book("7,Lawn,,24,,pavement,,own\n"), Contains("between 0 and 2"));
}

TEST_CASE("low, typical and high roughness must ascend") {
    CHECK_THROWS_WITH(book("7,Lawn,0.3,0.24,0.41,pavement,,own\n"),
                      Contains("column 3 (n_low) is 0.3, above n_typical 0.24"));
    CHECK_THROWS_WITH(book("7,Lawn,0.2,0.24,0.21,pavement,,own\n"),
                      Contains("column 5 (n_high) is 0.21, below n_typical 0.24"));
}

TEST_CASE("a depth of water that is not above zero is refused") {
    for (const auto* wrong : {"-1", "0", "nan"})
        CHECK_THROWS_WITH(book("1,Pond,,,,," + std::string(wrong) + ",own\n"), Contains("column 7 (water_depth_m)"));
}

TEST_CASE("open water with a roughness is a contradiction") {
    CHECK_THROWS_WITH(book("1,Pond,,0.03,,,2,own\n"),
                      Contains("column 4 (n_typical) is given, but a water depth makes the class open water"));
}

TEST_CASE("two velocities for one class are a contradiction") {
    CHECK_THROWS_WITH(
        parse_cover_book("code,name,n_typical,shallow_type,shallow_k_m_s,source\n3,G,0.02,pavement,4.5,own\n",
                         "town.csv"),
        Contains("(shallow_type) is given, but the velocity"));
    CHECK_THROWS_WITH(
        parse_cover_book("code,name,n_typical,shallow_k_m_s,shallow_k_ft_s,source\n3,G,0.02,4,13,own\n", "town.csv"),
        Contains("(shallow_k_ft_s) is given, but shallow_k_m_s is given too"));
}

TEST_CASE("a code given twice is refused with both lines") {
    CHECK_THROWS_WITH(book("7,A,,0.1,,pavement,,own\n7,B,,0.1,,pavement,,own\n"),
                      Contains("line 3, column 1 (code) is 7, which line 2 has"));
}

TEST_CASE("a code that is no whole number is refused") {
    for (const auto* wrong : {"7.5", "seven", "9999999999", ""})
        CHECK_THROWS_WITH(book(std::string(wrong) + ",A,,0.1,,pavement,,own\n"), Contains("column 1 (code)"));
}

TEST_CASE("an unknown type of ground is refused with the nearest") {
    CHECK_THROWS_WITH(book("7,A,,0.1,,pavemnet,,own\n"),
                      Contains("(shallow_type) is \"pavemnet\"") && Contains("did you mean pavement?"));
    CHECK_THROWS_WITH(book("7,A,,0.1,,,,own\n"), Contains("(shallow_type) is empty"));
}

TEST_CASE("a book must have its columns, each once, and no others") {
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical\n", "town.csv"), Contains("has no column source"));
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typicl,source\n", "town.csv"),
                      Contains("column 3") && Contains("did you mean n_typical?"));
    CHECK_THROWS_WITH(parse_cover_book("code,code,name,n_typical,source\n", "town.csv"), Contains("is there twice"));
    CHECK_THROWS_WITH(book(""), Contains("has no class"));
}

TEST_CASE("every class needs a name and a source") {
    CHECK_THROWS_WITH(book("7,,,0.1,,pavement,,own\n"), Contains("column 2 (name) is empty"));
    CHECK_THROWS_WITH(book("7,A,,0.1,,pavement,,\n"), Contains("column 8 (source) is empty"));
}

TEST_CASE("nlcd has the twenty classes of its legend, each with a source and marked as to check") {
    const CoverBook nlcd = built_in_book("nlcd");
    CHECK(nlcd.name() == "nlcd");
    CHECK(nlcd.classes().size() == 20);
    for (const int code : {11, 12, 21, 22, 23, 24, 31, 41, 42, 43, 51, 52, 71, 72, 73, 74, 81, 82, 90, 95})
        CHECK(nlcd.find(code) != nullptr);
    for (const CoverClass& cover : nlcd.classes()) {
        CHECK_FALSE(cover.source.empty());
        CHECK(cover.from_memory);
    }
}

TEST_CASE("nlcd takes published values where there are any") {
    const CoverBook nlcd = built_in_book("nlcd");
    CHECK(nlcd.find(41)->n_typical == 0.36);
    CHECK(nlcd.find(82)->n_typical == 0.06);
    CHECK(nlcd.find(82)->n_high == 0.17);
    CHECK(nlcd.find(24)->paved);
    CHECK_FALSE(nlcd.find(21)->paved);
    CHECK(nlcd.find(11)->water_depth == metres(2));
}

TEST_CASE("curve numbers by soil group and a runoff coefficient may stand in a book, for open water too") {
    const CoverBook town = parse_cover_book(
        "code,name,n_typical,shallow_type,water_depth_m,cn_a,cn_b,cn_c,cn_d,c,source\n"
        "1,Lawn,0.24,short-grass pasture,,39,61,,80,0.15,own\n2,Pond,,,1,,100,100,100,0,own\n",
        "town.csv");
    CHECK(town.find(1)->curve_number(SoilGroup::b) == 61);
    CHECK_FALSE(town.find(1)->curve_number(SoilGroup::c));
    CHECK(town.find(1)->runoff_coefficient == 0.15);
    CHECK(town.find(2)->curve_number(SoilGroup::d) == 100);
    CHECK(town.find(2)->runoff_coefficient == 0);
}

TEST_CASE("curve numbers and runoff coefficients out of their range or order are refused with line and column") {
    const auto with = [](const std::string& numbers) {
        return parse_cover_book(
            "code,name,n_typical,shallow_type,cn_a,cn_b,c,source\n1,Lawn,0.24,short-grass pasture," + numbers +
                ",own\n",
            "town.csv");
    };
    for (const auto* wrong : {"0", "-5", "nan", "101"})
        CHECK_THROWS_WITH(with(std::string(wrong) + ",,"), Contains("town.csv, line 2, column 5 (cn_a) is"));
    CHECK_THROWS_WITH(with("61,39,"), Contains("column 6 (cn_b) is 39, below that of a soil group before it, 61"));
    for (const auto* wrong : {"-0.1", "nan", "1.1"})
        CHECK_THROWS_WITH(with(",," + std::string(wrong)), Contains("town.csv, line 2, column 7 (c) is"));
}

TEST_CASE("nlcd has curve numbers where TR-55 has a cover that matches") {
    const CoverBook nlcd = built_in_book("nlcd");
    CHECK(nlcd.find(41)->curve_numbers == std::array<std::optional<double>, 4>{30, 55, 70, 77});
    CHECK(nlcd.find(24)->curve_number(SoilGroup::a) == 89);
    CHECK_FALSE(nlcd.find(95)->curve_number(SoilGroup::a));
    CHECK_FALSE(nlcd.find(41)->runoff_coefficient);
}

TEST_CASE("a book that is not built in is refused, and its name is taken for a file") {
    CHECK(is_built_in_book("nlcd"));
    CHECK_FALSE(is_built_in_book("nlcd.csv"));
    CHECK_THROWS_WITH(built_in_book("nlcb"), Contains("did you mean nlcd?"));
}

TEST_CASE("runoff coefficients by soil group rise from A to D and lie between 0 and 1") {
    const std::string begin = "code,name,n_typical,shallow_type,source,c,c_a,c_b,c_c,c_d\n1,Lawn,0.2,pavement,here,";
    const CoverBook town = parse_cover_book(begin + "0.25,0.1,,0.2,0.3", "town.csv");
    const CoverClass& lawn = *town.find(1);
    CHECK(lawn.coefficient(SoilGroup::a) == 0.1);
    CHECK(lawn.coefficient(SoilGroup::b) == 0.25);
    CHECK(lawn.coefficient(std::nullopt) == 0.25);
    CHECK_THROWS_WITH(parse_cover_book(begin + ",0.3,0.2,,", "town.csv"),
                      Contains("town.csv, line 2, column 8 (c_b) is 0.2, below that of a soil group before it, 0.3"));
    CHECK_THROWS_WITH(parse_cover_book(begin + ",,,,1.1", "town.csv"), Contains("(c_d) is 1.1; a runoff coefficient"));
}

TEST_CASE("numbers for the lump methods keep to their ranges") {
    const std::string begin =
        "code,name,n_typical,shallow_type,source,kerby_n,izzard_c,impervious_percent,county_k\n1,Lawn,0.2,pavement,here,";
    const CoverBook town = parse_cover_book(begin + "0.4,0.046,35,0.53", "town.csv");
    CHECK(town.find(1)->kerby_n == 0.4);
    CHECK(town.find(1)->izzard_c == 0.046);
    CHECK(town.find(1)->impervious == 0.35);
    CHECK(town.find(1)->county_k == 0.53);
    CHECK_THROWS_WITH(parse_cover_book(begin + "1.4,,,", "town.csv"), Contains("column 6 (kerby_n) is 1.4; it is at most 1"));
    CHECK_THROWS_WITH(parse_cover_book(begin + ",0,,", "town.csv"), Contains("column 7 (izzard_c)"));
    CHECK_THROWS_WITH(parse_cover_book(begin + ",,101,", "town.csv"), Contains("(impervious_percent) is 101; a share lies between 0 and 100 %"));
}

TEST_CASE("an impervious share without its unit is refused, with the right form") {
    CHECK_THROWS_WITH(parse_cover_book("code,name,n_typical,shallow_type,source,impervious\n1,Lawn,0.2,pavement,here,0.35\n", "town.csv"),
                      Contains("town.csv, header, column 6: \"impervious\" does not say its unit; name it impervious_percent, and write 35"));
}

TEST_CASE("the book worldcover has the eleven classes of its legend, and says that its hydraulics are ours") {
    const CoverBook book = built_in_book("worldcover");
    std::vector<int> codes;
    for (const CoverClass& cover : book.classes()) {
        codes.push_back(cover.code);
        CHECK_THAT(cover.source, Contains("ours"));
        CHECK(cover.from_memory);
    }
    CHECK(codes == std::vector<int>{10, 20, 30, 40, 50, 60, 70, 80, 90, 95, 100});
    CHECK(book.find(80)->is_open_water());
    CHECK(book.find(100)->name == "Moss and lichen");
}

}  // namespace
}  // namespace rillclock
