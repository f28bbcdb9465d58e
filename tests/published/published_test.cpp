// Reads one table of published numbers and holds the program's pure functions against each.
//
// A line is `tolerance | formula | inputs | expected | source and mark`; the first that is not a comment is the
// heading. A tolerance is absolute in the answer's unit, or relative where it ends in %.

#include <cmath>
#include <cstdio>
#include <fstream>
#include <functional>
#include <iostream>
#include <map>
#include <sstream>
#include <stdexcept>
#include <string>
#include <vector>

#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"

namespace {

using namespace rillclock;

/// The inputs of a line, by name.
class Inputs {
public:
    explicit Inputs(const std::string& text) {
        std::istringstream words(text);
        for (std::string word; words >> word;) {
            const auto equals = word.find('=');
            values_[word.substr(0, equals)] = std::stod(word.substr(equals + 1));
        }
    }
    double operator[](const std::string& name) const { return values_.at(name); }

private:
    std::map<std::string, double> values_;
};

double tr55_k(const Inputs& in) {
    return in_feet_per_second(in["paved"] > 0 ? tr55_paved_k : tr55_unpaved_k);
}

const ShallowType& neh_type(const Inputs& in) {
    return shallow_types()[static_cast<std::size_t>(in["type"]) - 1];
}

double tr55_velocity(const Inputs& in) {
    return in_feet_per_second(shallow_velocity(feet_per_second(tr55_k(in)), in["S"]));
}

Length radius(const Inputs& in) {
    return hydraulic_radius(square_feet(in["area_ft2"]), feet(in["perimeter_ft"]));
}

double manning_us(const Inputs& in) {
    const ManningReach reach{.n = in["n"], .hydraulic_radius = radius(in), .slope = in["S"]};
    return in_feet_per_second(manning_velocity_us(reach, in["factor"]));
}

double manning_si_hours(const Inputs& in) {
    return in_hours(manning_time(feet(in["L_ft"]), {.n = in["n"], .hydraulic_radius = radius(in), .slope = in["S"]}));
}

double k_of_depth(const Inputs& in) {
    const ManningReach reach{.n = in["n"], .hydraulic_radius = feet(in["depth_ft"]), .slope = 1.0};
    return in_feet_per_second(manning_velocity_us(reach, in["factor"]));
}

double sheet_hours(const Inputs& in) {
    return in_hours(nrcs_sheet_time({.n = in["n"], .length = feet(in["L_ft"]), .slope = in["S"]}, inches(in["P2_in"])));
}

double sheet_hours_metric(const Inputs& in) {
    const SheetStretch stretch{.n = in["n"], .length = metres(in["L_m"]), .slope = in["S"]};
    return in_hours(nrcs_sheet_formula().at_unit_storm(sheet_index(stretch))) *
           nrcs_storm_factor(millimetres(in["P2_mm"]));
}

double three_segments_hours(const Inputs& in) {
    const SheetStretch sheet{.n = in["n"], .length = feet(in["L_sheet_ft"]), .slope = in["S"]};
    const Duration shallow = feet(in["L_shallow_ft"]) / shallow_velocity(tr55_unpaved_k, in["S"]);
    const ManningReach channel{.n = in["n_channel"], .hydraulic_radius = radius(in), .slope = in["S_channel"]};
    return in_hours(nrcs_sheet_time(sheet, inches(in["P2_in"])) + shallow + manning_time(feet(in["L_ft"]), channel));
}

const std::map<std::string, std::function<double(const Inputs&)>> formulas{
    {"mccuen_spiess_length_ft", [](const Inputs& in) { return in_feet(mccuen_spiess_length(in["n"], in["S"])); }},
    {"nrcs_sheet_h", sheet_hours},
    {"nrcs_sheet_h_per_unit_mm", sheet_hours_metric},
    {"neh_k_ft_s", [](const Inputs& in) { return neh_type(in).k_ft_per_s; }},
    {"neh_velocity_ft_s",
     [](const Inputs& in) { return in_feet_per_second(shallow_velocity(neh_type(in).k(), in["S"])); }},
    {"k_ft_s_of_depth", k_of_depth},
    {"tr55_k_ft_s", tr55_k},
    {"tr55_velocity_ft_s", tr55_velocity},
    {"tr55_shallow_h", [](const Inputs& in) { return in["L_ft"] / tr55_velocity(in) / 3600; }},
    {"hydraulic_radius_ft", [](const Inputs& in) { return in_feet(radius(in)); }},
    {"manning_ft_s", manning_us},
    {"manning_h", [](const Inputs& in) { return in["L_ft"] / manning_us(in) / 3600; }},
    {"manning_si_h", manning_si_hours},
    {"three_segments_h", three_segments_hours},
};

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
    const double computed = formulas.at(fields[1])(Inputs(fields[2]));
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
