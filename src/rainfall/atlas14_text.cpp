#include "rillclock/rainfall/atlas14_text.hpp"

#include <algorithm>
#include <array>
#include <cctype>
#include <charconv>
#include <cmath>
#include <optional>

#include "printed_table.hpp"
#include "rillclock/core/quantity_text.hpp"
#include "rillclock/core/trimmed.hpp"

namespace rillclock {
namespace {

constexpr std::string_view fetch_again =
    "download the point file anew from NOAA's precipitation frequency data server and use it unchanged";

struct TextLine {
    int number = 0;
    std::string_view text;
};

std::string lower_case(std::string_view text) {
    std::string lower(text);
    std::transform(lower.begin(), lower.end(), lower.begin(),
                   [](unsigned char c) { return static_cast<char>(std::tolower(c)); });
    return lower;
}

bool has(std::string_view text, std::string_view part) {
    return lower_case(text).find(part) != std::string::npos;
}

/// The lines that are not blank, trimmed, without byte order mark.
std::vector<TextLine> lines_of(std::string_view text) {
    if (text.starts_with("\xEF\xBB\xBF")) text.remove_prefix(3);
    std::vector<TextLine> lines;
    for (int number = 1; !text.empty(); ++number) {
        const auto end = std::min(text.find('\n'), text.size());
        const std::string_view line = trimmed(text.substr(0, end));
        if (!line.empty()) lines.push_back({number, line});
        text.remove_prefix(std::min(end + 1, text.size()));
    }
    return lines;
}

std::vector<std::string_view> fields_of(std::string_view line) {
    std::vector<std::string_view> fields;
    while (true) {
        const auto comma = line.find(',');
        fields.push_back(trimmed(line.substr(0, comma)));
        if (comma == std::string_view::npos) return fields;
        line.remove_prefix(comma + 1);
    }
}

struct AtlasUnit {
    std::string_view printed;
    RainUnit unit;
};

const std::array<AtlasUnit, 8> units{{
    {"inches", {.is_depth = true, .name = "inches", .in_si = si_of_inches}},
    {"millimeters", {.is_depth = true, .name = "millimetres", .in_si = si_of_millimetres}},
    {"mm", {.is_depth = true, .name = "millimetres", .in_si = si_of_millimetres}},
    {"inches/hour", {.is_depth = false, .name = "inches per hour", .in_si = si_of_inches_per_hour}},
    {"in/hr", {.is_depth = false, .name = "inches per hour", .in_si = si_of_inches_per_hour}},
    {"millimeters/hour", {.is_depth = false, .name = "millimetres per hour", .in_si = si_of_millimetres_per_hour}},
    {"mm/hour", {.is_depth = false, .name = "millimetres per hour", .in_si = si_of_millimetres_per_hour}},
    {"mm/hr", {.is_depth = false, .name = "millimetres per hour", .in_si = si_of_millimetres_per_hour}},
}};

/// Reads one point file; each member takes what it needs from the lines.
class Atlas14Reader {
public:
    Atlas14Reader(std::string_view text, std::string_view file) : lines_(lines_of(text)), file_(file) {}

    RainSource read(Atlas14Block block) {
        refuse_other_answers();
        PrintedTable printed{.file = file_, .header_line = 0, .unit = unit(), .return_periods = {}, .rows = {}};
        require_quantity(printed.unit);
        const bool annual = is_annual();
        read_block(printed, block, annual);
        IntensityTable table = checked_table(printed);
        RainEcho echo = echo_of(printed, table, block, annual);
        return {.echo = std::move(echo), .law = std::move(table), .notices = notices(block, annual)};
    }

private:
    void refuse_other_answers() const {
        if (lines_.empty()) throw input_error(file_ + " is empty; " + std::string(fetch_again));
        const TextLine& first = lines_.front();
        if (first.text.starts_with('<'))
            throw fault_at(file_, first.number, "this is a web page and no rainfall file; " + std::string(fetch_again));
        for (const TextLine& line : lines_)
            if (has(line.text, "not within a project area") || lower_case(line.text).starts_with("error"))
                throw fault_at(file_, line.number,
                               "NOAA's server answered that it has no estimates for this place (\"" +
                                   std::string(line.text) +
                                   "\"); choose a place that Atlas 14 covers, or give rain as a table or a formula");
    }

    /// What stands after a heading line's beginning; the first such line.
    [[nodiscard]] std::optional<TextLine> heading(std::string_view beginning) const {
        for (const TextLine& line : lines_)
            if (lower_case(line.text).starts_with(beginning))
                return TextLine{line.number, trimmed(line.text.substr(beginning.size()))};
        return std::nullopt;
    }

    [[nodiscard]] TextLine needed_heading(std::string_view beginning) const {
        if (const auto found = heading(beginning)) return *found;
        throw input_error(file_ + " has no line that begins with \"" + std::string(beginning) + "\"; " +
                          std::string(fetch_again));
    }

