#include <algorithm>
#include <array>
#include <charconv>
#include <map>

#include "rillclock/core/csv_text.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/hydraulics/manning.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/surface/cover_book.hpp"
#include "rillclock/surface/printed_coefficients.hpp"

namespace rillclock {
namespace {

constexpr std::array<std::string_view, 31> known_columns{
    "code",          "name",           "n_low", "n_typical",     "n_high",         "shallow_type",
    "shallow_k_m_s", "shallow_k_ft_s", "paved", "water_depth_m", "water_depth_ft", "source",
    "from_memory",   "cn_a",           "cn_b",  "cn_c",          "cn_d",           "c",
    "c_a",           "c_b",            "c_c",   "c_d",           "shallow_n",      "shallow_radius_m",
    "shallow_radius_ft", "chart_line", "land_use", "impervious_percent", "kerby_n", "izzard_c", "county_k"};
constexpr std::array<std::string_view, 4> curve_number_columns{"cn_a", "cn_b", "cn_c", "cn_d"};
constexpr std::array<std::string_view, 4> coefficient_columns{"c_a", "c_b", "c_c", "c_d"};
constexpr std::array<std::string_view, 4> needed_columns{"code", "name", "n_typical", "source"};

/// One row of a book, asked for by column name; knows where it stands for the sake of errors.
class BookRow {
public:
    BookRow(const CsvTable& table, const CsvRow& row, std::string_view file) : table_(table), row_(row), file_(file) {}

    /// The field's text; empty where the book lacks the column.
    [[nodiscard]] std::string text(std::string_view column) const {
        const auto place = table_.column(column);
        return place ? row_.fields[*place] : std::string();
    }

    [[nodiscard]] std::string needed_text(std::string_view column) const {
        std::string field = text(column);
        if (field.empty()) throw fault(column, "is empty; every class needs one");
        return field;
    }

    [[nodiscard]] std::optional<double> number(std::string_view column, Sign sign = Sign::positive) const {
        const std::string field = text(column);
        if (field.empty()) return std::nullopt;
        return number_from_text(field, {.subject = place(column), .example = "0.15", .sign = sign});
    }

    [[nodiscard]] int code() const {
        const std::string field = needed_text("code");
        int code = 0;
        const auto [end, error] = std::from_chars(field.data(), field.data() + field.size(), code);
        if (error != std::errc() || end != field.data() + field.size())
            throw fault("code", "is \"" + field + "\"; write the whole number the cover raster holds, such as 42");
        return code;
    }

    [[nodiscard]] bool yes(std::string_view column, bool otherwise) const {
        const std::string field = text(column);
        if (field.empty()) return otherwise;
        if (field != "yes" && field != "no") throw fault(column, "is \"" + field + "\"; write yes or no");
        return field == "yes";
    }

    void require_empty(std::string_view column, const std::string& because) const {
        if (!text(column).empty()) throw fault(column, "is given, but " + because + "; leave it empty");
    }

    [[nodiscard]] Error fault(std::string_view column, const std::string& what) const {
        return input_error(place(column) + " " + what);
    }

private:
    /// "town.csv, line 4, column 3 (n_low)".
    [[nodiscard]] std::string place(std::string_view column) const {
        const auto index = table_.column(column);
        const std::string number = index ? ", column " + std::to_string(*index + 1) : std::string();
        return std::string(file_) + ", line " + std::to_string(row_.line) + number + " (" + std::string(column) + ")";
    }

