#include "layer_style.hpp"

#include "rillclock/core/markup_text.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

constexpr double pixels_per_mm = 96.0 / 25.4;

std::string element(const std::string& name, const std::string& content) { return "<" + name + ">" + content + "</" + name + ">"; }

std::string css(const std::string& name, const std::string& value) { return "<CssParameter name=\"" + name + "\">" + value + "</CssParameter>"; }

std::string sld_fill(const LayerLook& look) {
    return look.fill.empty() ? std::string() : element("Fill", css("fill", look.fill) + css("fill-opacity", significant(look.fill_opacity, 3)));
}

std::string sld_stroke(const LayerLook& look) {
    return element("Stroke", css("stroke", look.stroke) + css("stroke-width", significant(look.stroke_mm * pixels_per_mm, 3)));
}

std::string sld_symbolizer(LayerGeometry geometry, const LayerLook& look) {
    switch (geometry) {
        case LayerGeometry::points:
            return element("PointSymbolizer", element("Graphic", element("Mark", element("WellKnownName", "circle") + sld_fill(look) + sld_stroke(look)) +
                                                                     element("Size", "9")));
        case LayerGeometry::lines: return element("LineSymbolizer", sld_stroke(look));
        case LayerGeometry::polygons: return element("PolygonSymbolizer", sld_fill(look) + sld_stroke(look));
    }
    return {};
}

std::string sld_rule(const LayerDescription& layer, const LayerLook& look) {
    std::string content = element("Name", xml_text(look.label.empty() ? layer.name : look.label));
    if (!layer.style.field.empty()) {
        content += "<ogc:Filter><ogc:PropertyIsEqualTo>" + element("ogc:PropertyName", layer.style.field) + element("ogc:Literal", xml_text(look.value)) +
                   "</ogc:PropertyIsEqualTo></ogc:Filter>";
    }
    return element("Rule", content + sld_symbolizer(layer.geometry, look));
}

int byte_of(const std::string& colour, std::size_t at) { return std::stoi(colour.substr(at, 2), nullptr, 16); }

/// "#rrggbb" as "r,g,b,a".
std::string rgba(const std::string& colour, double opacity) {
    if (colour.empty()) return "0,0,0,0";
    return std::to_string(byte_of(colour, 1)) + "," + std::to_string(byte_of(colour, 3)) + "," + std::to_string(byte_of(colour, 5)) + "," +
           std::to_string(static_cast<int>(opacity * 255.0 + 0.5));
}

std::string property(const std::string& key, const std::string& value) { return "<prop k=\"" + key + "\" v=\"" + value + "\"/>"; }

std::string qml_symbol(LayerGeometry geometry, const LayerLook& look, const std::string& name) {
    const std::string width = significant(look.stroke_mm, 3);
    const auto symbol = [&](const std::string& type, const std::string& kind, const std::string& properties) {
        return "<symbol type=\"" + type + "\" name=\"" + name + "\" alpha=\"1\" clip_to_extent=\"1\"><layer class=\"" + kind +
               "\" enabled=\"1\" locked=\"0\" pass=\"0\">" + properties + "</layer></symbol>";
    };
    switch (geometry) {
        case LayerGeometry::points:
            return symbol("marker", "SimpleMarker", property("name", "circle") + property("color", rgba(look.fill, look.fill_opacity)) +
                          property("outline_color", rgba(look.stroke, 1.0)) + property("outline_width", width) + property("size", "2.4") + property("size_unit", "MM"));
        case LayerGeometry::lines:
            return symbol("line", "SimpleLine", property("line_color", rgba(look.stroke, 1.0)) + property("line_style", "solid") +
                          property("line_width", width) + property("line_width_unit", "MM") + property("capstyle", "round") + property("joinstyle", "round"));
        case LayerGeometry::polygons:
            return symbol("fill", "SimpleFill", property("color", rgba(look.fill, look.fill_opacity)) + property("style", look.fill.empty() ? "no" : "solid") +
                          property("outline_color", rgba(look.stroke, 1.0)) + property("outline_style", "solid") + property("outline_width", width) +
                          property("outline_width_unit", "MM"));
    }
    return {};
}

std::string qml_renderer(const LayerDescription& layer) {
    std::string categories;
    std::string symbols;
    for (std::size_t i = 0; i < layer.style.looks.size(); ++i) {
        const LayerLook& look = layer.style.looks[i];
        const std::string name = std::to_string(i);
        categories += "<category value=\"" + xml_text(look.value) + "\" label=\"" + xml_text(look.label) + "\" symbol=\"" + name + "\" render=\"true\"/>";
        symbols += qml_symbol(layer.geometry, look, name);
    }
    if (layer.style.field.empty()) return "<renderer-v2 type=\"singleSymbol\" enableorderby=\"0\">" + element("symbols", symbols) + "</renderer-v2>";
    return "<renderer-v2 type=\"categorizedSymbol\" attr=\"" + layer.style.field + "\" enableorderby=\"0\">" + element("categories", categories) +
           element("symbols", symbols) + "</renderer-v2>";
}

}  // namespace

std::string xml_text(std::string_view text) { return markup_text(text, LineBreaks::to_spaces); }

std::string style_sld(const LayerDescription& layer) {
    std::string rules;
    for (const LayerLook& look : layer.style.looks) rules += sld_rule(layer, look);
    if (!layer.style.label_field.empty()) {
        rules += element("Rule", element("TextSymbolizer", element("Label", element("ogc:PropertyName", layer.style.label_field)) +
                                                               element("Fill", css("fill", "#202020"))));
    }
    return "<StyledLayerDescriptor version=\"1.0.0\" xmlns=\"http://www.opengis.net/sld\" xmlns:ogc=\"http://www.opengis.net/ogc\">" +
           element("NamedLayer", element("Name", layer.name) + element("UserStyle", element("Title", xml_text(layer.description)) +
                                                                                      element("FeatureTypeStyle", rules))) +
           "</StyledLayerDescriptor>";
}

std::string style_qml(const LayerDescription& layer) {
    std::string labels;
    if (!layer.style.label_field.empty()) {
        labels = "<labeling type=\"simple\"><settings calloutType=\"simple\"><text-style fieldName=\"" + layer.style.label_field +
                 "\" fontSize=\"9\" textColor=\"32,32,32,255\"><text-buffer bufferDraw=\"1\" bufferSize=\"0.8\" bufferColor=\"255,255,255,255\"/>"
                 "</text-style></settings></labeling>";
    }
    return "<qgis version=\"3.22\" labelsEnabled=\"" + std::string(labels.empty() ? "0" : "1") + "\">" + qml_renderer(layer) + labels + "</qgis>";
}

}  // namespace rillclock