    [[nodiscard]] RainUnit unit() const {
        const TextLine line = needed_heading("point precipitation frequency estimates");
        const std::string printed = lower_case(line.text);
        for (const AtlasUnit& known : units)
            if (printed == "(" + std::string(known.printed) + ")") return known.unit;
        throw fault_at(file_, line.number,
                       "the unit \"" + std::string(line.text) +
                           "\" is not known; (inches), (inches/hour), (millimeters) or (millimeters/hour) is expected");
    }

    void require_quantity(const RainUnit& unit) const {
        const TextLine line = needed_heading("data type:");
        if (has(line.text, unit.is_depth ? "depth" : "intensity")) return;
        throw fault_at(file_, line.number,
                       "the data type is \"" + std::string(line.text) + "\", but the first line says " +
                           std::string(unit.name) + "; " + std::string(fetch_again));
    }

    [[nodiscard]] bool is_annual() const {
        const TextLine line = needed_heading("time series type:");
        const bool annual = has(line.text, "annual maximum");
        if (annual || has(line.text, "partial duration")) return annual;
        throw fault_at(file_, line.number,
                       "the time series type \"" + std::string(line.text) +
                           "\" is neither partial duration nor annual maximum; " + std::string(fetch_again));
    }

    static Atlas14Block block_titled(std::string_view title) {
        if (has(title, "upper")) return Atlas14Block::upper_bound;
        return has(title, "lower") ? Atlas14Block::lower_bound : Atlas14Block::estimate;
    }

    /// Lines that head a block's rows; the title stands above each.
    [[nodiscard]] std::vector<std::size_t> block_headers(Atlas14Block block) const {
        std::vector<std::size_t> headers;
        for (std::size_t i = 1; i < lines_.size(); ++i) {
            if (!lower_case(lines_[i].text).starts_with("by duration for")) continue;
            const TextLine& title = lines_[i - 1];
            if (!has(title.text, "estimates") && !has(title.text, "bound"))
                throw fault_at(file_, title.number,
                               "\"" + std::string(title.text) +
                                   "\" stands where a block has its title, such as PRECIPITATION FREQUENCY ESTIMATES; " +
                                   std::string(fetch_again));
            if (block_titled(title.text) == block) headers.push_back(i);
        }
        return headers;
    }

    void read_block(PrintedTable& printed, Atlas14Block block, bool annual) const {
        const std::vector<std::size_t> headers = block_headers(block);
        if (headers.size() > 1)
            throw fault_at(file_, lines_[headers[1]].number,
                           "a second block of the " + std::string(words(block)) + " begins; " + std::string(fetch_again));
        if (headers.size() == 1) {
            read_header(printed, lines_[headers[0]], annual);
            return read_rows(printed, headers[0] + 1);
        }
        throw input_error(file_ + " holds no block of the " + std::string(words(block)) + "; " +
                          std::string(block == Atlas14Block::estimate
                                          ? fetch_again
                                          : "download the file that holds the estimates and both bounds"));
    }

    void read_header(PrintedTable& printed, const TextLine& line, bool annual) const {
        const auto fields = fields_of(line.text);
        if (!has(fields.front(), annual ? "by duration for aep" : "by duration for ari"))
            throw fault_at(file_, line.number,
                           "\"" + std::string(fields.front()) + "\" stands where a file of " +
                               std::string(annual ? "annual maxima has \"by duration for AEP:\""
                                                  : "partial durations has \"by duration for ARI (years):\"") +
                               "; " + std::string(fetch_again));
        printed.header_line = line.number;
        for (std::size_t i = 1; i < fields.size(); ++i)
            if (!fields[i].empty() || i + 1 < fields.size())
                printed.return_periods.push_back(years(fields[i], line.number, annual));
    }

    /// "10", or "'1/10" in a file of annual maxima.
    [[nodiscard]] double years(std::string_view printed, int line, bool annual) const {
        std::string_view number = printed;
        while (number.starts_with('\'') || number.starts_with('"')) number.remove_prefix(1);
        while (number.ends_with('\'') || number.ends_with('"')) number.remove_suffix(1);
        const bool fraction = number.starts_with("1/");
        if (fraction) number.remove_prefix(2);
        double value = 0.0;
        const auto [end, error] = std::from_chars(number.data(), number.data() + number.size(), value);
        if (error == std::errc() && end == number.data() + number.size() && fraction == annual && std::isfinite(value))
            return value;
        throw fault_at(file_, line,
                       "\"" + std::string(printed) + "\" is not a return period; " +
                           (annual ? "'1/10 is expected in a file of annual maxima"
                                   : "10 is expected in a file of partial durations"));
    }