    const CsvTable& table_;
    const CsvRow& row_;
    std::string_view file_;
};

std::optional<Length> water_depth(const BookRow& row) {
    const auto in_metres_column = row.number("water_depth_m");
    if (in_metres_column) row.require_empty("water_depth_ft", "water_depth_m is given too");
    if (in_metres_column) return metres(*in_metres_column);
    const auto in_feet_column = row.number("water_depth_ft");
    if (in_feet_column) return feet(*in_feet_column);
    return std::nullopt;
}

void read_roughness(const BookRow& row, CoverClass& cover) {
    const auto typical = row.number("n_typical");
    if (!typical)
        throw row.fault("n_typical",
                        "is empty; every class but open water needs a roughness for sheet flow, such as 0.15");
    if (!(*typical <= 2))
        throw row.fault("n_typical", "is " + significant(*typical) + "; a roughness lies between 0 and 2");
    cover.n_typical = *typical;
    cover.n_low = row.number("n_low").value_or(*typical);
    cover.n_high = row.number("n_high").value_or(*typical);
    if (!(cover.n_low <= cover.n_typical))
        throw row.fault("n_low", "is " + significant(cover.n_low) + ", above n_typical " +
                                     significant(cover.n_typical) + "; write low, typical, high in ascending order");
    if (!(cover.n_high >= cover.n_typical))
        throw row.fault("n_high", "is " + significant(cover.n_high) + ", below n_typical " +
                                      significant(cover.n_typical) + "; write low, typical, high in ascending order");
}

std::optional<Speed> stated_k(const BookRow& row) {
    const auto si = row.number("shallow_k_m_s");
    if (si) row.require_empty("shallow_k_ft_s", "shallow_k_m_s is given too");
    if (si) return metres_per_second(*si);
    const auto us = row.number("shallow_k_ft_s");
    if (us) return feet_per_second(*us);
    return std::nullopt;
}

Error unknown_type(const BookRow& row, const std::string& name) {
    std::vector<std::string_view> names;
    std::string list;
    for (const ShallowType& type : shallow_types()) {
        names.push_back(type.name);
        list += (list.empty() ? "" : ", ") + std::string(type.name);
    }
    return row.fault("shallow_type", "is \"" + name + "\"; write one of: " + list + did_you_mean(name, names));
}

std::optional<Length> shallow_radius(const BookRow& row) {
    const auto si = row.number("shallow_radius_m");
    if (si) row.require_empty("shallow_radius_ft", "shallow_radius_m is given too");
    if (si) return metres(*si);
    const auto us = row.number("shallow_radius_ft");
    if (us) return feet(*us);
    return std::nullopt;
}

/// n and R together, and neither a type nor k beside them.
std::optional<ShallowConveyance> conveyance(const BookRow& row) {
    const auto n = row.number("shallow_n");
    const auto radius = shallow_radius(row);
    if (!n && !radius) return std::nullopt;
    if (!n) throw row.fault("shallow_n", "is empty, but a radius is given; conveyance needs n and radius");
    if (!radius) throw row.fault("shallow_n", "is given without shallow_radius_m or shallow_radius_ft; conveyance needs n and radius");
    if (!(*n <= 2)) throw row.fault("shallow_n", "is " + significant(*n) + "; a roughness lies between 0 and 2");
    for (const auto column : {"shallow_type", "shallow_k_m_s", "shallow_k_ft_s"})
        row.require_empty(column, "n and radius of shallow flow are given too");
    return ShallowConveyance{.n = *n, .hydraulic_radius = *radius};
}

void read_shallow(const BookRow& row, CoverClass& cover) {
    cover.chart_line = row.text("chart_line").empty() ? cover.name : row.text("chart_line");
    cover.conveyance = conveyance(row);
    if (cover.conveyance) {
        cover.shallow_k = shallow_conveyance(cover.conveyance->n, cover.conveyance->hydraulic_radius, manning_factor_us_rounded);
        cover.shallow_type = "conveyance";
        return;
    }
    const std::string name = row.text("shallow_type");
    const auto k = stated_k(row);
    if (k) {
        row.require_empty("shallow_type", "the velocity at slope 1 is given too");
        cover.shallow_k = *k;
        cover.shallow_type = "stated";
        return;
    }
    if (name.empty())
        throw row.fault("shallow_type",
                        "is empty; every class but open water needs a type, such as short-grass pasture, or a "
                        "velocity at slope 1 in shallow_k_m_s or shallow_k_ft_s, or shallow_n and a radius");
    const ShallowType* type = find_shallow_type(name);
    if (type == nullptr) throw unknown_type(row, name);
    cover.shallow_k = type->k();
    cover.shallow_type = name;
}

void read_curve_numbers(const BookRow& row, CoverClass& cover) {
    double last = 0.0;
    for (std::size_t group = 0; group < curve_number_columns.size(); ++group) {
        const std::string_view column = curve_number_columns[group];
        const auto number = row.number(column);
        if (!number) continue;
        if (!(*number <= 100))
            throw row.fault(column, "is " + significant(*number) + "; a curve number is at most 100");
        if (*number < last)
            throw row.fault(column, "is " + significant(*number) + ", below that of a soil group before it, " +
                                        significant(last) + "; curve numbers rise from A to D");
        cover.curve_numbers[group] = last = *number;
    }
}

std::optional<double> runoff_coefficient(const BookRow& row, std::string_view column) {
    const auto number = row.number(column, Sign::not_negative);
    if (number && !(*number <= 1))
        throw row.fault(column, "is " + significant(*number) + "; a runoff coefficient lies between 0 and 1");
    return number;
}

void read_runoff_coefficients(const BookRow& row, CoverClass& cover) {
    cover.runoff_coefficient = runoff_coefficient(row, "c");
    double last = 0.0;
    for (std::size_t group = 0; group < coefficient_columns.size(); ++group) {
        const std::string_view column = coefficient_columns[group];
        const auto number = runoff_coefficient(row, column);
        if (!number) continue;
        if (*number < last)
            throw row.fault(column, "is " + significant(*number) + ", below that of a soil group before it, " +
                                        significant(last) + "; runoff coefficients rise from A to D");
        cover.runoff_coefficients[group] = last = *number;
    }
}

void read_land_use(const BookRow& row, CoverClass& cover) {
    cover.land_use = row.text("land_use");
    if (cover.land_use.empty() || printed_range(cover.land_use)) return;
    throw row.fault("land_use", "is \"" + cover.land_use + "\"; write a land use as `rillclock methods` prints it, such as pasture or asce roofs" +
                                    did_you_mean_any(cover.land_use, land_use_names()));
}

void read_impervious(const BookRow& row, CoverClass& cover) {
    const auto percent = row.number("impervious_percent", Sign::not_negative);
    if (percent && !(*percent <= 100))
        throw row.fault("impervious_percent", "is " + significant(*percent) + "; a share lies between 0 and 100 %");
    if (percent) cover.impervious = *percent / 100.0;
}

/// A number above 0 and at most `greatest`.
std::optional<double> bounded(const BookRow& row, std::string_view column, double greatest) {
    const auto number = row.number(column);
    if (number && !(*number <= greatest))
        throw row.fault(column, "is " + significant(*number) + "; it is at most " + significant(greatest));
    return number;
}

void read_lump_numbers(const BookRow& row, CoverClass& cover) {
    cover.kerby_n = bounded(row, "kerby_n", 1);
    cover.izzard_c = bounded(row, "izzard_c", 1);
    cover.county_k = bounded(row, "county_k", 2);
}

void require_no_ground(const BookRow& row) {
    for (const auto column : {"n_low", "n_typical", "n_high", "shallow_type", "shallow_k_m_s", "shallow_k_ft_s", "shallow_n",
                              "shallow_radius_m", "shallow_radius_ft", "chart_line"})
        row.require_empty(column, "a water depth makes the class open water");
}

CoverClass cover_class(const BookRow& row) {
    CoverClass cover{.code = row.code(), .name = row.needed_text("name")};
    cover.water_depth = water_depth(row);
    cover.source = row.needed_text("source");
    cover.from_memory = row.yes("from_memory", false);
    if (cover.is_open_water()) {
        require_no_ground(row);
    } else {
        read_roughness(row, cover);
        read_shallow(row, cover);
    }
    read_curve_numbers(row, cover);
    read_runoff_coefficients(row, cover);
    read_land_use(row, cover);
    read_impervious(row, cover);
    read_lump_numbers(row, cover);
    cover.paved = row.yes("paved", cover.shallow_type == "pavement");
    return cover;
}

void require_known_columns(const CsvTable& table, std::string_view file) {
    for (std::size_t i = 0; i < table.header.size(); ++i) {
        const std::string& column = table.header[i];
        const std::string where =
            std::string(file) + ", header, column " + std::to_string(i + 1) + ": \"" + column + "\" ";
        if (column == "impervious")
            throw input_error(where + "does not say its unit; name it impervious_percent, and write 35 where 35 % is sealed");
        if (std::find(known_columns.begin(), known_columns.end(), column) == known_columns.end())
            throw input_error(where + "is not a column of a cover book" + did_you_mean(column, known_columns));
        if (table.column(column) != i) throw input_error(where + "is there twice; keep one");
    }
}

void require_needed_columns(const CsvTable& table, std::string_view file) {
    for (const std::string_view column : needed_columns)
        if (!table.column(column))
            throw input_error(std::string(file) + " has no column " + std::string(column) +
                              "; a cover book begins with a header such as "
                              "code,name,n_low,n_typical,n_high,shallow_type,water_depth_m,source");
}

}  // namespace

CoverBook parse_cover_book(std::string_view text, std::string_view file) {
    const CsvTable table = parse_csv(text, file);
    require_known_columns(table, file);
    require_needed_columns(table, file);
    std::vector<CoverClass> classes;
    std::map<int, int> line_of_code;
    for (const CsvRow& csv : table.rows) {
        const BookRow row(table, csv, file);
        classes.push_back(cover_class(row));
        const auto [first, is_new] = line_of_code.emplace(classes.back().code, csv.line);
        if (!is_new)
            throw row.fault("code", "is " + std::to_string(first->first) + ", which line " +
                                        std::to_string(first->second) + " has already; give each code one row");
    }
    return {std::string(file), std::move(classes)};
}

}  // namespace rillclock
