#pragma once

#include <filesystem>
#include <string_view>

namespace rillclock {

/// Whether a folder that is already there may be replaced.
enum class Existing { refuse, replace };

/// A result folder in the making: it appears whole or not at all.
///
/// Files are made in a hidden folder beside the target; `commit` puts it in the target's place in one step. Until then
/// the target is untouched. One run at a time has a target: a locked file beside it holds the number of the process.
/// Leavings of runs that died are cleared away by the next, and a result they had set aside is put back. Symbolic links
/// are never followed.
class ResultFolder {
public:
    /// Throws Error: inputs, where the target is there and may not be replaced, is not a result of ours (holds no
    /// `result.json`), or another run has it; machine, where the place cannot be written.
    ResultFolder(const std::filesystem::path& target, Existing existing);
    ResultFolder(const ResultFolder&) = delete;
    ResultFolder& operator=(const ResultFolder&) = delete;
    /// Removes what was made, unless it was committed.
    ~ResultFolder();

    [[nodiscard]] const std::filesystem::path& target() const { return target_; }
    /// The folder in which files are made until `commit`.
    [[nodiscard]] const std::filesystem::path& making() const { return making_; }
    /// From here on files belong below this folder of the result ("scenario-after"); "" is the result itself.
    void begin_part(const std::filesystem::path& part) { part_ = part; }
    /// Where that part will lie once it is committed.
    [[nodiscard]] std::filesystem::path part_target() const { return part_.empty() ? target_ : target_ / part_; }
    /// Where to write a file that belongs at `relative` ("tables/outlets.csv"); its folder is made.
    [[nodiscard]] std::filesystem::path path(const std::filesystem::path& relative);
    /// Writes a whole new file; `commit` brings it to the disk.
    void write_text(const std::filesystem::path& relative, std::string_view content);
    /// Puts everything on disk, then in the target's place. The last act; at most once.
    void commit();

private:
    void take_lock();
    void recover() const;
    void check_target(Existing existing) const;
    void put_in_place() const;
    [[nodiscard]] std::filesystem::path beside(std::string_view ending) const;

    std::filesystem::path target_;
    std::filesystem::path making_;
    std::filesystem::path part_;
    int lock_ = -1;
    bool committed_ = false;
};

}  // namespace rillclock
