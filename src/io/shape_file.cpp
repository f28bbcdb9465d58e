#include "rillclock/io/shape_file.hpp"

#include <ogrsf_frmts.h>

#include <cmath>
#include <memory>
#include <utility>

#include "layer_system.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "vector_file.hpp"

namespace rillclock {
namespace {

/// The shapes of one feature, taken together or not at all.
struct Taken {
    std::vector<Line> lines;
    std::vector<Place> points;
    std::vector<Polygon> polygons;
    std::string fault;   ///< why it is left out; empty where it is not
};

class ShapeReader {
public:
    ShapeReader(const std::filesystem::path& path, const ShapeWish& wish, const ReferenceSystem& target)
        : path_(path), called_("file of " + wish.role + " " + path.string()), wish_(wish), target_(target) {}

    ShapeFile read() {
        const GdalMark before = session_.mark();
        dataset_ = open_vectors({.path = path_, .called = called_, .wanted = wanted()}, session_);
        layer_ = layer_of(*dataset_, {.asked = wish_.layer, .called = called_, .key = wish_.layer_key, .path = path_});
        check_fields();
        choose_field();
        Transformation to_target(system(), target_);
        while (const OGRFeatureUniquePtr feature{layer_->GetNextFeature()}) add(*feature, to_target);
        session_.throw_if_failed(before, Fault::inputs, "The " + called_ + " cannot be read to its end; copy or make it again");
        check_result();
        return std::move(result_);
    }

private:
    [[nodiscard]] std::string wanted() const {
        if (wish_.kinds == ShapeKinds::lines) return "lines";
        return wish_.kinds == ShapeKinds::polygons ? "polygons" : "points and polygons";
    }

    void choose_field() {
        const OGRFeatureDefn& definition = *layer_->GetLayerDefn();
        for (const std::string_view usual : wish_.usual_text_fields) {
            if (wish_.text_field.empty() && field_ < 0) field_ = definition.GetFieldIndex(std::string(usual).c_str());
        }
        if (wish_.text_field.empty()) return;
        field_ = definition.GetFieldIndex(wish_.text_field.c_str());
        if (field_ >= 0) return;
        std::string list;
        for (int i = 0; i < definition.GetFieldCount(); ++i)
            list += (i == 0 ? "" : ", ") + std::string(definition.GetFieldDefn(i)->GetNameRef());
        throw input_error("The " + called_ + " has no field \"" + wish_.text_field + "\"; its fields are " + (list.empty() ? "none" : list) + ".");
    }

    [[nodiscard]] std::string text_of(OGRFeature& feature) const {
        return field_ >= 0 && feature.IsFieldSetAndNotNull(field_) ? feature.GetFieldAsString(field_) : "";
    }

    [[nodiscard]] ReferenceSystem system() const {
        return system_of_layer(*layer_, called_, path_);
    }

    void add(OGRFeature& feature, Transformation& to_target) {
        ++number_;
        Taken taken;
        const OGRGeometry* geometry = feature.GetGeometryRef();
        if (!geometry || geometry->IsEmpty()) {
            taken.fault = "has no shape";
        } else {
            const std::unique_ptr<OGRGeometry> straight(geometry->getLinearGeometry());
            take(*straight, to_target, taken);
        }
        if (!taken.fault.empty()) return leave_out(taken.fault);
        ++result_.features;
        result_.feature_of_line.insert(result_.feature_of_line.end(), taken.lines.size(), static_cast<std::size_t>(number_));
        result_.numbers.insert(result_.numbers.end(), taken.lines.size(), numbers_of(feature));
        result_.feature_of_polygon.insert(result_.feature_of_polygon.end(), taken.polygons.size(), static_cast<std::size_t>(number_));
        result_.polygon_texts.insert(result_.polygon_texts.end(), taken.polygons.size(), text_of(feature));
        std::move(taken.lines.begin(), taken.lines.end(), std::back_inserter(result_.lines));
        std::move(taken.points.begin(), taken.points.end(), std::back_inserter(result_.points));
        std::move(taken.polygons.begin(), taken.polygons.end(), std::back_inserter(result_.polygons));
    }

