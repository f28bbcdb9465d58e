#include "rillclock/deliver/calculation_sheet.hpp"

#include <algorithm>
#include <iterator>
#include <unordered_map>
#include <utility>

#include "rillclock/core/error.hpp"
#include "sheet_writer.hpp"

namespace rillclock {
namespace {

void write_point(const SheetMatter& matter, SheetWriter& sheet) {
    const SheetJson& outlet = matter.outlet;
    const ReportScale& scale = matter.scale;
    const std::string m = " " + scale.length_unit();
    const SheetJson& governing = outlet.at("governing_path");
    sheet.fact("drains", printed(scale.area(number_of(outlet, "area_m2"))) + " " + scale.area_unit() + ", of which " +
                             printed(scale.area(number_of(outlet, "own_area_m2"))) + " " + scale.area_unit() +
                             " reach no other point first");
    sheet.fact("time of concentration", printed_minutes(number_of(outlet, "time_of_concentration_s")) +
                                            ", the time along the governing path");
    sheet.fact("governing path", printed(scale.length(number_of(governing, "length_m"))) + m + " long, falling " +
                                     printed(scale.length(number_of(governing, "fall_m"))) + m);
    sheet.fact("next point", outlet.at("next_point").is_null() ? "none: the water leaves the data" : words_of(outlet, "next_point"));
    for (const SheetJson& arrival : outlet.at("arrivals")) {
        sheet.fact(significant(100.0 * number_of(arrival, "share_of_area"), 3) + " % of the area",
                   "has arrived after " + printed(number_of(arrival, "time_min")) + " min");
    }
}

/// Which notices concern each point, by their positions in the result, those of the whole study included. A study of thousands of points
/// has thousands of them.
class NoticesOfPoints {
public:
    explicit NoticesOfPoints(const SheetJson& result) {
        std::size_t position = 0;
        for (const SheetJson& notice : result.at("notices")) {
            const SheetJson& point = notice.at("point");
            (point.is_null() ? of_all_ : of_point_[point.get<std::string>()]).push_back(position++);
        }
    }

    [[nodiscard]] std::vector<std::size_t> of(const std::string& point) const {
        const auto own = of_point_.find(point);
        if (own == of_point_.end()) return of_all_;
        std::vector<std::size_t> both;
        std::merge(of_all_.begin(), of_all_.end(), own->second.begin(), own->second.end(), std::back_inserter(both));
        return both;
    }

private:
    std::vector<std::size_t> of_all_;
    std::unordered_map<std::string, std::vector<std::size_t>> of_point_;
};

void write_notices(const SheetMatter& matter, const std::vector<std::size_t>& positions, SheetWriter& sheet) {
    sheet.heading("What needs a person's eye");
    for (const std::size_t position : positions) {
        const SheetJson& notice = matter.result.at("notices").at(position);
        const double effect = number_of(notice, "effect_min");
        sheet.item(words_of(notice, "text") + (effect > 0 ? " (" + printed(effect) + " min hang on it)" : ""));
    }
    if (positions.empty()) sheet.words("Nothing was noticed at this point.");
}

void write_both_paths(const SheetMatter& matter, SheetWriter& sheet) {
    const SheetJson& governing = matter.outlet.at("governing_path");
    const SheetJson& longest = matter.outlet.at("longest_path");
    sheet.heading("Governing path, segment by segment");
    sheet.words("From the cell whose water arrives last, down to the point. R and S of a segment are those of one uniform stretch of "
                "the same length and time: harmonic means over its cells. Sheet flow runs by the index u = sum of n L / sqrt(S) from "
                "the divide.");
    write_path(matter, governing, sheet);
    sheet.fact("end to end", "with each segment's slope from end to end, as read from a map, the same path would take " +
                                 printed(number_of(governing, "end_to_end_time_min")) + " min");
    if (longest.at("head") == governing.at("head")) {
        sheet.words("It is the longest path too.");
        return;
    }
    sheet.heading("Longest path, for comparison");
    sheet.words("It is " + printed(matter.scale.length(number_of(longest, "length_m"))) + " " + matter.scale.length_unit() +
                " long; its water arrives after " + printed(number_of(longest, "time_min")) + " min.");
    write_path(matter, longest, sheet);
}

void write_cautions(const SheetMatter& matter, SheetWriter& sheet) {
    sheet.heading("Cautions");
    for (const SheetJson& caution : matter.result.at("cautions")) sheet.item(caution.get<std::string>());
    sheet.heading("Made from");
    for (const SheetJson& input : matter.result.at("inputs")) {
        sheet.fact(words_of(input, "role"), words_of(input, "file") + ", SHA-256 " + words_of(input, "sha256").substr(0, 16));
    }
    sheet.fact("program", "rillclock " + words_of(matter.result.at("versions"), "rillclock"));
}

bool is_result(const SheetJson& json) {
    return json.is_object() && json.contains("outlets") && json.at("outlets").is_array() && json.contains("report_units") &&
           json.contains("parameters");
}

SheetJson parsed_result(std::string_view text, std::string_view file) {
    SheetJson json = SheetJson::parse(text, nullptr, false);
    if (is_result(json)) return json;
    throw input_error("'" + std::string(file) + "' is no result of this version of rillclock; write it anew with rillclock run");
}

Error no_whole_result(std::string_view file, const nlohmann::json::exception& broken) {
    return input_error("'" + std::string(file) + "' is no whole result of this version of rillclock (" + broken.what() +
                       "); write it anew with rillclock run");
}

bool is_plain(char c) { return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || (c >= '0' && c <= '9') || c == '-'; }

}  // namespace

struct SheetBook::Content {
    SheetJson json;
    std::string file;
    NoticesOfPoints notices;
    std::span<const std::string> apart = {};   ///< the points, where they do not stand in `json`

