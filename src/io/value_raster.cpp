#include "rillclock/io/value_raster.hpp"

#include <utility>

#include "raster_file.hpp"

namespace rillclock {
namespace {

class ValueSource : public BlockSource<double> {
public:
    explicit ValueSource(const std::filesystem::path& path)
        : file_({.path = path, .role = "result", .band = 1, .resampling = "bilinear"}) {}

    [[nodiscard]] const Grid& grid() const override { return file_.grid(); }
    [[nodiscard]] const ReferenceSystem& system() const { return file_.system(); }
    void read(const Window& window, std::span<double> values) override { file_.read(window, values); }

private:
    RasterFile file_;
};

}  // namespace

ValueRaster open_values(const std::filesystem::path& path) {
    auto source = std::make_unique<ValueSource>(path);
    ReferenceSystem system = source->system();
    return {.source = std::move(source), .system = std::move(system)};
}

}  // namespace rillclock
