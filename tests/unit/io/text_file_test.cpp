#include "rillclock/io/text_file.hpp"

#include "io_files.hpp"

using namespace rillclock;
using namespace rillclock::testing;
using Catch::Matchers::Contains;

TEST_CASE("a byte order mark is no part of a text") {
    const TemporaryFolder folder;
    CHECK(read_text(write_file(folder / "a.csv", "\xEF\xBB\xBFn\xC3\xA4me\n")) == "n\xC3\xA4me\n");
}

TEST_CASE("a text that is not UTF-8 is refused with the line") {
    const TemporaryFolder folder;
    const fs::path path = write_file(folder / "a.csv", "fine\nn\xE4me\n");
    CHECK_THAT(sentence_of([&] { (void)read_text(path); }), Contains("Line 2") && Contains("UTF-8"));
}

TEST_CASE("a text that ends within a character is refused") {
    const TemporaryFolder folder;
    const fs::path path = write_file(folder / "a.csv", "n\xC3");
    CHECK_THAT(sentence_of([&] { (void)read_text(path); }), Contains("Line 1"));
}

TEST_CASE("a text file that is missing or a folder is said so") {
    const TemporaryFolder folder;
    CHECK_THAT(sentence_of([&] { (void)read_text(folder / "none.csv"); }), Contains("There is no file"));
    CHECK_THAT(sentence_of([&] { (void)read_text(folder.path()); }), Contains("is a folder"));
}

TEST_CASE("the checksum is that of the standard's example") {
    const TemporaryFolder folder;
    // FIPS 180-2, appendix B.1
    CHECK(file_checksum(write_file(folder / "a", "abc")) ==
          "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad");
}

TEST_CASE("the checksum of a folder is that of its files' checksums and names") {
    const TemporaryFolder folder;
    write_file(folder / "b", "");
    fs::create_directory(folder / "a");
    write_file(folder.path() / "a" / "c", "abc");
    // printf 'ba7816bf…15ad  a/c\ne3b0c442…b855  b\n' | sha256sum
    CHECK(folder_checksum(folder.path()) == "323441741909e394928dd8023cd399274de957fa59dfbdaec1715482480d6b6c");
}
