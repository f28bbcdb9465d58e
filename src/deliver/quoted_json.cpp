#include "rillclock/deliver/quoted_json.hpp"

#include <nlohmann/json.hpp>

namespace rillclock {

std::string quoted_json(const std::string& text) {
    return nlohmann::json(text).dump(-1, ' ', false, nlohmann::json::error_handler_t::replace);
}

}  // namespace rillclock