    [[nodiscard]] std::size_t points() const { return std::max(apart.size(), json.at("outlets").size()); }
    [[nodiscard]] SheetJson outlet(std::size_t position) const {
        return apart.empty() ? json.at("outlets").at(position) : SheetJson::parse(apart[position]);
    }
};

SheetBook::SheetBook(std::string_view result_json, std::string_view file) {
    SheetJson json = parsed_result(result_json, file);
    try {
        NoticesOfPoints notices(json);
        content_ = std::make_unique<Content>(Content{std::move(json), std::string(file), std::move(notices)});
    } catch (const nlohmann::json::exception& broken) {
        throw no_whole_result(file, broken);
    }
}
SheetBook::SheetBook(std::string_view frame, std::span<const std::string> outlets) : SheetBook(frame, "result.json") { content_->apart = outlets; }
SheetBook::SheetBook(SheetBook&&) noexcept = default;
SheetBook& SheetBook::operator=(SheetBook&&) noexcept = default;
SheetBook::~SheetBook() = default;

std::vector<std::string> SheetBook::names() const {
    std::vector<std::string> names;
    for (std::size_t i = 0; i < content_->points(); ++i) names.push_back(words_of(content_->outlet(i), "name"));
    return names;
}

CalculationSheet SheetBook::sheet(std::size_t position) const try {
    const SheetJson& result = content_->json;
    const SheetJson outlet = content_->outlet(position);
    const SheetMatter matter{.result = result, .outlet = outlet,
                             .scale = ReportScale(result.at("report_units") == "us" ? ReportUnits::us : ReportUnits::si)};
    SheetWriter sheet;
    sheet.title("Calculation sheet: " + words_of(matter.outlet, "name"));
    if (!words_of(result, "title").empty()) sheet.fact("study", words_of(result, "title"));
    write_point(matter, sheet);
    const std::vector<std::size_t> noticed = content_->notices.of(words_of(matter.outlet, "name"));
    write_notices(matter, noticed, sheet);
    write_formulas(matter, sheet);
    write_both_paths(matter, sheet);
    if (matter.has_rain()) write_storms(matter, sheet);
    write_peaks(matter, noticed, sheet);
    write_methods(matter, sheet);
    write_cautions(matter, sheet);
    return sheet.take();
} catch (const nlohmann::json::exception& broken) {
    throw no_whole_result(content_->file, broken);
}

std::string sheet_file_name(std::size_t number, std::string_view name) {
    constexpr std::size_t most_letters = 60;
    std::string plain;
    for (const char c : name.substr(0, most_letters)) {
        const bool inside_letter = (static_cast<unsigned char>(c) & 0xC0U) == 0x80U;
        if (!inside_letter) plain += is_plain(c) ? c : '_';
    }
    return std::to_string(number) + "-" + plain + ".md";
}

}  // namespace rillclock
