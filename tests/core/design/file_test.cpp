#include "core/design/atomic_file.hpp"
#include "core/design/file.hpp"
#include <catch2/catch.hpp>
#include <cerrno>
#include <fstream>
#include <random>
#include <unistd.h>

using namespace sinewright;
namespace fs = std::filesystem;

namespace {

std::string text_of(const fs::path& path) {
    std::ifstream stream(path, std::ios::binary);
    return {std::istreambuf_iterator<char>(stream), {}};
}

std::vector<fs::path> designs() {
    std::vector<fs::path> found;
    for (const char* folder : {"samples", "tests/outside/linear", "tests/outside/cycle"})
        for (const auto& entry : fs::directory_iterator(fs::path(SINEWRIGHT_SOURCE_DIR) / folder))
            if (entry.path().extension() == ".sinewright") found.push_back(entry.path());
    return found;
}

/// A folder of its own that goes away with the test.
struct Folder {
    fs::path path = fs::temp_directory_path() /
                    ("sinewright-test-" + std::to_string(::getpid()) + "-" + std::to_string(std::random_device{}()));
    Folder() { fs::create_directory(path); }
    ~Folder() { fs::remove_all(path); }
};

std::string with_parts(const std::string& parts, const std::string& rest = "") {
    return R"({"format": "sinewright-design", "version": 1, "output": "out")" + rest + R"(, "parts": [)" + parts + "]}";
}
const std::string resistor =
    R"({"ref": "R1", "kind": "resistor", "resistance": "4k7", "terminals": {"a": "out", "b": "gnd"}})";

/// Everything said about a text that can't be used.
std::string complaint(const std::string& text) {
    const auto read = parse_design(text, "tone.sinewright");
    REQUIRE_FALSE(read);
    std::string all;
    for (const Fault& fault : read.faults()) {
        CHECK_FALSE(fault.sentence.empty());
        all += fault.sentence + " " + fault.remedy + "\n";
    }
    return all;
}

// Fault injection: the calls that the n-th write, sync or rename goes wrong in.
int calls_left = 0;
bool fails_now() { return calls_left-- == 0; }
ssize_t failing_write(int file, const void* data, std::size_t size) {
    if (fails_now()) return errno = ENOSPC, -1;
    return ::write(file, data, std::min<std::size_t>(size, 700)); // in pieces, so that there is a middle to fail in
}
int failing_sync(int file) { return fails_now() ? (errno = EIO, -1) : ::fsync(file); }
int failing_rename(const char* from, const char* to) { return fails_now() ? (errno = EACCES, -1) : ::rename(from, to); }

} // namespace

TEST_CASE("every sample and reference design reads, and writing what was read is stable to the byte",
          "[design][ordinary]") {
    // Source: the file format's own promise: read, write, read gives identical bytes.
    const auto files = designs();
    REQUIRE(files.size() >= 38);
    for (const fs::path& file : files) {
        INFO(file);
        const auto first = read_design(file);
        REQUIRE(first);
        const std::string text = design_text(first->design);
        const auto again = parse_design(text, "again");
        REQUIRE(again);
        CHECK(again->design == first->design);
        CHECK(design_text(again->design) == text);
        if (file.parent_path().filename() == "samples") CHECK(text_of(file) == text);
    }
}

TEST_CASE("spellings and unknown top-level keys survive a round trip", "[design][ordinary]") {
    const auto read = parse_design(with_parts(resistor, R"(, "remarks": [{"part": "R1", "text": "why?"}])"), "x");
    REQUIRE(read);
    const std::string text = design_text(read->design);
    CHECK(text.find("\"4k7\"") != std::string::npos);
    CHECK(text.find(R"("remarks": [{"part": "R1", "text": "why?"}])") != std::string::npos);
}

