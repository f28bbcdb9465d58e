#include <array>
#include <cmath>
#include <map>
#include <memory>

#include "rillclock/core/error.hpp"
#include "rillclock/hydraulics/shallow_flow.hpp"
#include "rillclock/hydraulics/sheet_flow.hpp"
#include "rillclock/io/cover_file.hpp"
#include "rillclock/io/text_file.hpp"
#include "cover_areas.hpp"
#include "read_classes.hpp"
#include "read_soil.hpp"
#include "study_data.hpp"

namespace rillclock {
namespace {

constexpr std::size_t most_classes = 255;

/// Velocity at slope 1; a chart, where it times the class, counts before it.
Speed shallow_k(const CoverClass& cover, ShallowRule rule) {
    switch (rule) {
        case ShallowRule::by_cover:
        case ShallowRule::chart: return cover.shallow_k;
        case ShallowRule::paved_and_unpaved: return cover.paved ? tr55_paved_k : tr55_unpaved_k;
    }
    return {};
}

/// The hydraulics of the book's classes under a study; what a class lacks is an error only where the raster has that class.
class Hydraulics {
public:
    explicit Hydraulics(const Study& study) : study_(study) {
        if (study.timing.velocity_chart) chart_ = parse_velocity_table(read_text(located(study, *study.timing.velocity_chart)), *study.timing.velocity_chart);
    }

    [[nodiscard]] SurfaceHydraulics of(const CoverClass& cover, bool occurs) const {
        SurfaceHydraulics made{.sheet_n = cover.n_typical,
                               .shallow_k = shallow_k(cover, study_.timing.shallow),
                               .water_depth = cover.water_depth};
        if (!occurs || cover.is_open_water()) return made;
        if (study_.timing.sheet_takes_runoff) made.sheet_factor = kinematic_runoff_factor(sheet_runoff(cover));
        if (chart_) made.shallow_line = std::make_shared<const VelocityLine>(line(cover));
        return made;
    }

    /// The shares of the rain that run off a class, by soil (`CellSoil`), for the soils that occur; all of it from open water for which
    /// the book says nothing.
    [[nodiscard]] std::array<double, cell_soils> runoff_of(const CoverClass& cover, const std::vector<CellSoil>& soils) const {
        std::array<double, cell_soils> shares{};
        for (const CellSoil soil : soils) {
            const std::optional<SoilGroup> group = group_of(soil);
            const bool all_runs_off = cover.is_open_water() && !cover.coefficient(group);
            shares[static_cast<std::size_t>(soil)] = all_runs_off ? 1.0 : coefficient(cover, group, "channel flow by the design storm");
        }
        return shares;
    }

private:
    [[nodiscard]] double sheet_runoff(const CoverClass& cover) const {
        const double c = coefficient(cover, study_.surface.soil_group, "sheet_rain = \"runoff\"");
        if (c > 0) return c;
        throw input_error("sheet_rain = \"runoff\" needs a runoff coefficient above 0 of every class, and the cover book '" + study_.surface.book +
                          "' has 0 for class " + std::to_string(cover.code) + " (" + cover.name + "); give it a small one");
    }

    [[nodiscard]] double coefficient(const CoverClass& cover, const std::optional<SoilGroup>& group, const std::string& asked_by) const {
        if (const std::optional<double> c = cover.coefficient(group)) return *c;
        throw input_error(asked_by + " needs a runoff coefficient of every class, and the cover book '" + study_.surface.book + "' has none for class " +
                          std::to_string(cover.code) + " (" + cover.name + "); give it in the column c, or c_a to c_d where soil groups are known");
    }

    [[nodiscard]] const VelocityLine& line(const CoverClass& cover) const {
        if (const VelocityLine* found = chart_->find(cover.chart_line)) return *found;
        std::string lines;
        for (const VelocityLine& known : chart_->lines) lines += (lines.empty() ? "" : ", ") + known.surface;
        throw input_error("the chart '" + *study_.timing.velocity_chart + "' has no line \"" + cover.chart_line + "\" for class " +
                          std::to_string(cover.code) + " (" + cover.name + "); its lines are " + lines +
                          "; name one of them in the cover book's column chart_line");
    }

