#include "chart.hpp"

#include <catch2/catch.hpp>
#include <regex>

#include "chart_drawing.hpp"

using namespace rillclock;

namespace {

std::size_t count_of(const std::string& text, const std::string& part) {
    std::size_t count = 0;
    for (std::size_t at = text.find(part); at != std::string::npos; at = text.find(part, at + 1)) ++count;
    return count;
}

/// All values of an attribute.
std::vector<double> numbers(const std::string& svg, const std::string& attribute) {
    std::vector<double> found;
    const std::regex pattern(" " + attribute + "=\"(-?[0-9.]+)\"");
    for (std::sregex_iterator match(svg.begin(), svg.end(), pattern), end; match != end; ++match) found.push_back(std::stod((*match)[1]));
    return found;
}

double high_of(const std::string& svg) {
    std::smatch match;
    REQUIRE(std::regex_search(svg, match, std::regex("viewBox=\"0 0 640.0 ([0-9.]+)\"")));
    return std::stod(match[1]);
}

/// Everything drawn stands within the picture.
void check_within(const std::string& svg) {
    for (const char* attribute : {"x", "x1", "x2", "cx"}) {
        for (const double x : numbers(svg, attribute)) CHECK((x >= 0 && x <= chart_width));
    }
    for (const char* attribute : {"y", "y1", "y2", "cy"}) {
        for (const double y : numbers(svg, attribute)) CHECK((y >= 0 && y <= high_of(svg)));
    }
}

const std::string evil = "</svg><script>\"'&";

}  // namespace

TEST_CASE("steps between round numbers are 1, 2 or 5 times a power of ten, and no more than wanted fit") {
    CHECK(round_step(100, 5) == 20);
    CHECK(round_step(77.6, 6) == 20);
    CHECK(round_step(9, 10) == 1);
    CHECK(round_step(0.004, 5) == Approx(0.001));
    CHECK(round_step(0, 5) == 1);
    for (double span = 0.0013; span < 1e6; span *= 1.37) CHECK(span / round_step(span, 6) <= 6);
}

TEST_CASE("texts are cut by letters and not by bytes, and the cut is told") {
    CHECK(shortened("Weir", 4) == "Weir");
    CHECK(shortened("Mill bridge", 6) == "Mill …");
    CHECK(shortened("Mühlenbrücke", 12) == "Mühlenbrücke");
    CHECK(shortened("Mühlenbrücke", 4) == "Müh…");
    CHECK(shortened("", 4).empty());
}

TEST_CASE("a line chart has its finding as alternative text, round numbers on both axes, and stays within its picture") {
    const std::string svg = line_chart("It falls 3 m.", {.x_title = "distance, m", .y_title = "elevation, m", .x_greatest = 1000, .y_least = 97, .y_greatest = 100},
                                       {{.kind = "ground", .points = {{0, 100}, {400, 98}, {1000, 97}}}},
                                       {{{0, 300, "#e69f00", "sheet"}, {300, 1000, "#0072b2", "channel"}}, {{0, 1000, "", "Meadow"}}});
    CHECK(svg.find("role=\"img\" aria-label=\"It falls 3 m.\"") != std::string::npos);
    for (const char* text : {">200<", ">1000<", ">97<", ">100<", ">distance, m<", ">elevation, m<", ">Meadow<", "<title>channel</title>"}) {
        INFO(text);
        CHECK(svg.find(text) != std::string::npos);
    }
    check_within(svg);
}

TEST_CASE("a line chart without any span is drawn all the same") {
    const std::string svg = line_chart("One place.", {.x_title = "m", .y_title = "m", .x_greatest = 0, .y_least = 5, .y_greatest = 5}, {{.kind = "ground", .points = {{0, 5}}}});
    CHECK(svg.find("nan") == std::string::npos);
    CHECK(svg.find("inf") == std::string::npos);
    check_within(svg);
}

TEST_CASE("panels lie one below the other over the same times, and marks go through all of them") {
    const std::string svg = panel_chart("The peak is 4.", "time, min", {{.title = "arrived, ha", .points = {{0, 0}, {10, 5}, {20, 8}}}, {.title = "flow", .points = {{5, 2}, {10, 4}, {20, 3}}}},
                                        {{10, "makes the peak: 10 min"}, {20, "all has arrived: 20 min"}});
    CHECK(count_of(svg, "<polyline") == 2);
    CHECK(count_of(svg, "class=\"mark\"") == 2);
    CHECK(count_of(svg, "class=\"curve-dot\"") == 6);
    CHECK(svg.find("makes the peak: 10 min") != std::string::npos);
    check_within(svg);
}

TEST_CASE("bars are as long as their values, whatever their order") {
    const std::string svg = row_chart("Two.", {.title = "min", .mark = 7.5}, {{.label = "a", .note = "10", .parts = {{0, 10, "bar"}}}, {.label = "b", .note = "5", .parts = {{0, 5, "bar", 0}, {5, 0, "open", 1}}}});
    const std::vector<double> wide = numbers(svg, "width");
    REQUIRE(wide.size() == 3);
    CHECK(wide[0] == Approx(2 * wide[1]).margin(0.2));
    CHECK(wide[1] == Approx(wide[2]).margin(0.2));
    CHECK(count_of(svg, "class=\"mark\"") == 1);
    check_within(svg);
}

TEST_CASE("a scale of ranges may begin below the least of them, at a round number") {
    const std::string svg = row_chart("A range.", {.title = "min", .mark = 77.6, .begins_at_zero = false},
                                      {{.label = "a", .parts = {{53, 115, "reach"}, {0, 78, "tick"}}}, {.label = "b", .parts = {{67, 92, "open"}}}});
    CHECK(svg.find(">40<") != std::string::npos);
    CHECK(svg.find(">20<") == std::string::npos);
    check_within(svg);
}

TEST_CASE("keys show what they name") {
    const std::string html = chart_keys({{"bar", evil}, {"mark", "median"}});
    CHECK(count_of(html, "class=\"bar\"") == 1);
    CHECK(count_of(html, "class=\"mark\"") == 1);
    CHECK(count_of(html, "<script") == 0);
}

TEST_CASE("rows without any value, and no rows at all, are drawn") {
    check_within(row_chart("None.", {.title = "min"}, {{.label = "a", .note = "no peak"}}));
    check_within(row_chart("None.", {.title = "min", .begins_at_zero = false}, {}));
}

TEST_CASE("no label, note, title or finding becomes markup") {
    for (const std::string& svg : {line_chart(evil, {.x_title = evil, .y_title = evil}, {}, {{{0, 1, "", evil}}}), panel_chart(evil, evil, {{.title = evil, .points = {{1, 1}}}}, {{1, evil}}),
                                   row_chart(evil, {.title = evil}, {{.label = evil, .note = evil, .parts = {{0, 1, "bar"}}}})}) {
        CHECK(count_of(svg, "</svg>") == 1);
        CHECK(count_of(svg, "<script") == 0);
    }
}
