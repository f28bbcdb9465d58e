#include "rillclock/deliver/raster_styles.hpp"

#include <algorithm>
#include <array>
#include <cmath>

#include "palette.hpp"
#include "rillclock/core/markup_text.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/deliver/raster_strips.hpp"
#include "time_classes.hpp"

namespace rillclock {
namespace {

std::string entry(const std::string& colour, const std::string& quantity, const std::string& label, const std::string& opacity = "1") {
    return "<ColorMapEntry color=\"" + colour + "\" quantity=\"" + quantity + "\" label=\"" + markup_text(label, LineBreaks::to_spaces) + "\" opacity=\"" + opacity + "\"/>";
}

std::string descriptor(const std::string& name, const std::string& kind, const std::string& entries) {
    return "<StyledLayerDescriptor version=\"1.0.0\" xmlns=\"http://www.opengis.net/sld\" xmlns:ogc=\"http://www.opengis.net/ogc\"><NamedLayer><Name>" +
           name + "</Name><UserStyle><FeatureTypeStyle><Rule><RasterSymbolizer><ColorMap type=\"" + kind + "\">" + entries +
           "</ColorMap></RasterSymbolizer></Rule></FeatureTypeStyle></UserStyle></NamedLayer></StyledLayerDescriptor>\n";
}

/// Eight colours that people who cannot tell red from green tell apart. Source: Okabe & Ito, Color universal design, 2008.
constexpr std::array<const char*, 8> eight_colours = {"#0072b2", "#56b4e9", "#009e73", "#f0e442", "#e69f00", "#d55e00", "#cc79a7", "#000000"};

}  // namespace

std::string travel_time_sld(const StudyResult& result) {
    const TimeClasses classes = time_classes(result);
    std::string entries;
    for (std::size_t i = 0; i < classes.count; ++i) {
        const std::string to = significant(static_cast<double>(i + 1) * classes.step, 6);
        entries += entry(classes.colour(i), to, "to " + to + " min");
    }
    return descriptor("travel_time", "intervals", entries);
}

std::string regime_sld() {
    std::string entries;
    for (const Regime regime : {Regime::sheet, Regime::shallow, Regime::channel, Regime::water}) {
        entries += entry(colour_of(regime), std::to_string(static_cast<int>(regime)), std::string(name_of(regime)));
    }
    return descriptor("regime", "values", entries);
}

std::string flow_azimuth_sld() {
    constexpr std::array<const char*, 8> towards = {"north", "north-east", "east", "south-east", "south", "south-west", "west", "north-west"};
    std::string entries;
    for (std::size_t i = 0; i < towards.size(); ++i) entries += entry(eight_colours[i], std::to_string(45 * i), "to the " + std::string(towards[i]));
    return descriptor("flow_azimuth", "values", entries + entry("#ffffff", std::to_string(azimuth_leaves), "water leaves the data here"));
}

std::string contributing_area_sld(const StudyResult& result) {
    // From 100 m2 by tens, to beyond the largest catchment; the last class has no end.
    FixedArea greatest = 0;
    for (const Outlet& outlet : result.outlets) greatest = std::max(greatest, outlet.area);
    constexpr int first = 2;
    const int last = std::max(first + 2, static_cast<int>(std::ceil(std::log10(std::max(1.0, from_fixed_area(greatest))))) + 1);
    std::string entries;
    for (int power = first; power <= last; ++power) {
        const std::string ha = significant(std::pow(10.0, std::min(power, last - 1) - 4), 6) + " ha";
        const double to = power < last ? std::pow(10.0, power) : 1e14;
        entries += entry(viridis(1.0 - static_cast<double>(power - first) / (last - first)), significant(to, 15), power < last ? "to " + ha : "beyond " + ha);
    }
    return descriptor("contributing_area", "intervals", entries);
}

std::string catchment_sld(const StudyResult& result) {
    std::string entries = entry("#ffffff", "0", "none", "0");
    for (const Outlet& outlet : result.outlets) {
        // Without black, which is for lines.
        entries += entry(eight_colours[outlet.number % (eight_colours.size() - 1)], std::to_string(outlet.number), outlet.point.name);
    }
    return descriptor("catchment", "values", entries);
}

}  // namespace rillclock
