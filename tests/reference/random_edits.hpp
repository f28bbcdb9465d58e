#pragma once

#include <random>
#include <string>
#include <utility>
#include <vector>

#include "reference/drawings.hpp"
#include "reference/shrinking.hpp"
#include "rillclock/terrain/terrain_edits.hpp"

/// Random terrains with random shapes mapped over them, for tests of terrain edits.
namespace rillclock::edits {

inline ElevationStore stored(const Elevations& z, ElevationStore::Width width = ElevationStore::Width::eight_bytes) {
    ElevationStore store(z.rows(), z.columns(), width);
    store.write({.rows = z.rows(), .columns = z.columns()}, z.values());
    return store;
}

/// One metre a cell, the south-western corner at the origin.
inline Grid grid_of(const Elevations& z) {
    return {.rows = z.rows(), .columns = z.columns(), .left = 0.0, .top = static_cast<double>(z.rows())};
}

/// A terrain and what is mapped over it.
struct Mapped {
    Elevations z;
    EditShapes shapes = {};
};

/// A terrain of few levels, and shapes at random over it and a little beyond.
struct AnyEdits : Mapped {
    explicit AnyEdits(unsigned seed) : random(seed) {
        z = drawings::random_terrain(random, 3, seed % 3 == 0 ? 0.1 : 0.0);
        const auto some = [&](unsigned most) { return std::uniform_int_distribution<unsigned>(0, most)(random); };
        for (unsigned n = some(4); n > 0; --n) shapes.channels.push_back(line());
        for (unsigned n = some(2); n > 0; --n) shapes.crossings.push_back(line());
        for (unsigned n = some(2); n > 0; --n) shapes.barriers.push_back(seed % 4 == 0 ? ring() : line());
        for (unsigned n = some(2); n > 0; --n) shapes.kept_places.push_back(place());
        if (seed % 5 == 0) shapes.kept_areas.push_back({{line()}});
    }

    Place place() {
        std::uniform_real_distribution<double> x(-2.0, static_cast<double>(z.columns()) + 2.0);
        std::uniform_real_distribution<double> y(-2.0, static_cast<double>(z.rows()) + 2.0);
        return {x(random), y(random)};
    }
    Line line() {
        Line line(std::uniform_int_distribution<std::size_t>(1, 6)(random));
        for (Place& corner : line) corner = place();
        return line;
    }
    Line ring() {
        const Place a = place();
        const Place b = place();
        return {a, {a.x, b.y}, b, {b.x, a.y}, a};
    }

    std::mt19937 random;
};

/// The cases that lack one of the shapes in a list.
template <class Shape>
void add_with_fewer(const Mapped& mapped, std::vector<Shape> EditShapes::*list, std::vector<Mapped>& all) {
    for (std::size_t i = 0; i < (mapped.shapes.*list).size(); ++i) {
        all.push_back(mapped);
        auto& rest = all.back().shapes.*list;
        rest.erase(rest.begin() + static_cast<std::ptrdiff_t>(i));
    }
}

/// The cases in which a line of a list lacks a corner.
inline void add_with_shorter(const Mapped& mapped, std::vector<Line> EditShapes::*list, std::vector<Mapped>& all) {
    for (std::size_t i = 0; i < (mapped.shapes.*list).size(); ++i) {
        const Line& line = (mapped.shapes.*list)[i];
        for (std::size_t corner = 0; line.size() > 1 && corner < line.size(); ++corner) {
            all.push_back(mapped);
            Line& rest = (all.back().shapes.*list)[i];
            rest.erase(rest.begin() + static_cast<std::ptrdiff_t>(corner));
        }
    }
}

/// Cases a little simpler: a shape less, a corner less, the northern row or the eastern column less (so that coordinates stay), a cell lower.
inline std::vector<Mapped> simpler(const Mapped& mapped) {
    std::vector<Mapped> all;
    add_with_fewer(mapped, &EditShapes::channels, all);
    add_with_fewer(mapped, &EditShapes::crossings, all);
    add_with_fewer(mapped, &EditShapes::barriers, all);
    add_with_fewer(mapped, &EditShapes::kept_places, all);
    add_with_fewer(mapped, &EditShapes::kept_areas, all);
    for (const auto list : {&EditShapes::channels, &EditShapes::crossings, &EditShapes::barriers}) add_with_shorter(mapped, list, all);
    const auto over = [&](Elevations z) {
        if (shrinking::has_data(z)) all.push_back({std::move(z), mapped.shapes});
    };
    if (mapped.z.rows() > 1) over(shrinking::without_row(mapped.z, 0));
    if (mapped.z.columns() > 1) over(shrinking::without_column(mapped.z, mapped.z.columns() - 1));
    for (Elevations& z : shrinking::lowered(mapped.z)) over(std::move(z));
    return all;
}

inline std::string drawing(const char* name, const std::vector<Line>& lines) {
    std::string text;
    for (const Line& line : lines) {
        text += name;
        for (const Place& corner : line) text += " (" + std::to_string(corner.x) + ", " + std::to_string(corner.y) + ")";
        text += '\n';
    }
    return text;
}

/// The terrain drawn, the corners of shapes listed.
inline std::string drawing(const Mapped& mapped) {
    std::vector<Line> kept;
    for (const Place& place : mapped.shapes.kept_places) kept.push_back({place});
    for (const Polygon& polygon : mapped.shapes.kept_areas) kept.insert(kept.end(), polygon.rings.begin(), polygon.rings.end());
    return shrinking::drawing(mapped.z) + drawing("channel", mapped.shapes.channels) + drawing("crossing", mapped.shapes.crossings) +
           drawing("barrier", mapped.shapes.barriers) + drawing("kept", kept);
}

/// A case that fails, shrunk and drawn.
template <class Fails>
std::string smallest_failing(const Mapped& mapped, Fails fails) {
    return drawing(shrinking::shrunk(mapped, [](const Mapped& m) { return simpler(m); }, fails));
}

}  // namespace rillclock::edits
