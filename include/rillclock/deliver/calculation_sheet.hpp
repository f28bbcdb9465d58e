#pragma once

#include <cstddef>
#include <memory>
#include <span>
#include <string>
#include <string_view>
#include <vector>

namespace rillclock {

/// One line of a calculation sheet.
struct SheetLine {
    /// How a line is set.
    enum class Kind {
        title,
        heading,
        words,        ///< a sentence
        item,         ///< what a calculation is about: a segment, a storm, a method
        fact,         ///< `label` and what it is
        calculation,  ///< `label` = an expression in numbers = result and unit: can be recomputed from what stands on it
    };
    Kind kind = Kind::words;
    std::string label = {};
    std::string text = {};
};

/// The calculation of one point's time, line by line, as a reviewer with a hand calculator checks it.
///
/// Expressions have numbers, + - x / ^, brackets, sqrt, ln and min, and no letters besides; recomputed from the printed numbers each holds
/// to 0.1 %, and those of peak flow to their last digit.
using CalculationSheet = std::vector<SheetLine>;

/// The sheets of a result, made from its `result.json` alone.
class SheetBook {
public:
    /// Throws Error (inputs), naming `file`, where the text is no result of this program.
    SheetBook(std::string_view result_json, std::string_view file);
    /// Of a result whose points stand apart (`ResultText`); each is read when its sheet is made. `outlets` must live as long.
    SheetBook(std::string_view frame, std::span<const std::string> outlets);
    SheetBook(SheetBook&&) noexcept;
    SheetBook& operator=(SheetBook&&) noexcept;
    ~SheetBook();

    /// Names of the points, in the order of their numbers.
    [[nodiscard]] std::vector<std::string> names() const;
    /// The sheet of the point at that position in `names`.
    [[nodiscard]] CalculationSheet sheet(std::size_t position) const;

private:
    struct Content;
    std::unique_ptr<Content> content_;
};

/// For a terminal: no line is longer than 100 characters, but for a single word that is.
[[nodiscard]] std::string sheet_text(const CalculationSheet& sheet);
/// As Markdown (CommonMark); names cannot become markup.
[[nodiscard]] std::string sheet_markdown(const CalculationSheet& sheet);

/// Name of a point's file that any file system takes and no two points share: "3-Mill_bridge.md".
[[nodiscard]] std::string sheet_file_name(std::size_t number, std::string_view name);

/// A study of more points writes the sheets of so many, those with the largest catchments; `rillclock explain` gives the others.
inline constexpr std::size_t most_sheets = 500;

}  // namespace rillclock
