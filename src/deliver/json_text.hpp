#pragma once

#include <string>
#include <string_view>
#include <vector>

#include "json_values.hpp"

namespace rillclock {

/// A whole document, a space deeper with each level; bytes that are no UTF-8 are replaced.
[[nodiscard]] std::string json_text(const Json& json);

/// What json_text makes of a member of a list that is itself a member of the whole. So members of a long list can be made each on its own.
[[nodiscard]] std::string member_text(const Json& member);

/// Puts members, made by member_text, into the list of that name, which is empty in the text of the whole.
[[nodiscard]] std::string with_members(const std::string& whole, std::string_view list, const std::vector<std::string>& members);

}  // namespace rillclock
