#include "rillclock/io/text_file.hpp"

#include <openssl/evp.h>

#include <algorithm>
#include <array>
#include <fstream>
#include <iterator>
#include <memory>
#include <string_view>
#include <utility>
#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

std::ifstream opened(const std::filesystem::path& path) {
    std::error_code ignored;
    if (!std::filesystem::exists(path, ignored)) throw input_error("There is no file " + path.string() + ".");
    if (!std::filesystem::is_regular_file(path, ignored))
        throw input_error(path.string() + " is a folder or a device; name a file.");
    std::ifstream file(path, std::ios::binary);
    if (!file) throw machine_error("The file " + path.string() + " cannot be opened; look at its permissions.");
    return file;
}

/// Bytes that must follow a first byte of UTF-8; -1 where none begins so.
int following_bytes(unsigned char first) {
    if (first < 0x80U) return 0;
    if (first >= 0xC2U && first < 0xE0U) return 1;
    if (first >= 0xE0U && first < 0xF0U) return 2;
    return first >= 0xF0U && first < 0xF5U ? 3 : -1;
}

bool is_valid_sequence(const std::string& text, std::size_t at, int following) {
    if (following < 0 || at + static_cast<std::size_t>(following) >= text.size()) return false;
    for (int k = 1; k <= following; ++k)
        if ((static_cast<unsigned char>(text[at + static_cast<std::size_t>(k)]) & 0xC0U) != 0x80U) return false;
    return true;
}

void check_utf8(const std::string& text, const std::filesystem::path& path) {
    std::size_t line = 1;
    for (std::size_t at = 0; at < text.size();) {
        const int following = following_bytes(static_cast<unsigned char>(text[at]));
        if (text[at] == '\0' || !is_valid_sequence(text, at, following))
            throw input_error("Line " + std::to_string(line) + " of " + path.string() +
                              " is not UTF-8 text; save the file again as UTF-8.");
        if (text[at] == '\n') ++line;
        at += static_cast<std::size_t>(following) + 1;
    }
}

constexpr std::string_view byte_order_mark = "\xEF\xBB\xBF";

}  // namespace

std::string read_text(const std::filesystem::path& path) {
    std::ifstream file = opened(path);
    std::string text((std::istreambuf_iterator<char>(file)), std::istreambuf_iterator<char>());
    if (file.bad()) throw machine_error("The file " + path.string() + " cannot be read to its end.");
    if (text.starts_with(byte_order_mark)) text.erase(0, byte_order_mark.size());
    check_utf8(text, path);
    return text;
}

namespace {

/// SHA-256 of what is added.
class Checksum {
public:
    explicit Checksum(std::filesystem::path of) : of_(std::move(of)) { demand(context_ && EVP_DigestInit_ex(context_.get(), EVP_sha256(), nullptr) == 1); }

    void add(std::string_view bytes) { demand(EVP_DigestUpdate(context_.get(), bytes.data(), bytes.size()) == 1); }

    void add_file() {
        std::ifstream file = opened(of_);
        std::vector<char> buffer(1U << 20U);
        while (file) {
            file.read(buffer.data(), static_cast<std::streamsize>(buffer.size()));
            add({buffer.data(), static_cast<std::size_t>(file.gcount())});
        }
        demand(!file.bad());
    }

    /// 64 hexadecimal digits. Nothing can be added afterwards.
    [[nodiscard]] std::string text() {
        std::array<unsigned char, EVP_MAX_MD_SIZE> digest{};
        unsigned int length = 0;
        demand(EVP_DigestFinal_ex(context_.get(), digest.data(), &length) == 1);
        std::string text;
        for (unsigned int i = 0; i < length; ++i) {
            constexpr std::string_view digits = "0123456789abcdef";
            text.push_back(digits[digest[i] >> 4U]);
            text.push_back(digits[digest[i] & 15U]);
        }
        return text;
    }

private:
    void demand(bool works) const {
        if (!works) throw machine_error("The checksum of " + of_.string() + " cannot be made.");
    }

    std::filesystem::path of_;
    std::unique_ptr<EVP_MD_CTX, decltype(&EVP_MD_CTX_free)> context_{EVP_MD_CTX_new(), &EVP_MD_CTX_free};
};

}  // namespace

std::string file_checksum(const std::filesystem::path& path) {
    Checksum checksum(path);
    checksum.add_file();
    return checksum.text();
}

std::string folder_checksum(const std::filesystem::path& path) {
    std::vector<std::filesystem::path> files;
    for (const auto& entry : std::filesystem::recursive_directory_iterator(path)) {
        if (entry.is_regular_file()) files.push_back(entry.path());
    }
    std::sort(files.begin(), files.end());
    Checksum checksum(path);
    for (const auto& file : files) checksum.add(file_checksum(file) + "  " + file.lexically_relative(path).generic_string() + "\n");
    return checksum.text();
}

}  // namespace rillclock
