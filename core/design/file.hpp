#pragma once
/// The design file: reading, validating, writing (contract: UTF-8 JSON, extension .sinewright, version 1).
#include "core/design/design.hpp"
#include <filesystem>

namespace sinewright {

/// A design as far as it could be read, with everything found wrong on the way.
/// Reads on after a problem so that all of them are named at once.
struct ReadDesign {
    Design design;
    Faults notes; ///< things mended or kept that the user should know (never empty sentences)
};

/// Parses and validates a design from JSON text. `name` stands in messages ("tone.sinewright").
/// @error every problem found, each naming part, net or field: malformed JSON with line and column, unknown keys,
///        wrong types, duplicates, missing nets, values out of range, limits, newer versions.
Result<ReadDesign> parse_design(std::string_view json_text, std::string_view name);

/// Reads a design file: at most 8 MiB; a folder, a missing or unreadable file is a fault that says so.
Result<ReadDesign> read_design(const std::filesystem::path& path);

/// The file's text: stable key order, one part per line, numbers shortest-round-trip, spellings kept.
/// Postcondition: write_design(parse_design(write_design(d))) gives identical bytes.
std::string design_text(const Design& design);

/// Writes atomically: a temporary file beside the target, flushed to disk, then renamed over it.
/// @error FaultKind::could_not_write with the system's reason ("the disk is full"); the old file stays whole.
Result<std::monostate> write_design(const Design& design, const std::filesystem::path& path);

/// Everything wrong with a design that is in memory (the same checks as reading: kinds, parameters, ranges,
/// duplicate names, references of cut, output, groups, dials, targets). Empty: it can go to assembly.
Faults validate(const Design& design);

} // namespace sinewright
