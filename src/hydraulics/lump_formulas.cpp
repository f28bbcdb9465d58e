#include "rillclock/hydraulics/lump_formulas.hpp"

#include <array>
#include <cmath>
#include <numbers>

namespace rillclock {
namespace {

constexpr double in_miles(Length v) {
    return v.si() / metres_per_mile;
}

constexpr double in_square_miles(Area v) {
    return v.si() / square_miles(1).si();
}

constexpr std::array kerby_table{
    SurfaceCoefficient{"pavement", 0.02},
    SurfaceCoefficient{"smooth, bare, packed soil", 0.10},
    SurfaceCoefficient{"poor grass, cultivated row crops, rough packed soil", 0.20},
    SurfaceCoefficient{"pasture, average grass", 0.40},
    SurfaceCoefficient{"deciduous forest", 0.60},
    SurfaceCoefficient{"dense grass, coniferous forest, deciduous forest with deep litter", 0.80},
};

constexpr std::array izzard_table{
    SurfaceCoefficient{"very smooth asphalt", 0.007},     SurfaceCoefficient{"tar and sand pavement", 0.0075},
    SurfaceCoefficient{"crushed-slate roof", 0.0082},     SurfaceCoefficient{"concrete", 0.012},
    SurfaceCoefficient{"tar and gravel pavement", 0.017}, SurfaceCoefficient{"closely clipped sod", 0.046},
    SurfaceCoefficient{"dense bluegrass", 0.060},
};

constexpr std::array county_table{
    SurfaceCoefficient{"commercial", 0.304},
    SurfaceCoefficient{"apartments", 0.324},
    SurfaceCoefficient{"mobile homes", 0.336},
    SurfaceCoefficient{"condominiums", 0.36},
    SurfaceCoefficient{"single family, 1/4 acre", 0.39},
    SurfaceCoefficient{"single family, 1/2 acre", 0.415},
    SurfaceCoefficient{"single family, 1 acre", 0.469},
    SurfaceCoefficient{"single family, 2.5 acres", 0.48},
    SurfaceCoefficient{"undeveloped, poor cover", 0.53},
    SurfaceCoefficient{"undeveloped, fair cover", 0.706},
    SurfaceCoefficient{"undeveloped, good cover", 0.937},
};

/// l^0.8 (S + 1)^0.7 / Y^0.5 of the lag equation.
double lag_numerator(Length longest_path, double curve_number, double land_slope) {
    const double retention_in = 1000 / curve_number - 10;
    return std::pow(in_feet(longest_path), 0.8) * std::pow(retention_in + 1, 0.7) / std::sqrt(100 * land_slope);
}

}  // namespace

double area_weighted_mean(std::span<const AreaValue> parts) {
    double sum = 0.0;
    Area area;
    for (const AreaValue& part : parts) {
        sum += part.area.si() * part.value;
        area += part.area;
    }
    return sum / area.si();
}

Duration nrcs_lag_concentration(Length longest_path, double curve_number, double land_slope) {
    return hours(lag_numerator(longest_path, curve_number, land_slope) / 1140);
}

Duration nrcs_lag(Length longest_path, double curve_number, double land_slope) {
    return hours(lag_numerator(longest_path, curve_number, land_slope) / 1900);
}

Length nrcs_flow_length(Area area) {
    return feet(209 * std::pow(in_acres(area), 0.6));
}

double land_slope_from_contours(Length contours, Length interval, Area area) {
    return contours * interval / area;
}

Duration kirpich(Length path, double slope) {
    return minutes(0.0078 * std::pow(in_feet(path), 0.77) * std::pow(slope, -0.385));
}

Duration california_culvert_practice(Length path, Length fall) {
    return hours(std::pow(11.9 * std::pow(in_miles(path), 3.0) / in_feet(fall), 0.385));
}

Duration kerby(Length overland, double retardance, double slope) {
    return minutes(0.828 * std::pow(in_feet(overland) * retardance, 0.467) * std::pow(slope, -0.235));
}

Duration kerby_by_root(Length overland, double retardance, double slope) {
    return minutes(0.83 * std::pow(retardance * in_feet(overland) / std::sqrt(slope), 0.467));
}

Duration kerby_with_two_thirds(Length overland, double retardance, double slope) {
    return minutes(std::pow(0.67 * retardance * in_feet(overland) / std::sqrt(slope), 0.467));
}

std::span<const SurfaceCoefficient> kerby_retardances() {
    return kerby_table;
}

Duration kerby_kirpich(const KerbyKirpich& measures) {
    return kerby(measures.overland, measures.retardance, measures.overland_slope) +
           kirpich(measures.main_channel - measures.overland, measures.channel_slope);
}

double texas_low_slope(double slope) {
    constexpr double offset = 0.0005;
    if (slope < 0.002) return slope + offset;
    if (slope < 0.003) return slope + offset * (0.003 - slope) / 0.001;
    return slope;
}

Duration square_root_of_area(Area area) {
    return hours(std::sqrt(in_square_miles(area)));
}

Duration faa(Length overland, double runoff_coefficient, double slope) {
    return minutes(1.8 * (1.1 - runoff_coefficient) * std::sqrt(in_feet(overland)) / std::cbrt(100 * slope));
}

Duration denver_initial(Length overland, double runoff_coefficient, double slope) {
    return minutes(0.395 * (1.1 - runoff_coefficient) * std::sqrt(in_feet(overland)) / std::pow(slope, 0.33));
}

Duration denver_urban_limit(Length path) {
    return minutes(in_feet(path) / 180 + 10);
}

Duration izzard(Length overland, double slope, double retardance, Intensity intensity) {
    const double i = in_inches_per_hour(intensity);
    return minutes(41.025 * (0.0007 * i + retardance) * std::cbrt(in_feet(overland) / slope) / std::cbrt(i * i));
}

std::span<const SurfaceCoefficient> izzard_retardances() {
    return izzard_table;
}

Duration papadakis_kazan(Length path, double slope, double n, Intensity intensity) {
    return minutes(0.66 * std::sqrt(in_feet(path)) * std::pow(n, 0.52) * std::pow(slope, -0.31) *
                   std::pow(in_inches_per_hour(intensity), -0.38));
}

Duration bransby_williams(Length path, Area area, double slope, BransbyWilliams printed) {
    const double us = in_miles(path) / std::pow(in_square_miles(area), 0.1);
    const double metric = in_kilometres(path) / std::pow(in_square_kilometres(area), 0.1);
    switch (printed) {
        case BransbyWilliams::original:
            return hours(std::sqrt(std::numbers::pi) / 2 * std::pow(100.0, -0.2) * us * std::pow(slope, -0.2));
        case BransbyWilliams::us:
            return minutes(21.3 * us * std::pow(slope, -0.2));
        case BransbyWilliams::metric:
            return minutes(14.6 * metric * std::pow(slope, -0.2));
        case BransbyWilliams::australian:
            return minutes(58.5 * metric * std::pow(1000 * slope, -0.2));
    }
    return seconds(std::nan(""));
}

Duration giandotti(Area area, Length longest_path, Length mean_height) {
    return hours((4 * std::sqrt(in_square_kilometres(area)) + 1.5 * in_kilometres(longest_path)) /
                 (0.8 * std::sqrt(in_metres(mean_height))));
}

Duration los_angeles(Length path, double slope, double developed_coefficient, Intensity intensity) {
    return minutes(std::pow(10.0, -0.507) * std::pow(developed_coefficient * in_inches_per_hour(intensity), -0.519) *
                   std::pow(in_feet(path), 0.483) * std::pow(slope, -0.135));
}

double los_angeles_coefficient(double impervious, double undeveloped_coefficient) {
    return 0.9 * impervious + (1 - impervious) * undeveloped_coefficient;
}

Intensity los_angeles_intensity(Intensity whole_day, Duration duration) {
    return whole_day * std::pow(hours(24) / duration, 0.47);
}

Duration county_initial(Length path, Length fall, double k) {
    return minutes(k * std::pow(std::pow(in_feet(path), 3.0) / in_feet(fall), 0.2));
}

std::span<const SurfaceCoefficient> county_initial_factors() {
    return county_table;
}

}  // namespace rillclock
