#pragma once

#include <string>

#include "rillclock/io/vector_output.hpp"

namespace rillclock {

/// A layer's style as OGC Styled Layer Descriptor 1.0.
[[nodiscard]] std::string style_sld(const LayerDescription& layer);
/// The same as the XML that the GIS which invented the table layer_styles reads first.
[[nodiscard]] std::string style_qml(const LayerDescription& layer);

/// What XML would take for more than text is escaped; characters it cannot hold become blanks.
[[nodiscard]] std::string xml_text(std::string_view text);

}  // namespace rillclock
