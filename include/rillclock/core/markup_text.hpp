#pragma once

#include <string>
#include <string_view>

namespace rillclock {

/// What becomes of line breaks in a text that goes into markup.
enum class LineBreaks { kept, to_spaces };

/// A text as content or attribute of HTML or XML: nothing of it becomes markup, and control characters become spaces. Names may be anything a
/// file holds.
[[nodiscard]] std::string markup_text(std::string_view text, LineBreaks breaks);

}  // namespace rillclock
