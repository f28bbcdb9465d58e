#include "rillclock/io/data_url.hpp"

#include <cpl_vsi.h>
#include <gdal_priv.h>
#include <openssl/evp.h>

#include "rillclock/core/error.hpp"
#include "rillclock/io/gdal_session.hpp"

namespace rillclock {
namespace {

constexpr const char* name_in_memory = "/vsimem/rillclock-palette.png";

const unsigned char* as_bytes(std::string_view text) { return reinterpret_cast<const unsigned char*>(text.data()); }

GDALDatasetUniquePtr in_memory(const PaletteImage& image) {
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("MEM");
    GDALDatasetUniquePtr dataset(driver == nullptr ? nullptr
                                                   : driver->Create("", static_cast<int>(image.columns), static_cast<int>(image.rows), 1, GDT_Byte, nullptr));
    if (!dataset) throw machine_error("GDAL has no room for an overview image.");
    GDALColorTable colours;
    for (std::size_t i = 0; i < image.palette.size(); ++i) {
        const auto& colour = image.palette[i];
        const GDALColorEntry entry{colour[0], colour[1], colour[2], colour[3]};
        colours.SetColorEntry(static_cast<int>(i), &entry);
    }
    GDALRasterBand& band = *dataset->GetRasterBand(1);
    band.SetColorTable(&colours);
    std::vector<std::uint8_t> values = image.values;
    const CPLErr done = band.RasterIO(GF_Write, 0, 0, static_cast<int>(image.columns), static_cast<int>(image.rows), values.data(),
                                      static_cast<int>(image.columns), static_cast<int>(image.rows), GDT_Byte, 0, 0, nullptr);
    if (done != CE_None) throw machine_error("GDAL cannot fill an overview image.");
    return dataset;
}

}  // namespace

std::string base64(std::string_view bytes) {
    std::string text((bytes.size() + 2) / 3 * 4 + 1, '\0');
    const int length = EVP_EncodeBlock(reinterpret_cast<unsigned char*>(text.data()), as_bytes(bytes), static_cast<int>(bytes.size()));
    text.resize(static_cast<std::size_t>(length));
    return text;
}

std::string policy_hash(std::string_view text) {
    std::array<unsigned char, EVP_MAX_MD_SIZE> digest{};
    unsigned int length = 0;
    if (EVP_Digest(text.data(), text.size(), digest.data(), &length, EVP_sha256(), nullptr) != 1) throw machine_error("A checksum cannot be made.");
    return "sha256-" + base64({reinterpret_cast<const char*>(digest.data()), length});
}

std::string palette_png(const PaletteImage& image) {
    const GdalSession session;
    const GdalMark begun = session.mark();
    const GDALDatasetUniquePtr source = in_memory(image);
    GDALDriver* driver = GetGDALDriverManager()->GetDriverByName("PNG");
    if (driver == nullptr) throw machine_error("GDAL has no PNG driver here; install the whole of GDAL.");
    GDALDatasetUniquePtr written(driver->CreateCopy(name_in_memory, source.get(), FALSE, nullptr, nullptr, nullptr));
    written.reset();
    session.throw_if_failed(begun, Fault::machine, "An overview image cannot be made");
    vsi_l_offset size = 0;
    GByte* bytes = VSIGetMemFileBuffer(name_in_memory, &size, TRUE);
    if (bytes == nullptr) throw machine_error("An overview image cannot be made.");
    std::string text(reinterpret_cast<const char*>(bytes), static_cast<std::size_t>(size));
    CPLFree(bytes);
    VSIUnlink((std::string(name_in_memory) + ".aux.xml").c_str());
    return text;
}

}  // namespace rillclock
