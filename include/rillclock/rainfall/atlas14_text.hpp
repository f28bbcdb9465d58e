#pragma once

#include <string_view>

#include "rillclock/rainfall/rain_source.hpp"

namespace rillclock {

/// Whether a text looks like an answer of NOAA's precipitation frequency server: a point file, the answer about a place
/// without coverage, or a web page in place of either.
[[nodiscard]] bool is_atlas14_text(std::string_view text);

/// Reads a NOAA Atlas 14 point file as the precipitation frequency data server writes it.
///
/// Depth or intensity, in inches or millimetres, partial duration (ARI) or annual maximum (AEP, where '1/10 is read as
/// 10 years), one block or three; LF or CRLF, byte order mark or none. Unit, quantity and series are read from the file
/// and nowhere guessed. `file` names the text in errors. Throws an input error, with the line, for the server's answer
/// about a place without coverage, for a web page, for heading lines that are missing or contradict one another, for a
/// block that is not there or is there twice, for a block without a title among several, for rows that do not fit the heading and for numbers that cannot be rain: zero or less, a
/// depth that falls with duration, anything that falls with the return period.
/// Layout: seen in files of volumes 8, 9 and 11; those of annual maxima and in millimetres from memory.
[[nodiscard]] RainSource rain_from_atlas14(std::string_view text, std::string_view file,
                                           Atlas14Block block = Atlas14Block::estimate);

}  // namespace rillclock
