#pragma once
/// The outcome types every module of core shares: a value, a fault (bad input), not converged, or cancelled.
#include <cassert>
#include <string>
#include <utility>
#include <variant>
#include <vector>

namespace sinewright {

/// What a caller may branch on.
enum class FaultKind {
    unreadable_file,      ///< missing, a folder, no permission, too large
    malformed_file,       ///< not UTF-8, not JSON, wrong shape
    newer_version,        ///< written by a later program
    unknown_key,          ///< a key, part kind, terminal or choice nobody knows
    missing_value,        ///< a value that must be given is not
    bad_quantity,         ///< text that is no number with unit
    value_out_of_range,   ///< a number that makes no physical sense there
    duplicate_name,       ///< two parts, groups or dials of one name
    missing_reference,    ///< a name that points to nothing (part, terminal, net, parameter)
    limit_exceeded,       ///< more parts or bytes than the format allows
    unconnected_terminal, ///< a terminal without a net
    floating_net,         ///< a net with no DC path to gnd, or that reaches nothing else
    source_loop,          ///< ideal sources that force different voltages on the same nets
    singular_pencil,      ///< no equation determines some unknown
    no_loop_gain,         ///< a cut at which the loop gain has no finite value
    not_converged,        ///< an iteration gave up; never dressed up as a number
    cancelled,            ///< the caller asked to stop
    could_not_write,      ///< disk full, no permission
};

/// Bad input, said so that the user can mend it.
struct Fault {
    FaultKind kind{};
    std::string where;    ///< part, net or field: "R3.resistance", "net fb", "line 12"
    std::string sentence; ///< what was found and what was wanted
    std::string remedy;   ///< what to do; may be empty
    bool operator==(const Fault&) const = default;
};
using Faults = std::vector<Fault>;

/// A value or the faults that prevented it. Use: if (!r) show(r.faults()); else use(*r);
template <class T> class Result {
  public:
    Result(T value) : content_(std::move(value)) {}
    Result(Fault fault) : content_(Faults{std::move(fault)}) {}
    Result(Faults faults) : content_(std::move(faults)) { assert(!std::get<Faults>(content_).empty()); }
    explicit operator bool() const { return std::holds_alternative<T>(content_); }
    bool has_value() const { return std::holds_alternative<T>(content_); }
    T& operator*() { return std::get<T>(content_); }
    const T& operator*() const { return std::get<T>(content_); }
    T* operator->() { return &std::get<T>(content_); }
    const T* operator->() const { return &std::get<T>(content_); }
    /// @pre has_value(); throws std::bad_variant_access otherwise (a bug in the caller).
    T& value() { return std::get<T>(content_); }
    const T& value() const { return std::get<T>(content_); }
    /// @pre !has_value()
    const Faults& faults() const { return std::get<Faults>(content_); }
    const Fault& fault() const { return faults().front(); }

  private:
    std::variant<T, Faults> content_;
};

} // namespace sinewright
