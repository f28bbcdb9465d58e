#include "rillclock/io/vector_output.hpp"

#include <ogrsf_frmts.h>

#include <optional>

#include "layer_style.hpp"
#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"
#include "thread_option.hpp"

namespace rillclock {
namespace {

/// The time that stands in the file in place of the time of day: the same features give the same bytes.
constexpr const char* no_time_of_day = "2000-01-01T00:00:00.000Z";

OGRFieldType ogr_type(FieldKind kind) {
    switch (kind) {
        case FieldKind::text: return OFTString;
        case FieldKind::number: return OFTReal;
        case FieldKind::whole_number: return OFTInteger64;
    }
    return OFTString;
}

OGRwkbGeometryType ogr_type(LayerGeometry geometry) {
    switch (geometry) {
        case LayerGeometry::points: return wkbPoint;
        case LayerGeometry::lines: return wkbMultiLineString;
        case LayerGeometry::polygons: return wkbMultiPolygon;
    }
    return wkbUnknown;
}

template <class Curve>
void add_corners(Curve& curve, const Line& line) {
    curve.setNumPoints(static_cast<int>(line.size()));
    for (std::size_t i = 0; i < line.size(); ++i) curve.setPoint(static_cast<int>(i), line[i].x, line[i].y);
}

using Geometry = std::unique_ptr<OGRGeometry>;

Geometry ogr_geometry(const Place& place) { return std::make_unique<OGRPoint>(place.x, place.y); }

Geometry ogr_geometry(const std::vector<Line>& lines) {
    if (lines.empty()) return nullptr;
    auto all = std::make_unique<OGRMultiLineString>();
    for (const Line& line : lines) {
        OGRLineString part;
        add_corners(part, line);
        all->addGeometry(&part);
    }
    return all;
}

Geometry ogr_geometry(const std::vector<Polygon>& polygons) {
    if (polygons.empty()) return nullptr;
    auto all = std::make_unique<OGRMultiPolygon>();
    for (const Polygon& polygon : polygons) {
        auto part = std::make_unique<OGRPolygon>();
        for (const Line& ring : polygon.rings) {
            auto closed = std::make_unique<OGRLinearRing>();
            add_corners(*closed, ring);
            closed->closeRings();
            part->addRingDirectly(closed.release());
        }
        all->addGeometryDirectly(part.release());
    }
    return all;
}

std::string quoted(const std::string& text) {
    std::string safe = "'";
    for (const char c : text) safe += c == '\'' ? "''" : std::string(1, c);
    return safe + "'";
}

}  // namespace

/// The GDAL side of a GeoPackage.
class VectorFile::Package {
public:
    Package(const std::filesystem::path& path, const ReferenceSystem& system)
        : date_("OGR_CURRENT_DATE", no_time_of_day), begun_at_(session_.mark()), path_(path) {
        reference_.SetFromUserInput(system.horizontal_wkt().c_str(), OGRSpatialReference::SET_FROM_USER_INPUT_LIMITATIONS);
        reference_.SetAxisMappingStrategy(OAMS_TRADITIONAL_GIS_ORDER);
        GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("GPKG");
        if (!driver) throw machine_error("GDAL has no GeoPackage driver here; install the whole of GDAL.");
        dataset_.reset(driver->Create(path_.c_str(), 0, 0, 0, GDT_Unknown, nullptr));
        throw_if_failed(dataset_ != nullptr);
        throw_if_failed(dataset_->StartTransaction(FALSE) == OGRERR_NONE);
    }
    ~Package() {
        dataset_.reset();
        std::error_code ignored;
        if (!is_closed_) std::filesystem::remove(path_, ignored);
    }
    Package(const Package&) = delete;
    Package& operator=(const Package&) = delete;

    void begin_layer(const LayerDescription& description) {
        layers_.push_back({description, 0});
        CPLStringList options;
        options.SetNameValue("DESCRIPTION", description.description.c_str());
        options.SetNameValue("GEOMETRY_NAME", "geom");
        options.SetNameValue("SPATIAL_INDEX", "YES");
        layer_ = dataset_->CreateLayer(description.name.c_str(), &reference_, ogr_type(description.geometry), options.List());
        throw_if_failed(layer_ != nullptr);
        for (const LayerField& field : description.fields) {
            OGRFieldDefn definition(field.name.c_str(), ogr_type(field.kind));
            throw_if_failed(layer_->CreateField(&definition) == OGRERR_NONE);
        }
    }

    void add(const LayerShape& shape, const std::vector<FieldValue>& values) {
        const OGRFeatureUniquePtr feature(OGRFeature::CreateFeature(layer_->GetLayerDefn()));
        for (std::size_t i = 0; i < values.size(); ++i) set(*feature, static_cast<int>(i), values[i]);
        std::visit([&](const auto& own) {
            if (Geometry geometry = ogr_geometry(own)) feature->SetGeometryDirectly(geometry.release());
        }, shape);
        throw_if_failed(layer_->CreateFeature(feature.get()) == OGRERR_NONE);
        ++layers_.back().features;
    }

    void close() {
        throw_if_failed(dataset_->CommitTransaction() == OGRERR_NONE);
        for (const Written& layer : layers_) index(layer.description);
        describe_fields();
        store_styles();
        dataset_.reset();
        throw_if_failed(true);
        verify();
        is_closed_ = true;
    }

private:
    struct Written {
        LayerDescription description;
        GIntBig features = 0;
    };

