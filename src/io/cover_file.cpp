#include "rillclock/io/cover_file.hpp"

#include <algorithm>
#include <array>
#include <cmath>
#include <cstdio>
#include <limits>
#include <span>
#include <utility>
#include <vector>

#include "raster_file.hpp"
#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

/// Columns between places that are always transformed exactly; fixed by the target grid, so that the answer does not
/// depend on the window.
constexpr std::int64_t anchor_spacing = 64;
constexpr std::int64_t largest_read = std::int64_t{1} << 22U;  // cells, 32 MB of doubles
constexpr std::int64_t largest_sampled = std::int64_t{1} << 20U;

/// Fractional rows and columns of the cover grid for the centres of a row of target cells.
class CoverPlaces {
public:
    CoverPlaces(const Grid& target, const Grid& cover, std::optional<Transformation> transformation)
        : target_(target), cover_(cover), transformation_(std::move(transformation)) {}

    [[nodiscard]] bool is_transformed() const { return transformation_.has_value(); }

    /// Coordinates of the centres of `x.size()` cells of a row from `first` on.
    void row(std::int64_t row, std::int64_t first, std::span<double> x, std::span<double> y) {
        if (!transformation_) return exact(row, first, x, y);
        const std::int64_t end = first + static_cast<std::int64_t>(x.size());
        for (std::int64_t begin = first - first % anchor_spacing; begin < end; begin += anchor_spacing) {
            const std::int64_t from = std::max(begin, first);
            const auto offset = static_cast<std::size_t>(from - first);
            const auto count = static_cast<std::size_t>(std::min(begin + anchor_spacing, end) - from);
            stretch(row, begin, from, x.subspan(offset, count), y.subspan(offset, count));
        }
    }

private:
    void exact(std::int64_t row, std::int64_t first, std::span<double> x, std::span<double> y) {
        for (std::size_t i = 0; i < x.size(); ++i) {
            const Place centre = target_.centre(RowColumn{row, first + static_cast<std::int64_t>(i)});
            x[i] = centre.x;
            y[i] = centre.y;
        }
        if (transformation_) transformation_->transform(x, y);
    }

    /// Cells `from` on, all within the anchors at `begin` and one spacing further: interpolated where the middle is
    /// then right to a two-hundredth of a cell (the error of a chord is greatest there), else exact.
    void stretch(std::int64_t row, std::int64_t begin, std::int64_t from, std::span<double> x, std::span<double> y) {
        const std::int64_t end = std::min(begin + anchor_spacing, target_.columns - 1);
        const std::int64_t middle = (begin + end) / 2;
        std::array<double, 3> ax = {target_.centre({row, begin}).x, target_.centre({row, middle}).x,
                                    target_.centre({row, end}).x};
        std::array<double, 3> ay = {};
        ay.fill(target_.centre({row, begin}).y);
        transformation_->transform(ax, ay);
        const double length = static_cast<double>(end - begin);
        const double part = static_cast<double>(middle - begin) / std::max(length, 1.0);
        const double off_x = std::abs(ax[0] + part * (ax[2] - ax[0]) - ax[1]) / cover_.cell_width;
        const double off_y = std::abs(ay[0] + part * (ay[2] - ay[0]) - ay[1]) / cover_.cell_height;
        if (length < 4 || !(off_x <= 0.005 && off_y <= 0.005)) return exact(row, from, x, y);
        for (std::size_t i = 0; i < x.size(); ++i) {
            const double t = static_cast<double>(from - begin + static_cast<std::int64_t>(i)) / length;
            x[i] = ax[0] + t * (ax[2] - ax[0]);
            y[i] = ay[0] + t * (ay[2] - ay[0]);
        }
        settle_at_edges(row, from, x, y);
    }

    /// Places so near an edge between cover cells that the interpolation may have put them on the wrong side are transformed exactly:
    /// the class of every cell is then the exact one.
    void settle_at_edges(std::int64_t row, std::int64_t from, std::span<double> x, std::span<double> y) {
        std::vector<std::size_t> doubtful;
        std::vector<double> px;
        std::vector<double> py;
        for (std::size_t i = 0; i < x.size(); ++i) {
            if (!is_near_edge((x[i] - cover_.left) / cover_.cell_width) &&
                !is_near_edge((cover_.top - y[i]) / cover_.cell_height))
                continue;
            const Place centre = target_.centre(RowColumn{row, from + static_cast<std::int64_t>(i)});
            doubtful.push_back(i);
            px.push_back(centre.x);
            py.push_back(centre.y);
        }
        if (doubtful.empty()) return;
        transformation_->transform(px, py);
        for (std::size_t j = 0; j < doubtful.size(); ++j) {
            x[doubtful[j]] = px[j];
            y[doubtful[j]] = py[j];
        }
    }

