#include <array>
#include <stdexcept>

#include "published_formulas.hpp"
#include "rillclock/hydraulics/lump_formulas.hpp"
#include "rillclock/study/lump_inputs.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {
namespace {

/// A class of the built-in book of NLCD.
const CoverClass& nlcd(const Inputs& in) {
    static const CoverBook book = built_in_book("nlcd");
    const CoverClass* found = book.find(static_cast<int>(in["code"]));
    if (found == nullptr) throw std::runtime_error("the book nlcd has no such class");
    return *found;
}

double curve_number(const Inputs& in) {
    return nlcd(in).curve_number(static_cast<SoilGroup>(static_cast<int>(in["group"]) - 1)).value();
}

double kirpich_factor(const Inputs& in) {
    constexpr std::array names{"paved overland", "concrete channel"};
    return lump_input_from_text(LumpInput::kirpich_factor, names.at(static_cast<std::size_t>(in["row"]) - 1), "here");
}

}  // namespace

Formulas surface_formulas() {
    return {
        {"nlcd_n", [](const Inputs& in) { return nlcd(in).n_typical; }},
        {"nlcd_cn", curve_number},
        {"nlcd_kerby_N", [](const Inputs& in) { return nlcd(in).kerby_n.value(); }},
        {"kirpich_factor", kirpich_factor},
        {"kirpich_sharifi_hosseini", [](const Inputs&) { return kirpich_sharifi_hosseini; }},
        {"california_sharifi_hosseini", [](const Inputs&) { return california_sharifi_hosseini; }},
    };
}

}  // namespace rillclock