    static void set(OGRFeature& feature, int field, const FieldValue& value) {
        if (const auto* text = std::get_if<std::string>(&value)) feature.SetField(field, text->c_str());
        if (const auto* number = std::get_if<double>(&value)) feature.SetField(field, *number);
        if (const auto* whole = std::get_if<std::int64_t>(&value)) feature.SetField(field, static_cast<GIntBig>(*whole));
    }

    void sql(const std::string& statement) {
        OGRLayer* answer = dataset_->ExecuteSQL(statement.c_str(), nullptr, nullptr);
        if (answer) dataset_->ReleaseResultSet(answer);
        throw_if_failed(true);
    }

    void index(const LayerDescription& layer) {
        if (layer.indexed_field.empty()) return;
        sql("CREATE INDEX \"" + layer.name + "_by_" + layer.indexed_field + "\" ON \"" + layer.name + "\" (\"" + layer.indexed_field + "\")");
    }

    /// What fields mean, in the table that the standard's schema extension has for it.
    void describe_fields() {
        sql("CREATE TABLE gpkg_data_columns (table_name TEXT NOT NULL, column_name TEXT NOT NULL, name TEXT, title TEXT, description TEXT, "
            "mime_type TEXT, constraint_name TEXT, CONSTRAINT pk_gdc PRIMARY KEY (table_name, column_name), "
            "CONSTRAINT gdc_tn UNIQUE (table_name, name))");
        sql("CREATE TABLE gpkg_data_column_constraints (constraint_name TEXT NOT NULL, constraint_type TEXT NOT NULL, value TEXT, min NUMERIC, "
            "min_is_inclusive BOOLEAN, max NUMERIC, max_is_inclusive BOOLEAN, description TEXT, "
            "CONSTRAINT gdcc_ntv UNIQUE (constraint_name, constraint_type, value))");
        for (const char* table : {"gpkg_data_columns", "gpkg_data_column_constraints"}) {
            sql("INSERT INTO gpkg_extensions (table_name, column_name, extension_name, definition, scope) VALUES ('" + std::string(table) +
                "', NULL, 'gpkg_schema', 'http://www.geopackage.org/spec121/#extension_schema', 'read-write')");
        }
        for (const Written& layer : layers_) {
            for (const LayerField& field : layer.description.fields) {
                sql("INSERT INTO gpkg_data_columns (table_name, column_name, name, title, description) VALUES (" + quoted(layer.description.name) +
                    ", " + quoted(field.name) + ", " + quoted(field.name) + ", " + quoted(field.name) + ", " + quoted(field.description) + ")");
            }
        }
    }

    void store_styles() {
        sql("CREATE TABLE layer_styles (id INTEGER PRIMARY KEY AUTOINCREMENT NOT NULL, f_table_catalog TEXT(256), f_table_schema TEXT(256), "
            "f_table_name TEXT(256), f_geometry_column TEXT(256), styleName TEXT(30), styleQML TEXT, styleSLD TEXT, useAsDefault BOOLEAN, "
            "description TEXT, owner TEXT(30), ui TEXT(30), update_time DATETIME)");
        sql("INSERT INTO gpkg_contents (table_name, data_type, identifier, description, last_change) VALUES ('layer_styles', 'attributes', "
            "'layer_styles', 'how the layers are drawn', '2000-01-01T00:00:00.000Z')");
        for (const Written& layer : layers_) {
            const LayerDescription& own = layer.description;
            if (own.style.looks.empty()) continue;
            sql("INSERT INTO layer_styles (f_table_catalog, f_table_schema, f_table_name, f_geometry_column, styleName, styleQML, styleSLD, "
                "useAsDefault, description, owner, update_time) VALUES ('', '', " + quoted(own.name) + ", 'geom', " + quoted(own.name) + ", " +
                quoted(style_qml(own)) + ", " + quoted(style_sld(own)) + ", 1, " + quoted(own.description) +
                ", '', '2000-01-01T00:00:00.000Z')");
        }
    }

    /// Opens the file anew and counts what it holds.
    void verify() {
        const char* const drivers[] = {"GPKG", nullptr};
        const GDALDatasetUniquePtr written(GDALDataset::Open(path_.c_str(), GDAL_OF_VECTOR | GDAL_OF_READONLY, drivers));
        throw_if_failed(written != nullptr);
        for (const Written& layer : layers_) {
            OGRLayer* found = written->GetLayerByName(layer.description.name.c_str());
            throw_if_failed(found != nullptr && found->GetFeatureCount() == layer.features);
        }
    }

    void throw_if_failed(bool worked) const {
        const std::string what = "The file " + path_.string() + " cannot be written; look at the free space and the permissions of its folder";
        session_.throw_if_failed(begun_at_, Fault::machine, what);
        if (!worked) throw machine_error(what + ".");
    }

    GdalSession session_;
    ThreadOption date_;
    GdalMark begun_at_;
    std::filesystem::path path_;
    OGRSpatialReference reference_;
    GDALDatasetUniquePtr dataset_;
    OGRLayer* layer_ = nullptr;
    std::vector<Written> layers_;
    bool is_closed_ = false;
};

VectorFile::VectorFile(const std::filesystem::path& path, const ReferenceSystem& system)
    : package_(std::make_unique<Package>(path, system)) {}
VectorFile::~VectorFile() = default;

void VectorFile::begin_layer(const LayerDescription& layer) { package_->begin_layer(layer); }
void VectorFile::add(const LayerShape& shape, const std::vector<FieldValue>& values) { package_->add(shape, values); }
void VectorFile::close() { package_->close(); }

}  // namespace rillclock