TEST_CASE("bad files are refused with a sentence that names what is wrong", "[design][errors]") {
    // Common practice, no source: a message must name part, net or field.
    CHECK(complaint("").find("tone.sinewright") != std::string::npos);
    CHECK(complaint("[1, 2]").find("object") != std::string::npos);
    CHECK(complaint(R"({"format": "sinewright-design", "version": 3})").find("newer version (3)") != std::string::npos);
    CHECK(complaint(std::string("\xff\xfe{\0\"\0", 6)).find("UTF-16") != std::string::npos);
    CHECK(complaint(with_parts(resistor + "," + resistor)).find("two parts named R1") != std::string::npos);
    CHECK(complaint(
              with_parts(
                  R"({"ref": "R1", "kind": "resistor", "resistance": -4700, "terminals": {"a": "out", "b": "gnd"}})"))
              .find("R1: resistance is −4.7 kΩ; it must be above zero") != std::string::npos);
    CHECK(complaint(
              with_parts(
                  R"({"ref": "R1", "kind": "resistor", "resistance": "4k7x", "terminals": {"a": "out", "b": "gnd"}})"))
              .find("`4k7x`") != std::string::npos);
    CHECK(complaint(
              with_parts(
                  R"({"ref": "R1", "kind": "resistor", "resistance": 1e999, "terminals": {"a": "out", "b": "gnd"}})"))
              .find("range") != std::string::npos);
    CHECK_FALSE(
        complaint(with_parts(
                      R"({"ref": "R1", "kind": "resistor", "resistance": NaN, "terminals": {"a": "out", "b": "gnd"}})"))
            .empty());
    CHECK(
        complaint(
            with_parts(
                R"({"ref": "R1", "kind": "resistor", "colour": "red", "resistance": 1, "terminals": {"a": "out", "b": "gnd"}})"))
            .find("colour") != std::string::npos);
    CHECK(complaint(with_parts(R"({"ref": "R1", "kind": "resister", "terminals": {}})")).find("resistor") !=
          std::string::npos);
    CHECK(complaint(
              with_parts(
                  R"({"ref": "R1", "kind": "resistor", "resistance": 1, "terminals": {"a": "o\u0007ut", "b": "gnd"}})"))
              .find("control characters") != std::string::npos);
    CHECK(complaint(with_parts(resistor, R"(, "cut": {"part": "U9", "terminal": "plus"})")).find("U9") !=
          std::string::npos);
    CHECK(complaint(
              with_parts(R"({"ref": "R1", "kind": "resistor", "resistance": 1, "terminals": {"a": "fb", "b": "gnd"}})"))
              .find("`fb`") != std::string::npos);
    CHECK(complaint(with_parts(R"({"ref": "R1", "kind": "resistor", "terminals": {"a": "out", "b": "gnd"}})"))
              .find("needs resistance") != std::string::npos);
    CHECK(complaint(R"({"format": "sinewright-design", "format": "sinewright-design", "version": 1})").find("twice") !=
          std::string::npos);
    CHECK_FALSE(complaint(std::string(100000, '[')).empty());
    std::string many;
    for (int k = 0; k < 2001; ++k)
        many += (k ? "," : "") + std::string(R"({"ref": "R)") + std::to_string(k) +
                R"(", "kind": "resistor", "resistance": 1, "terminals": {"a": "out", "b": "gnd"}})";
    CHECK(complaint(with_parts(many)).find("2000") != std::string::npos);
}

TEST_CASE("a folder, a missing file and a file too large are refused by name", "[design][errors]") {
    const Folder folder;
    CHECK(read_design(folder.path).fault().sentence.find("is a folder") != std::string::npos);
    CHECK(read_design(folder.path / "none.sinewright").fault().sentence.find("does not exist") != std::string::npos);
    std::ofstream(folder.path / "big.sinewright") << std::string((8u << 20) + 1, ' ');
    CHECK(read_design(folder.path / "big.sinewright").fault().sentence.find("8 MiB") != std::string::npos);
}

TEST_CASE("mutated and random bytes give a design or a sentence, never a crash", "[design][errors]") {
    std::mt19937 random(20240501); // fixed, so that a failure can be repeated
    const std::string good = text_of(fs::path(SINEWRIGHT_SOURCE_DIR) / "samples/harbour-tone-card.sinewright");
    for (int round = 0; round < 3000; ++round) {
        std::string text = good;
        const int changes = 1 + static_cast<int>(random() % 8);
        for (int k = 0; k < changes && !text.empty(); ++k) {
            const std::size_t at = random() % text.size();
            switch (random() % 4) {
            case 0:
                text[at] = static_cast<char>(random() % 256);
                break;
            case 1:
                text.erase(at, random() % 20);
                break;
            case 2:
                text.insert(at, text.substr(random() % text.size(), random() % 40));
                break;
            default:
                text.resize(at + 1);
                break;
            }
        }
        const auto read = parse_design(text, "mutated");
        if (!read) REQUIRE_FALSE(read.fault().sentence.empty());
    }
}

TEST_CASE("whichever call fails while saving, the file is the old one or the new one, whole", "[design][errors]") {
    const Folder folder;
    const fs::path file = folder.path / "tone.sinewright";
    const std::string old_text = "old\n", new_text(5000, 'n');
    bool saved = false;
    for (int n = 0; n < 40 && !saved; ++n) {
        std::ofstream(file) << old_text;
        calls_left = n;
        const auto result = write_atomically(file, new_text, FileCalls{failing_write, failing_sync, failing_rename});
        saved = result.has_value();
        CHECK(text_of(file) == (saved ? new_text : old_text));
        CHECK(std::distance(fs::directory_iterator(folder.path), fs::directory_iterator{}) ==
              1); // no temporary file is left
        if (!saved) CHECK(result.fault().kind == FaultKind::could_not_write);
    }
    CHECK(saved);
}

TEST_CASE("saving into a full disk says so and keeps the old file", "[design][errors]") {
    const Folder folder;
    const fs::path file = folder.path / "tone.sinewright";
    std::ofstream(file) << "old\n";
    calls_left = 0;
    const auto result = write_atomically(file, "new", FileCalls{failing_write, failing_sync, failing_rename});
    REQUIRE_FALSE(result);
    CHECK(result.fault().sentence.find("the disk is full") != std::string::npos);
    CHECK(text_of(file) == "old\n");
}