    const Study& study_;
    std::optional<VelocityTable> chart_;
};

/// The position of a class in the book.
std::optional<std::uint8_t> position_of(const CoverBook& book, std::int32_t code) {
    const CoverClass* found = book.find(code);
    if (found == nullptr) return std::nullopt;
    return static_cast<std::uint8_t>(found - book.classes().data());
}

/// Turns class codes into positions in the book while counting them; what the book does not know goes to the fallback class.
class Reading {
public:
    Reading(const Study& study, const CoverBook& book, const ElevationStore& elevations)
        : book_(book), elevations_(elevations) {
        for (const CoverClass& known : book.classes()) positions_[known.code] = *position_of(book, known.code);
        if (!study.surface.fallback_class) return;
        fallback_ = position_of(book, *study.surface.fallback_class);
        if (!fallback_) {
            throw input_error("fallback_class = " + std::to_string(*study.surface.fallback_class) +
                              " is not in the cover book '" + book.name() + "'; name one of its classes");
        }
    }

    std::uint8_t position(Cell cell, std::int32_t code) {
        if (std::isnan(elevations_[cell])) return 0;
        // Cover comes in patches: most cells have the class of the cell before.
        if (code != last_code_ || last_count_ == nullptr) {
            last_code_ = code;
            last_count_ = &counts_[code];
            const auto known = positions_.find(code);
            last_position_ = known != positions_.end() ? known->second : fallback_.value_or(0);
        }
        ++*last_count_;
        return last_position_;
    }

    /// What the book does not know, in words, "250 (3 cells), none (12 cells)"; empty where it knows all.
    [[nodiscard]] std::string unknown() const {
        std::string list;
        for (const auto& [code, cells] : counts_) {
            if (positions_.contains(code)) continue;
            const std::string name = code == no_class ? "no cover at all" : "class " + std::to_string(code);
            list += (list.empty() ? "" : ", ") + name + " (" + std::to_string(cells) + (cells == 1 ? " cell)" : " cells)");
        }
        return list;
    }

    [[nodiscard]] std::vector<ClassCount> known_classes() const {
        std::vector<ClassCount> classes;
        for (const auto& [code, cells] : counts_) {
            if (positions_.contains(code)) classes.push_back({code, cells});
        }
        return classes;
    }

    /// Whether the class is of any cell, in its own name or as the fallback.
    [[nodiscard]] bool has_met(int code) const {
        return counts_.contains(code) || (fallback_ == positions_.at(code) && !unknown().empty());
    }

