#pragma once

#include <cmath>
#include <functional>
#include <string>
#include <utility>
#include <vector>

#include "rillclock/core/fixed_point.hpp"
#include "rillclock/core/number_text.hpp"
#include "rillclock/io/vector_output.hpp"

namespace rillclock {

/// A layer described once, as named fields that each know their value: description and features cannot drift apart.
template <class Row>
class LayerWriter {
public:
    using Value = std::function<FieldValue(const Row&)>;

    LayerWriter(VectorFile& file, LayerDescription layer) : file_(file), layer_(std::move(layer)) {
        if (layer_.indexed_field.empty()) layer_.indexed_field = "point";
    }

    LayerWriter& field(std::string name, FieldKind kind, std::string description, Value value) {
        layer_.fields.push_back({std::move(name), kind, std::move(description)});
        values_.push_back(std::move(value));
        return *this;
    }
    void begin() { file_.begin_layer(layer_); }
    void add(const LayerShape& shape, const Row& row) {
        std::vector<FieldValue> values;
        for (const Value& value : values_) values.push_back(value(row));
        file_.add(shape, values);
    }

private:
    VectorFile& file_;
    LayerDescription layer_;
    std::vector<Value> values_;
};

/// What stands in a field; a number that is not finite stands as none.
namespace layer_value {
inline FieldValue number_value(double value, int digits = 6) { return std::isfinite(value) ? FieldValue(std::stod(significant(value, digits))) : FieldValue(); }
inline FieldValue whole_value(std::size_t value) { return static_cast<std::int64_t>(value); }
inline FieldValue minutes_value(double s) { return std::stod(fixed_decimals(s / 60.0, 4)); }
inline FieldValue yes_no_value(bool holds) { return std::string(holds ? "yes" : "no"); }
inline FieldValue square_metres_of(FixedArea area) { return std::stod(fixed_decimals(from_fixed_area(area), 1)); }
}  // namespace layer_value

/// All features drawn in one way.
inline LayerStyle alike(LayerLook look, std::string label_field = {}) { return {.looks = {std::move(look)}, .label_field = std::move(label_field)}; }

}  // namespace rillclock
