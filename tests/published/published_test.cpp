// Reads one table of published numbers and holds the program's pure functions against each.
//
// A line is `tolerance | formula | inputs | expected | source and mark`; the first that is not a comment is the
// heading. A tolerance is absolute in the answer's unit, or relative where it ends in %.

#include <cmath>
#include <cstdio>
#include <fstream>
#include <iostream>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

#include "published_formulas.hpp"

namespace {

using namespace rillclock;

const Formulas& formulas() {
    static const Formulas all = [] {
        Formulas joined = flow_formulas();
        joined.merge(lump_formulas());
        joined.merge(rain_formulas());
        joined.merge(surface_formulas());
        return joined;
    }();
    return all;
}

std::vector<std::string> fields_of(const std::string& line) {
    std::vector<std::string> fields;
    std::istringstream text(line);
    for (std::string field; std::getline(text, field, '|');) {
        const auto first = field.find_first_not_of(' ');
        fields.push_back(first == std::string::npos ? ""
                                                    : field.substr(first, field.find_last_not_of(' ') - first + 1));
    }
    if (fields.size() != 5) throw std::runtime_error("a line has not five fields: " + line);
    return fields;
}

bool holds(const std::vector<std::string>& fields) {
    const double expected = std::stod(fields[3]);
    const bool relative = fields[0].back() == '%';
    const double tolerance = std::stod(fields[0]) * (relative ? std::fabs(expected) / 100 : 1.0);
    const double computed = formulas().at(fields[1])(Inputs(fields[2]));
    // Quantities are kept in SI, so an exact print comes back within a rounding of two conversions.
    const bool good = std::fabs(computed - expected) <= tolerance + 1e-14 * std::fabs(expected);
    std::printf("%s  %-26s computed %.6g, printed %s within %s  (%s)\n", good ? "holds" : "FAILS", fields[1].c_str(),
                computed, fields[3].c_str(), fields[0].c_str(), fields[4].c_str());
    return good && !fields[4].empty();
}

/// How many numbers of the table hold and how many do not.
std::pair<int, int> tally(std::istream& table) {
    std::pair<int, int> count{0, 0};
    bool past_heading = false;
    for (std::string line; std::getline(table, line);) {
        if (line.empty() || line.front() == '#') continue;
        if (past_heading) ++(holds(fields_of(line)) ? count.first : count.second);
        past_heading = true;
    }
    return count;
}

}  // namespace

int main(int argc, char** argv) {
    if (argc != 2) return 2;
    std::ifstream table(argv[1]);
    if (!table) return 3;
    try {
        const auto [held, failed] = tally(table);
        std::printf("%d hold, %d fail\n", held, failed);
        return held + failed > 0 && failed == 0 ? 0 : 1;
    } catch (const std::exception& error) {
        std::cerr << argv[1] << ": " << error.what() << '\n';
        return 3;
    }
}