    [[nodiscard]] bool has_fallback() const { return fallback_.has_value(); }

private:
    const CoverBook& book_;
    const ElevationStore& elevations_;
    std::map<std::int32_t, std::uint8_t> positions_;
    std::map<std::int32_t, std::int64_t> counts_;
    std::optional<std::uint8_t> fallback_;
    std::int32_t last_code_ = 0;
    std::int64_t* last_count_ = nullptr;
    std::uint8_t last_position_ = 0;
};

/// `cells` come with what is laid over the raster (`lay_over`), and leave as positions in the book.
void read_positions(BlockSource<std::int32_t>& source, const CoverBook& book, Reading& reading, Raster<std::uint8_t>& cells, const Progress& progress) {
    for_each_class(source, progress, "reading land cover", [&](Cell cell, std::int32_t code) {
        const std::uint8_t over = cells[cell];
        cells[cell] = reading.position(cell, over == 0 ? code : book.classes()[over - 1U].code);
    });
}

/// Unknown classes are an error unless the study has named what to take for them; then they are told.
Notices unknown_notices(const Study& study, const Reading& reading) {
    const std::string unknown = reading.unknown();
    if (unknown.empty()) return {};
    if (!reading.has_fallback()) {
        throw input_error("the land cover '" + study.surface.cover + "' has what the book '" + study.surface.book +
                          "' does not know: " + unknown + "; add the classes to the book, or name a class for them: " +
                          "fallback_class = CODE under [surface], or --fallback-class CODE");
    }
    return {{.code = "cover-unknown", .text = "the fallback class " + std::to_string(*study.surface.fallback_class) +
                                              " was taken for what the book does not know: " + unknown}};
}

/// The soils of all cells.
std::vector<CellSoil> soils_of(const SurfaceData& data) {
    std::vector<CellSoil> soils;
    for (const SoilCount& count : data.soils) soils.push_back(count.soil);
    if (soils.empty()) soils.push_back(data.table.soil_everywhere);
    return soils;
}

}  // namespace

CoverBook read_book(const Study& study) {
    if (is_built_in_book(study.surface.book)) return built_in_book(study.surface.book);
    const std::string file = located(study, study.surface.book);
    return parse_cover_book(read_text(file), study.surface.book);
}

void require_cover(const Study& study) {
    const ElevationFile terrain = open_elevation_of(study);
    const CoverBook book = read_book(study);
    CoverOptions options;
    options.band = study.surface.band;
    (void)open_cover(located(study, study.surface.cover), options, terrain.grid(), terrain.system);
    (void)read_cover_areas(study, book, terrain.system);
}

CoverReading read_cover(const Study& study, CoverBook book, BlockSource<std::int32_t>& source, const ElevationStore& elevations,
                        Raster<std::uint8_t> over, const Progress& progress) {
    if (book.classes().size() > most_classes) {
        throw input_error("the cover book '" + book.name() + "' has " + std::to_string(book.classes().size()) +
                          " classes, more than the 255 that are served; leave out those the raster does not use");
    }
    const Hydraulics hydraulics(study);
    Reading reading(study, book, elevations);
    SurfaceData data{.book = book, .table = {}, .classes = {}, .soils = {}, .runoff = {}, .notices = {}};
    data.table.index = std::move(over);
    read_positions(source, book, reading, data.table.index, progress);
    data.classes = reading.known_classes();
    data.notices = unknown_notices(study, reading);
    std::vector<bool> occurs;
    for (const CoverClass& cover : book.classes()) {
        occurs.push_back(reading.has_met(cover.code));
        data.table.classes.push_back(hydraulics.of(cover, occurs.back()));
    }
    return {.surface = std::move(data), .occurs = std::move(occurs)};
}

SurfaceData read_surface(const Study& study, const TerrainData& terrain, const Progress& progress) {
    CoverOptions options;
    options.band = study.surface.band;
    CoverFile file = open_cover(located(study, study.surface.cover), options, terrain.grid, terrain.system);
    CoverBook book = read_book(study);
    const CoverAreas areas = read_cover_areas(study, book, terrain.system);
    Raster<std::uint8_t> over(terrain.grid.rows, terrain.grid.columns);
    const Notices laid_over = lay_over(study, areas, terrain.grid, over);
    CoverReading reading = read_cover(study, std::move(book), *file.source, terrain.elevations, std::move(over), progress);
    SurfaceData& data = reading.surface;
    data.notices.insert(data.notices.begin(), laid_over.begin(), laid_over.end());
    data.notices.insert(data.notices.begin(), file.notices.begin(), file.notices.end());
    read_soil(study, terrain, data, progress);
    if (!study.timing.channel.design_storm) return std::move(data);
    const Hydraulics hydraulics(study);
    const std::vector<CellSoil> soils = soils_of(data);
    for (std::size_t i = 0; i < data.book.classes().size(); ++i) {
        const auto runoff = hydraulics.runoff_of(data.book.classes()[i], reading.occurs[i] ? soils : std::vector<CellSoil>{});
        data.runoff.insert(data.runoff.end(), runoff.begin(), runoff.end());
    }
    return std::move(data);
}

}  // namespace rillclock
