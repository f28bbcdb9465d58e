#include "rillclock/hydraulics/roughness.hpp"

namespace rillclock {
namespace {

constexpr RoughnessEntry one(std::string_view surface, double n) { return {surface, n, n, n}; }
/// Where a range is printed and no typical value, the middle stands for it.
constexpr RoughnessEntry range(std::string_view surface, double least, double greatest) {
    return {surface, least, (least + greatest) / 2, greatest};
}

RoughnessTable streets() {
    return {.of = "streets and gutters",
            .source = "FHWA, HEC-22, 3rd ed., 2009, table 4-3",
            .trust = Trust::from_memory,
            .remark = "for flat gutters that collect sediment more: 0.002 in HDS-3, printed as 0.02 in HEC-22",
            .entries = {one("concrete gutter, troweled", 0.012), one("asphalt pavement, smooth", 0.013), one("asphalt pavement, rough", 0.016),
                        one("concrete gutter with smooth asphalt pavement", 0.013), one("concrete gutter with rough asphalt pavement", 0.015),
                        one("concrete pavement, float finish", 0.014), one("concrete pavement, broom finish", 0.016)}};
}

RoughnessTable pipes_by_code() {
    return {.of = "pipes, design values",
            .source = "code of the city of Winchester, Indiana, table 4, after FHWA",
            .trust = Trust::seen_in_source,
            .remark = "greatest velocity there 15 ft/s, in corrugated metal 7 ft/s",
            .entries = {one("concrete", 0.013), one("HDPE", 0.011), one("PVC", 0.010), one("vitrified clay", 0.013), one("cast iron", 0.013),
                        one("brick", 0.015), one("corrugated metal, annular, unpaved", 0.024), one("corrugated metal, annular, a quarter paved", 0.021),
                        one("corrugated metal, annular, half paved", 0.018), one("corrugated metal, annular, paved", 0.013),
                        one("corrugated metal, helical, 12 in", 0.011), one("corrugated metal, helical, 15 in", 0.012),
                        one("corrugated metal, helical, 18 in", 0.013), one("corrugated metal, helical, 24 in", 0.015),
                        one("corrugated metal, helical, 36 in", 0.018), one("corrugated metal, helical, 48 in", 0.020),
                        one("corrugated metal, helical, 60 in and more", 0.021)}};
}

RoughnessTable pipes_by_range() {
    return {.of = "pipes and closed conduits",
            .source = "FHWA, HDS-3, 1961, appendix A, table 1",
            .trust = Trust::seen_in_source,
            .remark = "",
            .entries = {range("concrete pipe", 0.011, 0.013), range("vitrified clay pipe", 0.012, 0.014), one("cast iron pipe, uncoated", 0.013),
                        range("steel pipe", 0.009, 0.011), range("brick", 0.014, 0.017), range("monolithic concrete, rough wood forms", 0.015, 0.017),
                        range("monolithic concrete, smooth wood forms", 0.012, 0.014), range("monolithic concrete, steel forms", 0.012, 0.013)}};
}

RoughnessTable made_channels() {
    return {.of = "constructed channels, design values",
            .source = "code of the city of Winchester, Indiana, table 4, after FHWA",
            .trust = Trust::seen_in_source,
            .remark = "",
            .entries = {one("concrete, trowel finish", 0.013), one("concrete, broom or float finish", 0.015), one("gunite", 0.018),
                        one("riprap, placed", 0.030), one("riprap, dumped", 0.035), one("gabion", 0.030), one("earth, short grass, few weeds", 0.025),
                        one("earth as it is, some weeds", 0.030), one("uniform, dense weeds", 0.035),
                        range("not maintained, dense weeds and brush", 0.08, 0.12), one("swale with grass", 0.05)}};
}

RoughnessTable streams() {
    return {.of = "natural streams less than 100 ft wide",
            .source = "Chow, Open-Channel Hydraulics, 1959, table 5-6 D, as transcribed elsewhere",
            .trust = Trust::from_memory,
            .remark = "",
            .entries = {{"plain: clean, straight, full", 0.025, 0.030, 0.033},
                        {"plain: the same with more stones and weeds", 0.030, 0.035, 0.040},
                        {"plain: clean, winding, some pools and shoals", 0.033, 0.040, 0.045},
                        {"plain: the same with some weeds and stones", 0.035, 0.045, 0.050},
                        {"plain: the same at lower stages", 0.040, 0.048, 0.055},
                        {"plain: winding with weeds and more stones", 0.045, 0.050, 0.060},
                        {"plain: sluggish, weedy, deep pools", 0.050, 0.070, 0.080},
                        {"plain: very weedy, deep pools, or floodway with timber", 0.075, 0.100, 0.150},
                        {"mountain: gravels, cobbles, few boulders", 0.030, 0.040, 0.050},
                        {"mountain: cobbles with large boulders", 0.040, 0.050, 0.070}}};
}

}  // namespace

std::span<const RoughnessTable> roughness_tables() {
    static const std::vector<RoughnessTable> all{streets(), pipes_by_code(), pipes_by_range(), made_channels(), streams()};
    return all;
}

}  // namespace rillclock
