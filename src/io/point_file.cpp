#include "rillclock/io/point_file.hpp"

#include <ogrsf_frmts.h>

#include <algorithm>
#include <cmath>
#include <map>
#include <memory>
#include <utility>

#include "layer_system.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/core/trimmed.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "vector_file.hpp"

namespace rillclock {
namespace {

class PointReader {
public:
    PointReader(const std::filesystem::path& path, const PointOptions& options, const ReferenceSystem& target)
        : path_(path), options_(options), target_(target) {}

    PointFile read() {
        const GdalMark before = session_.mark();
        dataset_ = open_vectors({.path = path_, .called = called(), .wanted = "points"}, session_);
        layer_ = layer_of(*dataset_, {.asked = options_.layer, .called = called(), .key = "layer", .path = path_});
        choose_field();
        Transformation to_target(system(), target_);
        while (const OGRFeatureUniquePtr feature{layer_->GetNextFeature()}) add(*feature, to_target);
        session_.throw_if_failed(before, Fault::inputs,
                                 "The " + called() + " cannot be read to its end; copy or make it again");
        check_result();
        return std::move(result_);
    }

private:
    [[nodiscard]] std::string called() const { return "point file " + path_.string(); }

    [[nodiscard]] std::string field_list() const {
        std::string list;
        const OGRFeatureDefn& definition = *layer_->GetLayerDefn();
        for (int i = 0; i < definition.GetFieldCount(); ++i)
            list += (i == 0 ? "" : ", ") + std::string(definition.GetFieldDefn(i)->GetNameRef());
        return list.empty() ? "none" : list;
    }

    [[nodiscard]] int field_called(const std::string& name) const {
        const int field = layer_->GetLayerDefn()->GetFieldIndex(name.c_str());
        if (field >= 0) return field;
        throw input_error("The " + called() + " has no field \"" + name + "\"; its fields are " + field_list() + ".");
    }

    void choose_field() {
        for (const std::string& name : options_.fields) asked_.push_back(field_called(name));
        const OGRFeatureDefn& definition = *layer_->GetLayerDefn();
        if (options_.name_field) {
            field_ = field_called(*options_.name_field);
            return;
        }
        for (const char* usual : {"name", "label", "id"})
            if (field_ < 0) field_ = definition.GetFieldIndex(usual);
    }

    [[nodiscard]] ReferenceSystem system() const {
        return system_of_layer(*layer_, called(), path_);
    }

    void leave_out(const std::string& why) {
        result_.notices.push_back(
            {.code = "point-left-out",
             .text = "Feature " + std::to_string(number_) + " of the " + called() + " " + why + ", and is left out."});
    }

    /// The one point of a feature, or none after a notice.
    [[nodiscard]] std::optional<Place> place_of(const OGRFeature& feature) {
        const OGRGeometry* geometry = feature.GetGeometryRef();
        if (!geometry || geometry->IsEmpty()) return leave_out("has no place"), std::nullopt;
        if (wkbFlatten(geometry->getGeometryType()) == wkbMultiPoint &&
            geometry->toMultiPoint()->getNumGeometries() == 1)
            geometry = geometry->toMultiPoint()->getGeometryRef(0);
        if (wkbFlatten(geometry->getGeometryType()) != wkbPoint)
            return leave_out(std::string("is a ") + geometry->getGeometryName() + " and not a point"), std::nullopt;
        const OGRPoint& point = *geometry->toPoint();
        if (!std::isfinite(point.getX()) || !std::isfinite(point.getY()))
            return leave_out("has coordinates that are not finite"), std::nullopt;
        return Place{point.getX(), point.getY()};
    }

    void add(OGRFeature& feature, Transformation& to_target) {
        ++number_;
        const std::optional<Place> given = place_of(feature);
        if (!given) return;
        const std::optional<Place> place = to_target(*given);
        if (!place) return leave_out("lies where " + target_.name() + " has no coordinates");
        NamedPlace point{.name = name_of(feature), .place = *place, .feature = number_};
        for (const int field : asked_) point.fields.push_back(text_of(feature, field));
        result_.points.push_back(std::move(point));
    }

    /// Without blanks at its ends; empty where the feature has no value.
    [[nodiscard]] static std::string text_of(OGRFeature& feature, int field) {
        const std::string given = feature.IsFieldSetAndNotNull(field) ? feature.GetFieldAsString(field) : "";
        return std::string(trimmed(given));
    }

    [[nodiscard]] std::string name_of(OGRFeature& feature) const {
        const std::string given = field_ >= 0 ? text_of(feature, field_) : "";
        return given.empty() ? "point " + std::to_string(number_) : given;
    }

    void check_result() const {
        if (number_ == 0)
            throw input_error(
                "The " + called() + " holds no features in layer " + layer_->GetName() +
                "; draw the design points there, or leave the file out to have points set where water leaves "
                "the data.");
        if (result_.points.empty())
            throw input_error("The " + called() + " holds no point that can be used: " + result_.notices.front().text);
        check_names();
    }

    void check_names() const {
        std::map<std::string, int> counts;
        for (const NamedPlace& point : result_.points) ++counts[point.name];
        std::string twice;
        for (const auto& [name, count] : counts)
            if (count > 1) twice += (twice.empty() ? "\"" : ", \"") + name + "\" (" + std::to_string(count) + " times)";
        if (!twice.empty())
            throw input_error("Points of the " + called() + " have the same name: " + twice +
                              "; give each its own, or name another field with name = \"...\" (its fields are " +
                              field_list() + ").");
    }

    GdalSession session_;
    std::filesystem::path path_;
    PointOptions options_;
    ReferenceSystem target_;
    GDALDatasetUniquePtr dataset_;
    OGRLayer* layer_ = nullptr;
    int field_ = -1;
    std::vector<int> asked_;
    std::int64_t number_ = 0;
    PointFile result_;
};

}  // namespace

PointFile read_points(const std::filesystem::path& path, const PointOptions& options, const ReferenceSystem& target) {
    return PointReader(path, options, target).read();
}

}  // namespace rillclock
