#include "rillclock/catchment/study_regions.hpp"

#include <algorithm>
#include <cmath>

#include "rillclock/core/error.hpp"
#include "rillclock/core/number_text.hpp"

namespace rillclock {
namespace {

RegionLabel band_label(PointNumber number, std::uint32_t band) { return (static_cast<RegionLabel>(number) << 32U) | (band + 1U); }

}  // namespace

std::size_t most_isochrone_bands(std::size_t points) {
    constexpr std::size_t of_few_points = 10'000;
    constexpr std::size_t of_each = 30;
    return std::max(of_few_points, of_each * points);
}

std::string isochrone_step_text(Duration step) {
    return step < minutes(1) ? significant(in_seconds(step)) + " s" : significant(in_minutes(step)) + " min";
}

StudyRegions::StudyRegions(const Grid& grid, const Ground& ground, const PointTree& tree, std::vector<double> minutes_to_last,
                           std::optional<IsochroneRules> isochrones)
    : grid_(grid), ground_(ground), tree_(tree), minutes_to_last_(std::move(minutes_to_last)),
      isochrones_(std::move(isochrones)), place_(tree.next.size() + 1, 0), first_place_(tree.next.size() + 1, 0), owners_(grid.columns),
      owner_row_(static_cast<std::size_t>(grid.columns)), subareas_{RegionBorders(grid.columns), {}, owner_row_} {
    number_tree();
    if (isochrones_) begin_catchments();
}

/// Puts each catchment that has bands on a level with those that neither hold it nor lie in it: that of a last point on the first, one
/// within it on the next.
void StudyRegions::begin_catchments() {
    const std::size_t points = tree_.next.size();
    std::vector<bool> is_asked(points + 1, false);
    for (const PointNumber number : isochrones_->catchments) is_asked[number] = true;
    std::vector<std::vector<PointNumber>> held_by(points + 1);   // by owner: the catchments with bands that it lies in, the outermost first
    for (auto number = tree_.upstream_first.rbegin(); number != tree_.upstream_first.rend(); ++number) {
        const PointNumber next = tree_.next_of(*number);
        if (next != 0) held_by[*number] = held_by[next];
        if (next == 0 || is_asked[*number]) held_by[*number].push_back(*number);
        while (catchments_.size() < held_by[*number].size()) {
            catchments_.push_back({.point = std::vector<PointNumber>(points + 1, 0), .minutes_below = std::vector<double>(points + 1, 0.0),
                                   .bands = {RegionBorders(grid_.columns), {}, owner_row_}, .row = owner_row_});
        }
        for (std::size_t level = 0; level < held_by[*number].size(); ++level) {
            const PointNumber point = held_by[*number][level];
            catchments_[level].point[*number] = point;
            catchments_[level].minutes_below[*number] = minutes_to_last_[point - 1];
        }
    }
}

/// Gives every point its place, so that those which drain through a point have the places just before its own.
void StudyRegions::number_tree() {
    const std::size_t points = tree_.next.size();
    std::vector<RegionLabel> within(points + 1, 1);   // points that drain through each, itself included
    for (const PointNumber number : tree_.upstream_first) within[tree_.next_of(number)] += tree_.next_of(number) == 0 ? 0 : within[number];
    RegionLabel free = 1;
    std::vector<RegionLabel> free_in(points + 1, 0);  // the first place that is left within each
    for (auto number = tree_.upstream_first.rbegin(); number != tree_.upstream_first.rend(); ++number) {
        const PointNumber next = tree_.next_of(*number);
        RegionLabel& from = next == 0 ? free : free_in[next];
        first_place_[*number] = from;
        free_in[*number] = from;
        place_[*number] = from + within[*number] - 1;
        from += within[*number];
    }
}

void StudyRegions::label_row(std::span<const std::uint32_t> owners, std::span<const float> minutes) {
    const double step = isochrones_ ? in_minutes(isochrones_->step) : 1.0;
    for (std::size_t i = 0; i < owners.size(); ++i) {
        const PointNumber owner = owners[i] < place_.size() ? owners[i] : 0;
        owner_row_[i] = place_[owner];
        if (!isochrones_) continue;
        const auto band_of = [&](double time) { return static_cast<std::uint32_t>(std::clamp(time / step, 0.0, 4e9)); };
        const double time = static_cast<double>(minutes[i]);
        subareas_.row[i] = owner == 0 ? no_region : band_label(owner, band_of(time - minutes_to_last_[owner - 1]));
        for (CatchmentBands& catchments : catchments_) {
            const PointNumber point = catchments.point[owner];
            const std::uint32_t band = band_of(time - catchments.minutes_below[owner]);
            catchments.bands.row[i] = point == 0 ? no_region : band_label(point, band);
            catchments.row[i] = point == 0 ? no_region : band_label(owner, band);
        }
    }
}

/// Adds the area of each run of one label to what there is of it.
void StudyRegions::add_areas(const std::vector<RegionLabel>& row, FixedArea cell_area, std::unordered_map<RegionLabel, FixedArea>& areas) {
    for (auto begin = row.begin(); begin != row.end();) {
        const auto end = std::find_if(begin, row.end(), [&](RegionLabel label) { return label != *begin; });
        if (*begin != no_region) areas[*begin] += cell_area * (end - begin);
        begin = end;
    }
}

void StudyRegions::add_row(Bands& bands, std::int64_t row) const {
    bands.borders.add_row(bands.row);
    add_areas(bands.row, ground_.cell_area(row), bands.areas);
}

void StudyRegions::look(const RegionStrip& strip) {
    const auto columns = static_cast<std::size_t>(strip.window.columns);
    for (std::int64_t r = 0; r < strip.window.rows; ++r) {
        const std::size_t from = static_cast<std::size_t>(r) * columns;
        label_row(strip.owners.subspan(from, columns), strip.minutes.subspan(from, columns));
        owners_.add_row(owner_row_);
        if (!isochrones_) continue;
        add_row(subareas_, strip.window.row + r);
        for (CatchmentBands& catchments : catchments_) {
            add_row(catchments.bands, strip.window.row + r);
            add_areas(catchments.row, ground_.cell_area(strip.window.row + r), catchments.parts);
        }
    }
    if (isochrones_) check_bounds();
}

void StudyRegions::check_bounds() const {
    std::size_t bands = subareas_.areas.size();
    std::size_t pieces = subareas_.borders.pieces();
    for (const CatchmentBands& catchments : catchments_) {
        bands += catchments.bands.areas.size();
        pieces += catchments.bands.borders.pieces();
    }
    const std::size_t most_bands = most_isochrone_bands(tree_.next.size());
    if (bands <= most_bands && pieces <= isochrones_->most_pieces) return;
    throw input_error("isochrones every " + isochrone_step_text(isochrones_->step) + " have more than " +
                      (bands > most_bands ? std::to_string(most_bands) + " bands" : std::to_string(isochrones_->most_pieces) + " pieces of border") +
                      ", too many for a file of shapes; state a longer step in output.isochrones, or how many bands there may be, such as "
                      "\"12 bands\", or \"none\"");
}

void StudyRegions::finish() {
    owners_.finish();
    if (!isochrones_) return;
    subareas_.borders.finish();
    list_bands(subareas_, IsochroneScope::subarea);
    const auto of_catchments = static_cast<std::ptrdiff_t>(bands_.size());
    for (IsochroneBand& band : bands_) band.parts = {{.subarea = band.point, .area = band.area}};
    for (CatchmentBands& catchments : catchments_) {
        catchments.bands.borders.finish();
        list_bands(catchments.bands, IsochroneScope::catchment);
    }
    std::sort(bands_.begin() + of_catchments, bands_.end(), [](const IsochroneBand& a, const IsochroneBand& b) {
        return std::pair(a.point, a.number) < std::pair(b.point, b.number);
    });
    for (const CatchmentBands& catchments : catchments_) list_parts(catchments);
}

void StudyRegions::list_bands(const Bands& bands, IsochroneScope scope) {
    for (const RegionLabel label : bands.borders.labels()) {
        bands_.push_back({.scope = scope, .point = static_cast<PointNumber>(label >> 32U),
                          .number = static_cast<std::uint32_t>(label & 0xFFFFFFFFU) - 1U, .area = bands.areas.at(label)});
    }
}

/// Gives each band of a level of catchments its parts.
void StudyRegions::list_parts(const CatchmentBands& catchments) {
    std::vector<RegionLabel> labels;
    for (const auto& [label, area] : catchments.parts) labels.push_back(label);
    std::sort(labels.begin(), labels.end());
    std::unordered_map<RegionLabel, IsochroneBand*> whole_bands;
    for (IsochroneBand& band : bands_) {
        if (band.scope == IsochroneScope::catchment) whole_bands[band_label(band.point, band.number)] = &band;
    }
    for (const RegionLabel label : labels) {
        const auto subarea = static_cast<PointNumber>(label >> 32U);
        const RegionLabel whole = band_label(catchments.point[subarea], static_cast<std::uint32_t>(label & 0xFFFFFFFFU) - 1U);
        whole_bands.at(whole)->parts.push_back({.subarea = subarea, .area = catchments.parts.at(label)});
    }
}

std::vector<CornerPolygon> StudyRegions::subarea(PointNumber number) const { return owners_.outline(place_[number]); }

std::vector<CornerPolygon> StudyRegions::catchment(PointNumber number) const {
    return owners_.outline(first_place_[number], place_[number]);
}

const RegionBorders& StudyRegions::borders_of(const IsochroneBand& band) const {
    if (band.scope == IsochroneScope::subarea) return subareas_.borders;
    const auto level = std::find_if(catchments_.begin(), catchments_.end(), [&](const CatchmentBands& c) { return c.point[band.point] == band.point; });
    return level->bands.borders;
}

std::vector<Polygon> StudyRegions::outline(const IsochroneBand& band) const {
    const RegionBorders& borders = borders_of(band);
    const RegionLabel label = band_label(band.point, band.number);
    return isochrones_->smoothed ? borders.smooth_outline(label) : in_cells(borders.outline(label));
}

}  // namespace rillclock