    static bool is_near_edge(double position) { return std::abs(position - std::round(position)) < 0.02; }

    Grid target_;
    Grid cover_;
    std::optional<Transformation> transformation_;
};

std::string ten_digits(double value) {
    std::array<char, 40> text{};
    std::snprintf(text.data(), text.size(), "%.10g", value);
    return text.data();
}

/// The smallest window that holds cells; empty where there are none.
Window window_around(std::span<const RowColumn> cells, const Grid& grid) {
    std::int64_t top = grid.rows, left = grid.columns, bottom = -1, right = -1;
    for (const RowColumn& cell : cells) {
        if (cell.row < 0) continue;
        top = std::min(top, cell.row);
        bottom = std::max(bottom, cell.row);
        left = std::min(left, cell.column);
        right = std::max(right, cell.column);
    }
    if (bottom < 0) return {};
    return {.row = top, .column = left, .rows = bottom - top + 1, .columns = right - left + 1};
}

/// The smallest window that holds rows and columns, which do not fall; empty where there are none. Those below 0 count as none.
Window window_between(std::span<const std::int64_t> rows, std::span<const std::int64_t> columns) {
    const auto is_there = [](std::int64_t position) { return position >= 0; };
    const auto top = std::find_if(rows.begin(), rows.end(), is_there);
    const auto left = std::find_if(columns.begin(), columns.end(), is_there);
    if (top == rows.end() || left == columns.end()) return {};
    const std::int64_t bottom = *std::max_element(rows.begin(), rows.end());
    const std::int64_t right = *std::max_element(columns.begin(), columns.end());
    return {.row = *top, .column = *left, .rows = bottom - *top + 1, .columns = right - *left + 1};
}

class CoverSource : public BlockSource<std::int32_t> {
public:
    CoverSource(RasterFile file, const Grid& target, CoverPlaces places)
        : file_(std::move(file)), target_(target), places_(std::move(places)) {}

    [[nodiscard]] const Grid& grid() const override { return target_; }

    /// Windows whose own cells, or whose cover cells, are too many are halved until they are not: no deeper than the number of halvings.
    void read(const Window& window, std::span<std::int32_t> values) override {   // NOLINT(misc-no-recursion)
        if (window.size() > largest_sampled && window.rows > 1) return read_halves(window, values);
        if (!places_.is_transformed()) return read_alongside(window, values);
        const std::vector<RowColumn> cells = cover_cells(window);
        read_needed(window, window_around(cells, file_.grid()), values, [&](const auto& class_at) {
            std::transform(cells.begin(), cells.end(), values.begin(), class_at);
        });
    }

private:
    /// Where both grids run along the same axes: a cover row for each row and a cover column for each column say all.
    void read_alongside(const Window& window, std::span<std::int32_t> values) {   // NOLINT(misc-no-recursion)
        const std::vector<std::int64_t> rows = cover_rows(window);
        const std::vector<std::int64_t> columns = cover_columns(window);
        read_needed(window, window_between(rows, columns), values, [&](const auto& class_at) {
            auto value = values.begin();
            for (const std::int64_t row : rows) {
                for (const std::int64_t column : columns) *value++ = class_at(RowColumn{row, column});
            }
        });
    }

    /// Reads the cover cells that a window needs, and has `pick(class_at)` take from them what each of its cells has; where there are too many,
    /// parts of the window are read one by one instead.
    template <class Pick>
    void read_needed(const Window& window, const Window& needed, std::span<std::int32_t> values, Pick pick) {   // NOLINT(misc-no-recursion)
        if (needed.size() > largest_read && window.rows > 1) return read_halves(window, values);
        if (needed.size() > largest_read && window.columns > 1) return read_sides(window, values);
        std::vector<double> cover(static_cast<std::size_t>(needed.size()));
        if (needed.size() > 0) file_.read(needed, cover);
        pick([&](const RowColumn& at) {
            if (at.row < 0 || at.column < 0) return no_class;
            const std::int64_t index = (at.row - needed.row) * needed.columns + at.column - needed.column;
            return class_of(cover[static_cast<std::size_t>(index)], at);
        });
    }

