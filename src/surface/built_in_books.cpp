#include <algorithm>
#include <array>
#include <string>

#include "rillclock/core/error.hpp"
#include "rillclock/core/nearest_word.hpp"
#include "rillclock/surface/cover_book.hpp"

namespace rillclock {
namespace {

// Codes and names: the NLCD legend from 2001 on. Typical n: overland values of Kalyanapu, Burian and McPherson, 2009
// ("Effect of land use-based surface roughness on hydrologic model output", J. Spatial Hydrology 9(2)), and where that
// has none, NEH Part 630 chapter 15, 2010, table 15-1. Both from memory. Low and high n, the match of a class with a
// type of table 15-3 and the depth of water are our own. Curve numbers: TR-55, 1986, table 2-2, from memory: open space in good
// condition 21; residential, quarter and eighth of an acre 22, 23; commercial 24; newly graded 31; woods, good 41 to 43; brush, fair 52;
// pasture, good 71, 81; row crops, straight, good 82. That match is our own; classes without one have none.
// Impervious percentages: the middle of the legend's range, rounded; open water counts as impervious, since rain on it runs off whole (common
// practice, no source). Kerby's N: Texas Hydraulic Design Manual, table 4-5, from memory; the match is our own.
constexpr std::string_view nlcd_text =
    R"(code,name,n_low,n_typical,n_high,shallow_type,paved,water_depth_m,source,from_memory,cn_a,cn_b,cn_c,cn_d,kerby_n,impervious_percent
11,Open Water,,,,,,2,"mean depth ours: state your own",yes,,,,,,100
12,Perennial Ice/Snow,0.010,0.013,0.050,nearly bare,no,,"n and shallow type ours",yes,,,,,,
21,"Developed, Open Space",0.030,0.0404,0.240,short-grass pasture,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 dense grasses; low and shallow type ours",yes,39,61,74,80,0.40,10
22,"Developed, Low Intensity",0.040,0.0678,0.150,pavement,yes,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 short-grass prairie; low and shallow type ours",yes,61,75,83,87,0.40,35
23,"Developed, Medium Intensity",0.030,0.0678,0.120,pavement,yes,,"n Kalyanapu et al. 2009; range and shallow type ours",yes,77,85,90,92,0.02,65
24,"Developed, High Intensity",0.011,0.0404,0.070,pavement,yes,,"n Kalyanapu et al. 2009; low NEH 630 table 15-1 smooth surfaces; high and shallow type ours",yes,89,92,94,95,0.02,90
31,Barren Land,0.011,0.0113,0.050,nearly bare,no,,"n Kalyanapu et al. 2009; range NEH 630 table 15-1 smooth surfaces to fallow; shallow type ours",yes,77,86,91,94,0.10,0
41,Deciduous Forest,0.200,0.360,0.800,forest litter or hay meadow,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 woods with dense underbrush; low and shallow type ours",yes,30,55,70,77,0.60,0
42,Evergreen Forest,0.200,0.320,0.800,forest litter or hay meadow,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 woods with dense underbrush; low and shallow type ours",yes,30,55,70,77,0.80,0
43,Mixed Forest,0.200,0.400,0.800,forest litter or hay meadow,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 woods with dense underbrush; low and shallow type ours",yes,30,55,70,77,0.80,0
51,Dwarf Scrub,0.100,0.130,0.400,contour crops or woodland,no,,"n NEH 630 table 15-1 range; high woods with light underbrush; low, match and shallow type ours",yes,,,,,,0
52,Shrub/Scrub,0.130,0.400,0.800,contour crops or woodland,no,,"n Kalyanapu et al. 2009; range NEH 630 table 15-1 range to dense underbrush; shallow type ours",yes,35,56,70,77,0.40,0
71,Grassland/Herbaceous,0.130,0.368,0.410,short-grass pasture,no,,"n Kalyanapu et al. 2009; range NEH 630 table 15-1 range to bermudagrass; shallow type ours",yes,39,61,74,80,0.40,0
72,Sedge/Herbaceous,0.150,0.240,0.410,forest litter or hay meadow,no,,"n NEH 630 table 15-1 dense grasses; range short-grass prairie to bermudagrass; match and shallow type ours",yes,,,,,,0
73,Lichens,0.011,0.050,0.150,nearly bare,no,,"n NEH 630 table 15-1 fallow; range smooth surfaces to short-grass prairie; match and shallow type ours",yes,,,,,,0
74,Moss,0.050,0.150,0.240,short-grass pasture,no,,"n NEH 630 table 15-1 short-grass prairie; range fallow to dense grasses; match and shallow type ours",yes,,,,,,0
81,Pasture/Hay,0.150,0.325,0.410,short-grass pasture,no,,"n Kalyanapu et al. 2009; range NEH 630 table 15-1 short-grass prairie to bermudagrass; shallow type ours",yes,39,61,74,80,0.40,0
82,Cultivated Crops,0.050,0.060,0.170,straight row crops,no,,"n NEH 630 table 15-1 residue cover to 20 %; range fallow to residue cover above 20 %; shallow type NEH 630 table 15-3",yes,67,78,85,89,0.20,0
90,Woody Wetlands,0.050,0.086,0.400,contour crops or woodland,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 woods with light underbrush; low and shallow type ours",yes,,,,,,0
95,Emergent Herbaceous Wetlands,0.100,0.1825,0.410,forest litter or hay meadow,no,,"n Kalyanapu et al. 2009; high NEH 630 table 15-1 bermudagrass; low and shallow type ours",yes,,,,,,0
)";

// Codes and names: ESA WorldCover, 2020 (v100) and 2021 (v200). The legend says nothing of hydraulics, and no agency has matched it with any: every
// number is that of the class of NLCD that comes nearest by our own judgement, or of none. "Built-up" mixes roofs, streets and gardens; its n is that of
// medium development. Whoever knows the place better states a book of their own.
constexpr std::string_view worldcover_text =
    R"(code,name,n_low,n_typical,n_high,shallow_type,paved,water_depth_m,source,from_memory,cn_a,cn_b,cn_c,cn_d,kerby_n,impervious_percent
10,Tree cover,0.200,0.360,0.800,forest litter or hay meadow,no,,"all ours: as deciduous forest of the book nlcd",yes,30,55,70,77,0.60,0
20,Shrubland,0.130,0.400,0.800,contour crops or woodland,no,,"all ours: as shrub of the book nlcd",yes,35,56,70,77,0.40,0
30,Grassland,0.130,0.368,0.410,short-grass pasture,no,,"all ours: as grassland of the book nlcd",yes,39,61,74,80,0.40,0
40,Cropland,0.050,0.060,0.170,straight row crops,no,,"all ours: as cultivated crops of the book nlcd",yes,67,78,85,89,0.20,0
50,Built-up,0.011,0.0678,0.150,pavement,yes,,"all ours: as medium development of the book nlcd, with its lowest and highest range; mixes roofs, streets and gardens",yes,77,85,90,92,,65
60,Bare / sparse vegetation,0.011,0.0113,0.050,nearly bare,no,,"all ours: as barren land of the book nlcd",yes,77,86,91,94,0.10,0
70,Snow and ice,0.010,0.013,0.050,nearly bare,no,,"all ours",yes,,,,,,
80,Permanent water bodies,,,,,,2,"mean depth ours: state your own",yes,,,,,,100
90,Herbaceous wetland,0.100,0.1825,0.410,forest litter or hay meadow,no,,"all ours: as herbaceous wetlands of the book nlcd",yes,,,,,,0
95,Mangroves,0.050,0.086,0.400,contour crops or woodland,no,,"all ours: as woody wetlands of the book nlcd",yes,,,,,,0
100,Moss and lichen,0.011,0.050,0.150,nearly bare,no,,"all ours: as lichens of the book nlcd",yes,,,,,,0
)";

constexpr std::array<std::string_view, 2> names{"nlcd", "worldcover"};

}  // namespace

std::span<const std::string_view> built_in_book_names() {
    return names;
}

bool is_built_in_book(std::string_view name) {
    return std::find(names.begin(), names.end(), name) != names.end();
}

std::string_view built_in_book_text(std::string_view name) {
    if (name == "nlcd") return nlcd_text;
    if (name == "worldcover") return worldcover_text;
    throw input_error("there is no built-in cover book \"" + std::string(name) +
                      "\"; the built-in ones are nlcd and worldcover, and a book of your own is a CSV file" +
                      did_you_mean(name, names));
}

CoverBook built_in_book(std::string_view name) {
    const std::string_view text = built_in_book_text(name);
    const CoverBook unnamed = parse_cover_book(text, "built-in book " + std::string(name));
    return {std::string(name), {unnamed.classes().begin(), unnamed.classes().end()}};
}

}  // namespace rillclock
