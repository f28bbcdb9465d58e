#pragma once

#include <array>
#include <string_view>

/// Small terrains that show a fault, shrunk (see reference/shrinking.hpp), with what it is about: faults that were found, and faults that were
/// made on purpose to see that they are.
namespace rillclock {

struct KeptTerrain {
    std::string_view about;
    std::string_view drawing;
};

inline constexpr std::array kept_terrains = {
    KeptTerrain{"of level neighbours equally near to an exit and equally far from higher ground the first counts", R"(
        000
        000
        000
    )"},
    KeptTerrain{"of passes with one higher elevation that with the lower other one counts", R"(
        00#000002222
        0000#0001202
        00000000#222
    )"},
};

}  // namespace rillclock