    /// The cover's row under each row of a window; -1 where there is none.
    [[nodiscard]] std::vector<std::int64_t> cover_rows(const Window& window) const {
        const double x = file_.grid().centre(RowColumn{0, 0}).x;
        std::vector<std::int64_t> rows;
        for (std::int64_t r = window.row; r < window.row + window.rows; ++r) {
            const auto at = file_.grid().at(Place{x, target_.centre(RowColumn{r, 0}).y});
            rows.push_back(at ? at->row : -1);
        }
        return rows;
    }

    [[nodiscard]] std::vector<std::int64_t> cover_columns(const Window& window) const {
        const double y = file_.grid().centre(RowColumn{0, 0}).y;
        std::vector<std::int64_t> columns;
        for (std::int64_t c = window.column; c < window.column + window.columns; ++c) {
            const auto at = file_.grid().at(Place{target_.centre(RowColumn{0, c}).x, y});
            columns.push_back(at ? at->column : -1);
        }
        return columns;
    }

    void read_halves(const Window& window, std::span<std::int32_t> values) {   // NOLINT(misc-no-recursion)
        Window upper = window;
        upper.rows = window.rows / 2;
        Window lower = window;
        lower.row += upper.rows;
        lower.rows -= upper.rows;
        read(upper, values.first(static_cast<std::size_t>(upper.size())));
        read(lower, values.last(static_cast<std::size_t>(lower.size())));
    }

    /// One row only, so that its sides are contiguous too.
    void read_sides(const Window& window, std::span<std::int32_t> values) {   // NOLINT(misc-no-recursion)
        Window left = window;
        left.columns = window.columns / 2;
        Window right = window;
        right.column += left.columns;
        right.columns -= left.columns;
        read(left, values.first(static_cast<std::size_t>(left.size())));
        read(right, values.last(static_cast<std::size_t>(right.size())));
    }

    /// The cover cell under each target cell; row -1 where there is none.
    [[nodiscard]] std::vector<RowColumn> cover_cells(const Window& window) {
        const auto columns = static_cast<std::size_t>(window.columns);
        std::vector<double> x(columns);
        std::vector<double> y(columns);
        std::vector<RowColumn> cells;
        cells.reserve(static_cast<std::size_t>(window.size()));
        for (std::int64_t r = window.row; r < window.row + window.rows; ++r) {
            places_.row(r, window.column, x, y);
            for (std::size_t c = 0; c < columns; ++c)
                cells.push_back(file_.grid().at(Place{x[c], y[c]}).value_or(RowColumn{-1, -1}));
        }
        return cells;
    }

    [[nodiscard]] std::int32_t class_of(double value, RowColumn at) const {
        if (std::isnan(value)) return no_class;
        if (value > -2147483648.0 && value <= 2147483647.0 && value == std::floor(value))
            return static_cast<std::int32_t>(value);
        throw input_error(
            "The " + file_.called() + " holds " + ten_digits(value) + " in row " + std::to_string(at.row) + ", column " +
            std::to_string(at.column) +
            ", but classes must be whole numbers; give a raster of classes (gdal_translate -ot Int32 where "
            "these are meant to be).");
    }

    RasterFile file_;
    Grid target_;
    CoverPlaces places_;
};

/// What the target grid covers in the cover's coordinates, from a lattice; none where no place has an image.
std::optional<std::array<Place, 2>> bounds_of(const Grid& target, std::optional<Transformation>& transformation) {
    constexpr double infinity = std::numeric_limits<double>::infinity();
    std::array<Place, 2> bounds = {{{infinity, infinity}, {-infinity, -infinity}}};
    constexpr int steps = 20;
    for (int i = 0; i <= steps; ++i)
        for (int j = 0; j <= steps; ++j) {
            std::optional<Place> at =
                Place{target.left + target.cell_width * static_cast<double>(target.columns) * j / steps,
                      target.top - target.cell_height * static_cast<double>(target.rows) * i / steps};
            if (transformation) at = (*transformation)(*at);
            if (!at) continue;
            bounds[0] = {std::min(bounds[0].x, at->x), std::min(bounds[0].y, at->y)};
            bounds[1] = {std::max(bounds[1].x, at->x), std::max(bounds[1].y, at->y)};
        }
    if (!(bounds[0].x <= bounds[1].x)) return std::nullopt;
    return bounds;
}

