#include "reference/plain/travel_field.hpp"

#include "ground_kind.hpp"
#include "reference/plain/flow_directions.hpp"

namespace rillclock {
namespace {

void sweep_areas_and_distances(const TravelInputs& in, TravelField& field) {
    const auto length = [&](Cell cell) { return step_length(in.forest, in.ground, cell); };
    auto [area, divide] = sweep_down(
        in.forest, down::Sum{[&](Cell cell) { return in.ground.cell_area(in.forest.row(cell)); }}, down::Max{length});
    field.contributing_area = std::move(area);
    field.from_divide = std::move(divide.value);
    auto [distance] = sweep_up(in.forest, up::Add{length});
    field.flow_distance = std::move(distance);
    field.spill = spill_elevations(in.forest, in.elevations);
}

/// Open water that falls on its way is a river and flows as a channel.
void find_kinds_and_slopes(const TravelInputs& in, const TravelRules& rules, TravelField& field) {
    field.kind = Raster<GroundKind>(in.forest.rows(), in.forest.columns());
    for (const Cell cell : in.forest.order()) {
        field.kind[cell] = kind_of(in.surface.at(cell), rules.channel, field.contributing_area[cell],
                                   in.ground.cell_area(in.forest.row(cell)));
    }
    for (const Cell cell : in.mapped_channels) field.kind[cell] = GroundKind::channel;
    SlopeAhead ahead = slope_ahead({.forest = in.forest, .flow_distance = field.flow_distance, .spill = field.spill,
                                    .metres_per_elevation_unit = in.metres_per_elevation_unit, .kind = field.kind},
                                   rules.slope);
    field.slope = std::move(ahead.slope);
    for (const Cell cell : in.forest.order()) {
        if (field.kind[cell] == GroundKind::water && ahead.falls_within[cell]) field.kind[cell] = GroundKind::channel;
    }
}

void sweep_sheet_index(const TravelInputs& in, TravelField& field) {
    field.sheet_index = Raster<FixedLength>(in.forest.rows(), in.forest.columns());
    auto [index] = sweep_down(
        in.forest, down::Max{[&](Cell cell) { return sheet_index_step(step_view(in, field, cell)); }});
    field.sheet_index = std::move(index.value);
}

void sweep_times(const TravelInputs& in, const TravelRules& rules, TravelField& field) {
    auto [storm, fixed] = sweep_up(
        in.forest, up::Add{[&](Cell cell) { return step_parts(step_view(in, field, cell), rules).time().storm; }},
        up::Add{[&](Cell cell) { return step_parts(step_view(in, field, cell), rules).time().fixed; }});
    field.storm_part = std::move(storm);
    field.fixed_part = std::move(fixed);
    field.regime = Raster<Regime>(in.forest.rows(), in.forest.columns(), Regime::none);
    for (const Cell cell : in.forest.order()) field.regime[cell] = first_regime(step_view(in, field, cell), rules);
}

}  // namespace

FixedLength step_length(const FlowForest& forest, const Ground& ground, Cell cell) {
    return is_direction(forest.codes()[cell]) ? ground.length(forest.row(cell), forest.direction(cell)) : 0;
}

StepView step_view(const TravelInputs& in, const TravelField& field, Cell cell) {
    return {.length = step_length(in.forest, in.ground, cell),
            .slope = static_cast<double>(field.slope[cell]),
            .surface = &in.surface.at(cell),
            .kind = field.kind[cell],
            .ponded_m = (field.spill[cell] - in.elevations[cell]) * in.metres_per_elevation_unit,
            .area = field.contributing_area[cell],
            .from_divide = field.from_divide[cell],
            .sheet_index = field.sheet_index[cell]};
}

TravelField travel_field(const TravelInputs& inputs, const TravelRules& rules) {
    TravelField field;
    sweep_areas_and_distances(inputs, field);
    find_kinds_and_slopes(inputs, rules, field);
    sweep_sheet_index(inputs, field);
    sweep_times(inputs, rules, field);
    return field;
}

}  // namespace rillclock
