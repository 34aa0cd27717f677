#pragma once
/// What the sheet can do to a design: plain functions on the document, without any widget.
/// Those that may have to refuse return the reason, said to the user; an empty text means done.
#include "core/design/design.hpp"
#include "ui/sheet/part_shape.hpp"
#include <QString>

namespace sinewright::ui {

using Refusal = QString;
using TerminalRefs = std::vector<TerminalRef>;

// Names
std::string free_ref(const Design& design, std::string_view kind);
std::string free_net(const Design& design);  ///< n1, n2, …
bool named_by_program(std::string_view net); ///< "n" and digits
std::optional<std::string> net_of(const Design& design, const TerminalRef& terminal);
TerminalRefs terminals_on(const Design& design, std::string_view net);
Refusal rename_net(Design& design, const std::string& net,
                   const std::string& name); ///< to a name in use: the nets become one
Refusal rename_part(Design& design, const std::string& ref, const std::string& name);

// Parts
/// A part of a kind with typical starting values, every end free, a free reference.
Part starting_part(const Design& design, std::string_view kind, const Place& place,
                   const std::optional<Value>& value = {});
void drop(Design& design, const Part& part); ///< free ends that lie on another part's end are joined to it
void remove_parts(Design& design, const std::vector<std::string>& refs);
void move_parts(Design& design, const std::vector<std::string>& refs, double dx, double dy);
void turn_parts(Design& design, const std::vector<std::string>& refs, int quarters); ///< clockwise, about their middle
void flip_parts(Design& design, const std::vector<std::string>& refs, bool upside_down);
/// The named parts alone, with the nets between them; for the clipboard.
Design excerpt(const Design& design, const std::vector<std::string>& refs);
/// Adds an excerpt's parts under free names, shifted. Nets that lie wholly in it are new, gnd stays gnd, other ends are
/// free.
std::vector<std::string> add_copies(Design& design, const Design& excerpt, double dx, double dy);
void fix_places(Design& design, const Places& worked_out);
/// Joins free ends of these parts that came to lie on other parts' ends.
void join_touching(Design& design, const std::vector<std::string>& refs);

// Values
Refusal set_value(Design& design, const std::string& ref, const QString& text);
/// One step in the series that goes with the tolerance, or by 1 %; false: the part has no value to step.
bool step_value(Design& design, const std::string& ref, int steps, bool fine);

// Joins
Refusal join(Design& design, const TerminalRef& a, const TerminalRef& b);
Refusal join_to_net(Design& design, const TerminalRef& terminal, const std::string& net);
Refusal ground(Design& design, const TerminalRef& terminal);
void free_end(Design& design, const TerminalRef& terminal);
/// Takes `leaving` off the net. Two or more stay together under a new name, one alone becomes free.
void split(Design& design, const std::string& net, const TerminalRefs& leaving);
/// Sets the net's name down at a point, joined to the terminal by name.
Refusal add_stub(Design& design, const TerminalRef& terminal, double x, double y);
void remove_label(Design& design, std::size_t label);

void set_cut(Design& design, const TerminalRef& terminal);

} // namespace sinewright::ui