    void check_fields() const {
        const OGRFeatureDefn& definition = *layer_->GetLayerDefn();
        for (const std::string& field : wish_.fields) {
            const int place = definition.GetFieldIndex(field.c_str());
            if (place < 0) continue;
            const OGRFieldType type = definition.GetFieldDefn(place)->GetType();
            if (type == OFTInteger || type == OFTInteger64 || type == OFTReal) continue;
            throw input_error("The field " + field + " of the " + called_ + " holds no numbers; make it a field of numbers, or give it another name.");
        }
    }

    [[nodiscard]] std::vector<std::optional<double>> numbers_of(const OGRFeature& feature) const {
        std::vector<std::optional<double>> numbers;
        for (const std::string& field : wish_.fields) {
            const int place = feature.GetFieldIndex(field.c_str());
            const bool is_there = place >= 0 && feature.IsFieldSetAndNotNull(place);
            numbers.push_back(is_there ? std::optional(feature.GetFieldAsDouble(place)) : std::nullopt);
        }
        return numbers;
    }

    /// Collections may hold collections; GDAL itself reads them one within the other.
    void take(const OGRGeometry& geometry, Transformation& to_target, Taken& taken) const {   // NOLINT(misc-no-recursion)
        const OGRwkbGeometryType type = wkbFlatten(geometry.getGeometryType());
        const bool lines = wish_.kinds == ShapeKinds::lines;
        if (OGR_GT_IsSubClassOf(type, wkbGeometryCollection)) {
            for (const OGRGeometry* part : *geometry.toGeometryCollection()) take(*part, to_target, taken);
        } else if (lines && type == wkbLineString) {
            taken.lines.push_back(line_of(*geometry.toLineString(), to_target, taken));
        } else if (wish_.kinds == ShapeKinds::points_and_polygons && type == wkbPoint) {
            OGRLineString alone;
            alone.addPoint(geometry.toPoint());
            taken.points.push_back(line_of(alone, to_target, taken).front());
        } else if (!lines && type == wkbPolygon) {
            Polygon polygon;
            for (const OGRLinearRing* ring : *geometry.toPolygon()) polygon.rings.push_back(line_of(*ring, to_target, taken));
            taken.polygons.push_back(std::move(polygon));
        } else {
            taken.fault = std::string("is a ") + geometry.getGeometryName() + ", and only " + wanted() + " have a meaning here";
        }
    }

    Line line_of(const OGRSimpleCurve& curve, Transformation& to_target, Taken& taken) const {
        Line line;
        for (int i = 0; i < curve.getNumPoints(); ++i) {
            const Place given{curve.getX(i), curve.getY(i)};
            const bool finite = std::isfinite(given.x) && std::isfinite(given.y);
            if (!finite) taken.fault = "has corners that are not finite";
            const std::optional<Place> place = finite ? to_target(given) : std::nullopt;
            if (finite && !place) taken.fault = "has corners where " + target_.name() + " has no coordinates";
            line.push_back(place.value_or(Place{}));
        }
        return line;
    }

    void leave_out(const std::string& why) {
        result_.notices.push_back({.code = "shape-left-out",
                                   .text = "Feature " + std::to_string(number_) + " of the " + called_ + " " + why + "; it is left out."});
    }

    void check_result() const {
        if (number_ == 0) throw input_error("The " + called_ + " holds no features; draw them, or leave the file out of the study.");
        if (result_.features == 0) {
            throw input_error("The " + called_ + " holds nothing that can be used: " + result_.notices.front().text);
        }
    }

    GdalSession session_;
    std::filesystem::path path_;
    std::string called_;
    const ShapeWish& wish_;
    const ReferenceSystem& target_;
    int field_ = -1;
    GDALDatasetUniquePtr dataset_;
    OGRLayer* layer_ = nullptr;
    std::int64_t number_ = 0;
    ShapeFile result_;
};

}  // namespace

ShapeFile read_shapes(const std::filesystem::path& path, const ShapeWish& wish, const ReferenceSystem& target) {
    return ShapeReader(path, wish, target).read();
}

}  // namespace rillclock