void check_overlap(const RasterFile& file, const Grid& target, const ReferenceSystem& target_system,
                   std::optional<Transformation>& transformation) {
    const Grid& cover = file.grid();
    const auto bounds = bounds_of(target, transformation);
    const double right = cover.left + cover.cell_width * static_cast<double>(cover.columns);
    const double bottom = cover.top - cover.cell_height * static_cast<double>(cover.rows);
    if (bounds && (*bounds)[0].x < right && (*bounds)[1].x > cover.left && (*bounds)[0].y < cover.top &&
        (*bounds)[1].y > bottom)
        return;
    throw input_error("The " + file.called() + " (in " + file.system().name() +
                      ") does not overlap the elevations (in " + target_system.name() +
                      ") anywhere; look whether it is of the same place, and whether both state the right reference "
                      "system (gdalinfo).");
}

void notice_systems(const RasterFile& file, const ReferenceSystem& target_system, bool is_transformed,
                    Notices& notices) {
    if (is_transformed)
        notices.push_back({.code = file.role() + "-transformed",
                           .text = "The " + file.called() + " is in " + file.system().name() +
                                   "; it is sampled at the places of the elevations' cells, which are in " +
                                   target_system.name() + "."});
    else if (file.system().name() != target_system.name())
        notices.push_back({.code = file.role() + "-system-named-otherwise",
                           .text = "The " + file.called() + " calls its reference system " + file.system().name() +
                                   ", the elevations theirs " + target_system.name() +
                                   "; both give the same coordinates here, so nothing is transformed."});
}

bool is_half(double cells_apart) {
    return std::abs(std::abs(cells_apart - std::round(cells_apart)) - 0.5) < 0.05;
}

/// Two grids of one cell size that lie half a cell apart both ways: usually one file means cell centres where it says
/// corners.
void notice_half_cell(const RasterFile& file, const Grid& target, Notices& notices) {
    const Grid& cover = file.grid();
    if (std::abs(cover.cell_width / target.cell_width - 1.0) > 1e-6) return;
    if (std::abs(cover.cell_height / target.cell_height - 1.0) > 1e-6) return;
    if (!is_half((cover.left - target.left) / target.cell_width)) return;
    if (!is_half((cover.top - target.top) / target.cell_height)) return;
    notices.push_back({.code = file.role() + "-half-cell",
                       .text = "The " + file.called() +
                               " has the elevations' cell size but lies half a cell beside them; "
                               "perhaps one of the two files gives cell centres where corners are meant."});
}

}  // namespace

CoverFile open_cover(const std::filesystem::path& path, const CoverOptions& options, const Grid& target,
                     const ReferenceSystem& target_system) {
    RasterFile file({.path = path,
                     .role = options.role,
                     .band = options.band,
                     .resampling = "near",
                     .band_key = options.band_key});
    std::optional<Transformation> transformation;
    // The finer of the two grids says how much "a hundredth of a cell" is.
    Grid finer = target;
    if (file.system().is_geographic() == target_system.is_geographic() && file.grid().cell_width < target.cell_width) {
        const double factor = file.grid().cell_width / target.cell_width;
        finer = {.rows = static_cast<std::int64_t>(static_cast<double>(target.rows) / factor),
                 .columns = static_cast<std::int64_t>(static_cast<double>(target.columns) / factor),
                 .left = target.left,
                 .top = target.top,
                 .cell_width = target.cell_width * factor,
                 .cell_height = target.cell_height * factor};
    }
    if (!same_coordinates(target_system, file.system(), finer)) transformation.emplace(target_system, file.system());
    check_overlap(file, target, target_system, transformation);
    Notices notices;
    notice_systems(file, target_system, transformation.has_value(), notices);
    if (!transformation) notice_half_cell(file, target, notices);
    CoverFile result{
        .source = nullptr, .system = file.system(), .file_grid = file.grid(), .notices = std::move(notices)};
    CoverPlaces places(target, file.grid(), std::move(transformation));
    result.source = std::make_unique<CoverSource>(std::move(file), target, std::move(places));
    return result;
}

}  // namespace rillclock
