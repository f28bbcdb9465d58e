#include "rillclock/io/result_folder.hpp"

#include <fcntl.h>
#include <sys/file.h>
#include <sys/stat.h>
#include <unistd.h>

#include <algorithm>
#include <array>
#include <atomic>
#include <cerrno>
#include <cstdio>
#include <cstring>
#include <future>
#include <string>
#include <utility>
#include <vector>

#include "rillclock/core/error.hpp"

namespace rillclock {
namespace {

namespace fs = std::filesystem;

constexpr const char* manifest = "result.json";

Error cannot(const std::string& what, const fs::path& path) {
    return machine_error("Cannot " + what + " " + path.string() + ": " + std::strerror(errno) +
                         "; look at the free space and the permissions of its folder.");
}

/// An open file or folder, closed on the way out.
class Descriptor {
public:
    Descriptor(const fs::path& path, int flags) : number_(open(path.c_str(), flags | O_CLOEXEC | O_NOFOLLOW, 0666)) {}
    Descriptor(const Descriptor&) = delete;
    Descriptor& operator=(const Descriptor&) = delete;
    ~Descriptor() {
        if (number_ >= 0) ::close(number_);
    }
    [[nodiscard]] int number() const { return number_; }
    [[nodiscard]] bool close() { return ::close(std::exchange(number_, -1)) == 0; }

private:
    int number_;
};

void sync_to_disk(const fs::path& path) {
    const Descriptor file(path, O_RDONLY);
    if (file.number() < 0 || fsync(file.number()) != 0) throw cannot("bring to disk", path);
}

void write_all(int file, std::string_view content, const fs::path& path) {
    while (!content.empty()) {
        const ssize_t count = ::write(file, content.data(), content.size());
        if (count < 0 && errno == EINTR) continue;
        if (count < 0) throw cannot("write", path);
        content.remove_prefix(static_cast<std::size_t>(count));
    }
}

/// A disk takes many files at a time as fast as one, so that hundreds of small ones are brought to it side by side; folders come last, since
/// they say what is there.
void sync_tree(const fs::path& folder) {
    std::vector<fs::path> files;
    std::vector<fs::path> folders = {folder};
    for (const fs::directory_entry& entry : fs::recursive_directory_iterator(folder)) (entry.is_directory() ? folders : files).push_back(entry.path());
    constexpr std::size_t most_at_a_time = 8;
    std::atomic<std::size_t> next = 0;
    std::vector<std::future<void>> syncing;
    for (std::size_t i = 0; i < std::min(most_at_a_time, files.size()); ++i) {
        syncing.push_back(std::async(std::launch::async, [&] {
            for (std::size_t at = next++; at < files.size(); at = next++) sync_to_disk(files[at]);
        }));
    }
    for (std::future<void>& one : syncing) one.wait();
    for (std::future<void>& one : syncing) one.get();
    for (const fs::path& one : folders) sync_to_disk(one);
}

fs::path as_target(const fs::path& given) {
    fs::path target = fs::absolute(given).lexically_normal();
    if (target.filename().empty()) target = target.parent_path();
    if (target.filename().empty() || !target.has_parent_path())
        throw input_error("\"" + given.string() + "\" cannot be a result folder; name a folder of its own.");
    return target;
}

void check_parent(const fs::path& target) {
    std::error_code ignored;
    if (fs::is_directory(target.parent_path(), ignored)) return;
    throw input_error("The folder " + target.parent_path().string() + ", in which the result " +
                      target.filename().string() + " is to be made, does not exist; make it first.");
}

std::string holder_of(int lock) {
    std::array<char, 32> text{};
    const ssize_t count = pread(lock, text.data(), text.size() - 1, 0);
    return count > 0 ? std::string(text.data()) : "unknown";
}

/// Whether an open lock file is still the one that has the name; the former holder may have removed it meanwhile.
bool is_same_file(int lock, const fs::path& path) {
    struct stat opened {};
    struct stat named {};
    return fstat(lock, &opened) == 0 && lstat(path.c_str(), &named) == 0 && opened.st_ino == named.st_ino &&
           opened.st_dev == named.st_dev;
}

}  // namespace

ResultFolder::ResultFolder(const fs::path& target, Existing existing)
    : target_(as_target(target)), making_(beside("making-" + std::to_string(getpid()))) {
    check_parent(target_);
    take_lock();
    try {
        recover();
        check_target(existing);
        if (mkdir(making_.c_str(), 0777) != 0) throw cannot("make the folder", making_);
    } catch (...) {
        unlink(beside("lock").c_str());
        ::close(lock_);
        throw;
    }
}

ResultFolder::~ResultFolder() {
    std::error_code ignored;
    if (!committed_) fs::remove_all(making_, ignored);
    unlink(beside("lock").c_str());  // while it is held, so that nobody else's is removed
    ::close(lock_);
}

fs::path ResultFolder::beside(std::string_view ending) const {
    return target_.parent_path() / ("." + target_.filename().string() + "." + std::string(ending));
}

void ResultFolder::take_lock() {
    const fs::path path = beside("lock");
    for (;;) {
        lock_ = open(path.c_str(), O_RDWR | O_CREAT | O_CLOEXEC | O_NOFOLLOW, 0666);
        if (lock_ < 0) throw cannot("make the lock file", path);
        if (flock(lock_, LOCK_EX | LOCK_NB) != 0) {
            const std::string holder = holder_of(lock_);
            ::close(lock_);
            throw input_error("Another run (process " + holder + ") is making the result " + target_.string() +
                              "; wait until it has ended, or name another folder.");
        }
        if (is_same_file(lock_, path)) break;
        ::close(lock_);
    }
    const std::string process = std::to_string(getpid());
    if (ftruncate(lock_, 0) != 0 || pwrite(lock_, process.data(), process.size(), 0) < 0)
        throw cannot("write the lock file", path);
}

/// The lock is ours, so whatever a run left beside the target belongs to one that died.
void ResultFolder::recover() const {
    std::error_code problem;
    const fs::path aside = beside("aside");
    if (fs::exists(fs::symlink_status(aside)) && !fs::exists(fs::symlink_status(target_)))
        fs::rename(aside, target_, problem);
    if (problem)
        throw machine_error("The former result " + aside.string() + " cannot be put back: " + problem.message() + ".");
    std::vector<fs::path> leavings;
    const std::string made = beside("making-").filename().string();
    for (const fs::directory_entry& entry : fs::directory_iterator(target_.parent_path(), problem))
        if (entry.path().filename().string().starts_with(made)) leavings.push_back(entry.path());
    leavings.push_back(aside);
    for (const fs::path& path : leavings) fs::remove_all(path, problem);
    if (problem)
        throw machine_error("Leavings of a former run beside " + target_.string() +
                            " cannot be removed: " + problem.message() + ".");
}

void ResultFolder::check_target(Existing existing) const {
    const fs::file_status status = fs::symlink_status(target_);
    if (!fs::exists(status)) return;
    if (!fs::is_directory(status))
        throw input_error(target_.string() + " is a file or a link and not a folder; name another result folder.");
    if (existing == Existing::refuse)
        throw input_error("The folder " + target_.string() + " exists already; name another, or add --replace.");
    if (!fs::is_regular_file(fs::symlink_status(target_ / manifest)))
        throw input_error("The folder " + target_.string() + " holds no " + manifest +
                          ", so it is not a result and is not replaced; name another.");
}

fs::path ResultFolder::path(const fs::path& relative) {
    const fs::path normal = (part_ / relative).lexically_normal();
    if (normal.empty() || normal.is_absolute() || relative.is_absolute() || *normal.begin() == "..")
        throw bug("\"" + relative.string() + "\" is no place within a result folder");
    const fs::path full = making_ / normal;
    std::error_code problem;
    fs::create_directories(full.parent_path(), problem);
    if (problem)
        throw machine_error("The folder " + full.parent_path().string() + " cannot be made: " + problem.message() +
                            ".");
    return full;
}

void ResultFolder::write_text(const fs::path& relative, std::string_view content) {
    const fs::path full = path(relative);
    Descriptor file(full, O_WRONLY | O_CREAT | O_EXCL);
    if (file.number() < 0) throw cannot("make the file", full);
    write_all(file.number(), content, full);
    if (!file.close()) throw cannot("write", full);  // `commit` sees to it that it is on the disk
}

void ResultFolder::commit() {
    if (committed_) throw bug("A result folder was committed twice");
    sync_tree(making_);
    put_in_place();
    committed_ = true;
    sync_to_disk(target_.parent_path());
    std::error_code ignored;  // what remains there is the former result; the next run clears it where this cannot
    fs::remove_all(making_, ignored);
    fs::remove_all(beside("aside"), ignored);
}

void ResultFolder::put_in_place() const {
    if (!fs::exists(fs::symlink_status(target_))) {
        if (renameat2(AT_FDCWD, making_.c_str(), AT_FDCWD, target_.c_str(), RENAME_NOREPLACE) == 0) return;
        if (errno != EINVAL && errno != ENOSYS) throw cannot("put the result in the place of", target_);
        if (rename(making_.c_str(), target_.c_str()) != 0) throw cannot("put the result in the place of", target_);
        return;
    }
    check_target(Existing::replace);  // it may have become something else since
    if (renameat2(AT_FDCWD, making_.c_str(), AT_FDCWD, target_.c_str(), RENAME_EXCHANGE) == 0) return;
    if (errno != EINVAL && errno != ENOSYS) throw cannot("exchange the result with", target_);
    const fs::path aside = beside("aside");
    if (rename(target_.c_str(), aside.c_str()) != 0) throw cannot("set aside", target_);
    if (rename(making_.c_str(), target_.c_str()) == 0) return;
    const Error failure = cannot("put the result in the place of", target_);
    rename(aside.c_str(), target_.c_str());
    throw failure;
}

}  // namespace rillclock
