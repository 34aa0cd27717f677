#pragma once
/// Replacing a file whole or not at all.
#include "core/result.hpp"
#include <filesystem>
#include <string_view>
#include <sys/types.h>
#include <variant>

namespace sinewright {

/// The system calls that can fail on the way; tests put failing ones in their place.
struct FileCalls {
    ssize_t (*write)(int, const void*, std::size_t);
    int (*sync)(int);
    int (*rename)(const char*, const char*);
    static const FileCalls& real();
};

/// Writes a temporary file beside `path`, flushes it to disk and renames it over `path`; keeps an existing file's
/// permissions, follows a symbolic link to its target.
/// @error could_not_write with the system's reason; the old file is whole and no temporary file is left.
Result<std::monostate> write_atomically(const std::filesystem::path& path, std::string_view text,
                                        const FileCalls& calls = FileCalls::real());

} // namespace sinewright