    /// Rows up to the first line that does not begin with a duration.
    void read_rows(PrintedTable& printed, std::size_t from) const {
        for (std::size_t i = from; i < lines_.size(); ++i) {
            const auto fields = fields_of(lines_[i].text);
            const auto duration = duration_labelled(fields.front());
            if (!duration) return;
            printed.rows.push_back(row(printed, lines_[i], *duration));
        }
    }

    /// "5-min:", "2-hr:", "60-day:".
    static std::optional<Duration> duration_labelled(std::string_view label) {
        double number = 0.0;
        const auto [end, error] = std::from_chars(label.data(), label.data() + label.size(), number);
        if (error != std::errc() || !(number > 0)) return std::nullopt;
        const std::string_view unit = label.substr(static_cast<std::size_t>(end - label.data()));
        if (unit == "-min:") return minutes(number);
        if (unit == "-hr:") return hours(number);
        if (unit == "-day:") return hours(24 * number);
        return std::nullopt;
    }

    [[nodiscard]] PrintedRow row(const PrintedTable& printed, const TextLine& line, Duration duration) const {
        auto fields = fields_of(line.text);
        const std::size_t width = printed.return_periods.size() + 1;
        if (fields.size() == width + 1 && fields.back().empty()) fields.pop_back();
        if (fields.size() != width)
            throw fault_at(file_, line.number,
                           "the row has " + std::to_string(fields.size() - 1) + " numbers where the header has " +
                               std::to_string(width - 1) + " return periods; " + std::string(fetch_again));
        PrintedRow row{.line = line.number,
                       .label = std::string(fields.front().substr(0, fields.front().size() - 1)),
                       .duration = duration,
                       .values = {}};
        for (std::size_t i = 1; i < width; ++i) row.values.push_back(number(fields[i], line.number, i));
        return row;
    }

    [[nodiscard]] double number(std::string_view text, int line, std::size_t column) const {
        return number_from_text(
            text, {.subject = file_ + ", line " + std::to_string(line) + ", number " + std::to_string(column),
                   .example = "1.05"});
    }

    static std::string_view words(Atlas14Block block) {
        switch (block) {
            case Atlas14Block::estimate:
                return "estimate";
            case Atlas14Block::upper_bound:
                return "upper bound";
            case Atlas14Block::lower_bound:
                return "lower bound";
        }
        return "";
    }

    /// What makes the numbers other than those that drainage manuals mean.
    [[nodiscard]] Notices notices(Atlas14Block block, bool annual) const {
        Notices notices;
        if (annual)
            notices.push_back({.code = "rain-annual-maximum",
                               .text = file_ +
                                       " is of annual maxima, whose depths up to 10 years are smaller than those of "
                                       "partial durations that manuals mean (by about an eighth at 2 years); download the "
                                       "partial duration series unless annual maxima are wanted"});
        if (block != Atlas14Block::estimate)
            notices.push_back({.code = "rain-bound",
                               .text = file_ + " is read at the " + std::string(words(block)) +
                                       " of its 90 % confidence interval, not at the estimate"});
        return notices;
    }

    /// "NOAA Atlas 14 Volume 9 Version 2, Southeastern States, 26.6 Degree, -81.9 Degree".
    [[nodiscard]] std::string place() const {
        std::string place;
        if (const auto volume = heading("noaa atlas 14")) place = "NOAA Atlas 14 " + std::string(volume->text);
        for (const std::string_view beginning :
             {"project area:", "location name (esri maps):", "latitude:", "longitude:"})
            if (const auto line = heading(beginning); line && !line->text.empty() && line->text != "None")
                place += (place.empty() ? "" : ", ") + std::string(line->text);
        return place;
    }

    [[nodiscard]] RainEcho echo_of(const PrintedTable& printed, const IntensityTable& table, Atlas14Block block,
                                   bool annual) const {
        return {.source = file_,
                .kind = "NOAA Atlas 14 point file",
                .block = std::string(words(block)),
                .quantity = printed.unit.is_depth ? "depth" : "intensity",
                .unit = std::string(printed.unit.name),
                .series = annual ? "annual maximum" : "partial duration",
                .place = place(),
                .return_periods = table.return_periods,
                .range = table.range()};
    }

    std::vector<TextLine> lines_;
    std::string file_;
};

}  // namespace

bool is_atlas14_text(std::string_view text) {
    const std::vector<TextLine> lines = lines_of(text.substr(0, 4096));
    return std::any_of(lines.begin(), lines.end(), [](const TextLine& line) {
        return has(line.text, "precipitation frequency estimates") || has(line.text, "not within a project area") ||
               line.text.starts_with("<");
    });
}

RainSource rain_from_atlas14(std::string_view text, std::string_view file, Atlas14Block block) {
    return Atlas14Reader(text, file).read(block);
}

}  // namespace rillclock
