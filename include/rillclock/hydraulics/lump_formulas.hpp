#pragma once

#include <span>
#include <string_view>

#include "rillclock/core/quantity.hpp"

namespace rillclock {

// Formulas for the time of concentration of a whole catchment. Slopes are rise over run, whatever the printed formula
// wants; each is that formula's own slope, and they must not be mixed. None is finite for a length, slope, area or
// coefficient of 0 or less.

/// What an area has of something that is averaged by area: a curve number, a runoff coefficient.
struct AreaValue {
    Area area;
    double value = 0.0;
};

/// Σ value·area / Σ area: composite curve number or runoff coefficient. No number for no area.
/// Source: Texas Department of Transportation, Hydraulic Design Manual, equation 4-23.
[[nodiscard]] double area_weighted_mean(std::span<const AreaValue> parts);

/// NRCS watershed lag method: Tc[h] = l^0.8 (S + 1)^0.7 / (1140 Y^0.5), l ft, S = 1000/CN − 10 in, Y the average slope
/// of the land in percent. The lag is 0.6 of it (1900 in place of 1140).
/// Source: NEH Part 630, chapter 15, 2010, equations 15-4a and 15-4b (values from memory).
[[nodiscard]] Duration nrcs_lag_concentration(Length longest_path, double curve_number, double land_slope);
/// The lag itself: with 1900 in place of 1140. Source: the same, 15-4a.
[[nodiscard]] Duration nrcs_lag(Length longest_path, double curve_number, double land_slope);
/// l[ft] = 209 A^0.6, A ac: the longest path where it was not measured. Source: the same, 15-5 (from memory).
[[nodiscard]] Length nrcs_flow_length(Area area);
/// Total length of contours times their interval over the area. Source: the same, 15-6 (from memory).
[[nodiscard]] double land_slope_from_contours(Length contours, Length interval, Area area);

/// Kirpich: tc[min] = 0.0078 L^0.77 S^-0.385, L ft. Source: Kirpich, Civil Engineering 10(6), 1940.
[[nodiscard]] Duration kirpich(Length path, double slope);
/// By which Kirpich's time is multiplied. Source: Chow, Maidment and Mays, Applied Hydrology, 1988, table 15.1.2 (from
/// memory).
inline constexpr double kirpich_paved_overland = 0.4;
inline constexpr double kirpich_concrete_channel = 0.2;
/// The same for agreement with the NRCS velocity method in 72 basins of Iran, and for the culvert practice formula.
/// Source: Sharifi and Hosseini, J. Irrig. Drain. Eng., 2011, abstract.
inline constexpr double kirpich_sharifi_hosseini = 1.721;
inline constexpr double california_sharifi_hosseini = 1.715;

/// tc[h] = (11.9 L³/H)^0.385, L mi, H ft. Source: California Culverts Practice, 1942.
[[nodiscard]] Duration california_culvert_practice(Length path, Length fall);

/// Kerby: t[min] = 0.828 (L N)^0.467 S^-0.235, L ft. Source: Kerby, Civil Engineering 29(3), 1959, with the constant and
/// the powers of the Texas Department of Transportation, Hydraulic Design Manual.
[[nodiscard]] Duration kerby(Length overland, double retardance, double slope);
/// Kerby as printed elsewhere: t[min] = 0.83 (L N / √S)^0.467. It, the first and the third agree within 1 % for slopes from 0.001 to 1.
[[nodiscard]] Duration kerby_by_root(Length overland, double retardance, double slope);
/// Kerby with the constant inside: t[min] = (0.67 L N / √S)^0.467.
[[nodiscard]] Duration kerby_with_two_thirds(Length overland, double retardance, double slope);

/// A surface and a coefficient of it.
struct SurfaceCoefficient {
    std::string_view surface;
    double value = 0.0;
};
/// Kerby's retardance N, smooth to rough; not to be interpolated.
/// Source: Texas Department of Transportation, Hydraulic Design Manual, table 4-5 (values from memory).
[[nodiscard]] std::span<const SurfaceCoefficient> kerby_retardances();

/// What Kerby and Kirpich together need.
struct KerbyKirpich {
    Length main_channel;         ///< from the divide to the outlet, the overland part included
    double channel_slope = 0.0;  ///< elevation of the divide less that of the outlet, over that length
    Length overland;             ///< shorter than the main channel
    double overland_slope = 0.0;
    double retardance = 0.0;  ///< Kerby's N
};
/// Kerby over the overland part and Kirpich over the rest. Source: Roussel, Thompson, Fang, Cleveland and
/// Garcia-Martinez, 2005, as in the Texas Hydraulic Design Manual.
[[nodiscard]] Duration kerby_kirpich(const KerbyKirpich& measures);
/// The slope to put in both where it is low: S + 0.0005 below 0.002, S from 0.003 on; between the two the addition
/// fades evenly, which is this program's own reading of the transition. Source: Cleveland, Thompson, Fang and Li, Texas
/// Department of Transportation 0-6382-P1, 2012 (the offset from memory).
[[nodiscard]] double texas_low_slope(double slope);
/// Quick check of those: tc[h] = √A, A mi². Source: Texas Hydraulic Design Manual.
[[nodiscard]] Duration square_root_of_area(Area area);

/// FAA: tc[min] = 1.8 (1.1 − C) L^0.5 / S^(1/3), L ft, S percent. Source: Federal Aviation Administration, Airport
/// Drainage, 1970.
[[nodiscard]] Duration faa(Length overland, double runoff_coefficient, double slope);
/// The same as ti[min] = 0.395 (1.1 − C5) L^0.5 / S^0.33, L ft, S ft/ft. Source: Urban Drainage and Flood Control
/// District, Denver, Urban Storm Drainage Criteria Manual, 2002, equation RO-3 (values from memory).
[[nodiscard]] Duration denver_initial(Length overland, double runoff_coefficient, double slope);
/// Most that is used at the first design point of an urban catchment: tc[min] = L/180 + 10, L ft. Source: the same,
/// RO-5 (values from memory).
[[nodiscard]] Duration denver_urban_limit(Length path);

/// Izzard: tc[min] = 41.025 (0.0007 i + c) L^(1/3) / (S^(1/3) i^(2/3)), i in/h, L ft.
/// Source: Izzard, Proc. Highway Research Board 26, 1946, as in Chow, Maidment and Mays, 1988, table 15.1.2.
[[nodiscard]] Duration izzard(Length overland, double slope, double retardance, Intensity intensity);
/// Izzard's c, smooth to rough. Source: Izzard, 1946 (values from memory).
[[nodiscard]] std::span<const SurfaceCoefficient> izzard_retardances();
/// i·L above this lies outside Izzard's formula; in/h times ft (value from memory).
inline constexpr double izzard_greatest_in_h_ft = 500.0;

/// Papadakis and Kazan: tc[min] = 0.66 L^0.5 n^0.52 S^-0.31 i^-0.38, L ft, i in/h.
/// Source: Papadakis and Kazan, 1987 (values from memory).
[[nodiscard]] Duration papadakis_kazan(Length path, double slope, double n, Intensity intensity);

/// Printed constants of Bransby-Williams, tc = constant · L / (A^0.1 S^0.2).
enum class BransbyWilliams {
    original,    ///< 1922: (√π/2)·100^-0.2 h, L mi, A mi², S ft/ft
    us,          ///< 21.3 min, the same units, as handbooks print it
    metric,      ///< 14.6 min, L km, A km², S m/m (value from memory)
    australian,  ///< 58.5 min, L km, A km², S m/km of equal area: Australian Rainfall and Runoff, 1987 (from memory)
};
/// They differ by up to 1.6 %. Source: Bransby Williams, The Engineer 134, 1922.
[[nodiscard]] Duration bransby_williams(Length path, Area area, double slope, BransbyWilliams printed);

/// Giandotti: tc[h] = (4 A^0.5 + 1.5 L) / (0.8 H^0.5), A km², L km, H m the mean elevation above the outlet.
/// Source: Giandotti, 1934 (values from memory).
[[nodiscard]] Duration giandotti(Area area, Length longest_path, Length mean_height);

/// Los Angeles County regression: Tc[min] = 10^-0.507 (Cd·I)^-0.519 L^0.483 S^-0.135, I in/h at the duration Tc, L ft.
/// Source: Los Angeles County Department of Public Works, Hydrology Manual, 2006 (values from memory).
[[nodiscard]] Duration los_angeles(Length path, double slope, double developed_coefficient, Intensity intensity);
/// Cd = 0.9·IMP + (1 − IMP)·Cu, IMP the impervious share. Source: the same (from memory).
[[nodiscard]] double los_angeles_coefficient(double impervious, double undeveloped_coefficient);
/// It = I1440·(1440 min/t)^0.47: the intensity for a duration from that of the whole day. Source: the same (from
/// memory).
[[nodiscard]] Intensity los_angeles_intensity(Intensity whole_day, Duration duration);

/// Initial subarea of Californian counties: Tc[min] = K (L³/H)^0.2, L ft, H ft.
/// Source: hydrology manuals of Orange, San Bernardino and Riverside counties (form from memory).
[[nodiscard]] Duration county_initial(Length path, Length fall, double k);
/// K by type of development, to be edited: values from memory that differ by county by a few per cent; hold them
/// against the county's nomograph before use.
[[nodiscard]] std::span<const SurfaceCoefficient> county_initial_factors();

}  // namespace rillclock
