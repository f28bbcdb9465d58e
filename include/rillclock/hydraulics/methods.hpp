#pragma once

#include <span>
#include <string_view>
#include <vector>

namespace rillclock {

/// How far a method's numbers can be trusted.
enum class Trust {
    seen_in_source,  ///< read in the text of the source
    from_memory,  ///< known, and reproduced by arithmetic where that is possible, but not read there: check before use
    own_rule,     ///< a rule of this program, published nowhere else
};

/// "read in its source", "value from memory", "rule of this program".
[[nodiscard]] std::string_view words(Trust trust);

/// One thing a method needs.
struct MethodInput {
    std::string_view symbol;
    std::string_view meaning;
    std::string_view unit;
};

/// One method by which water is timed, described once: the `methods` command, the documentation and the tables are made
/// from this.
struct Method {
    std::string_view id;  ///< short stable name: "sheet-nrcs"
    std::string_view name;
    std::string_view formula;
    std::vector<MethodInput> inputs;
    std::string_view range;   ///< where it may be used
    std::string_view source;  ///< author, title, year, equation
    Trust trust = Trust::from_memory;
};

/// All methods, in the order in which water meets them.
[[nodiscard]] std::span<const Method> methods();
/// The method of that id; null where there is none.
[[nodiscard]] const Method* find_method(std::string_view id);

}  // namespace rillclock
