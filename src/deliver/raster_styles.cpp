#include "rillclock/deliver/raster_styles.hpp"

#include "palette.hpp"
#include "rillclock/core/number_text.hpp"
#include "time_classes.hpp"

namespace rillclock {
namespace {

std::string entry(const std::string& colour, const std::string& quantity, const std::string& label) {
    return "<ColorMapEntry color=\"" + colour + "\" quantity=\"" + quantity + "\" label=\"" + label + "\"/>";
}

std::string descriptor(const std::string& name, const std::string& kind, const std::string& entries) {
    return "<StyledLayerDescriptor version=\"1.0.0\" xmlns=\"http://www.opengis.net/sld\" xmlns:ogc=\"http://www.opengis.net/ogc\"><NamedLayer><Name>" +
           name + "</Name><UserStyle><FeatureTypeStyle><Rule><RasterSymbolizer><ColorMap type=\"" + kind + "\">" + entries +
           "</ColorMap></RasterSymbolizer></Rule></FeatureTypeStyle></UserStyle></NamedLayer></StyledLayerDescriptor>\n";
}

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

}  // namespace rillclock
