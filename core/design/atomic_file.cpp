#include "core/design/atomic_file.hpp"
#include <cerrno>
#include <cstdio>
#include <cstdlib>
#include <cstring>
#include <fcntl.h>
#include <string>
#include <sys/stat.h>
#include <unistd.h>

namespace sinewright {

namespace {

std::string reason_for(int error) {
    switch (error) {
    case ENOSPC:
    case EDQUOT:
        return "the disk is full";
    case EACCES:
    case EPERM:
        return "there is no permission to write there";
    case EROFS:
        return "the disk is read-only";
    case ENOENT:
        return "the folder does not exist";
    case EISDIR:
        return "it is a folder";
    default:
        return std::strerror(error);
    }
}

Fault failed(const std::filesystem::path& path, int error) {
    return {FaultKind::could_not_write, path.string(),
            "Could not save " + path.filename().string() + ": " + reason_for(error) + ".",
            "Save it elsewhere; nothing was lost."};
}

/// Writes everything and flushes; errno on failure, else 0.
int fill(int file, std::string_view text, const FileCalls& calls) {
    while (!text.empty()) {
        const ssize_t written = calls.write(file, text.data(), text.size());
        if (written < 0 && errno == EINTR) continue;
        if (written <= 0) return written < 0 ? errno : EIO;
        text.remove_prefix(static_cast<std::size_t>(written));
    }
    return calls.sync(file) == 0 ? 0 : errno;
}

} // namespace

const FileCalls& FileCalls::real() {
    static const FileCalls calls{::write, ::fsync, ::rename};
    return calls;
}

Result<std::monostate> write_atomically(const std::filesystem::path& wanted, std::string_view text,
                                        const FileCalls& calls) {
    std::error_code ignored;
    std::filesystem::path path = wanted;
    if (std::filesystem::is_symlink(path, ignored))
        if (const auto target = std::filesystem::weakly_canonical(path, ignored); !ignored) path = target;
    if (std::filesystem::is_directory(path, ignored)) return failed(wanted, EISDIR);
    struct stat old {};
    const bool replaces = ::stat(path.c_str(), &old) == 0;
    if (replaces && ::access(path.c_str(), W_OK) != 0)
        return failed(wanted, errno); // a write-protected file stays as it is

    std::string temporary = path.string() + ".XXXXXX";
    const int file = ::mkstemp(temporary.data());
    if (file < 0) return failed(wanted, errno);
    int error = fill(file, text, calls);
    if (error == 0) {
        const mode_t mask = ::umask(0);
        ::umask(mask);
        if (::fchmod(file, replaces ? old.st_mode & 07777 : 0666 & ~mask) != 0) error = errno;
    }
    if (::close(file) != 0 && error == 0) error = errno;
    if (error == 0 && calls.rename(temporary.c_str(), path.c_str()) != 0) error = errno;
    if (error != 0) {
        ::unlink(temporary.c_str());
        return failed(wanted, error);
    }
    // The name itself must reach the disk too; failing that the file is still whole, old or new.
    const auto folder = path.has_parent_path() ? path.parent_path() : std::filesystem::path(".");
    if (const int directory = ::open(folder.c_str(), O_RDONLY | O_DIRECTORY); directory >= 0) {
        ::fsync(directory);
        ::close(directory);
    }
    return std::monostate{};
}

} // namespace sinewright
