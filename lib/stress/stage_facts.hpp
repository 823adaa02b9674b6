#pragma once
// Figures of the converter that follow from its stage and its load: currents, mode, ripple, losses, what it can push, what it does at switch-on and
// without feedback. Inside the room only.
#include "stress/solved.hpp"

namespace onehand {

/// A converter's figure by its name in the catalogue; nothing if it is none of these.
std::optional<value> stage_fact(const solved_supply& s, const std::string& name);

/// The same, looked up: found once, then remembered.
value converter_figure(const solved_supply& s, const std::string& name);

/// A figure of a part that belongs to the stage or stands on its input or output; nothing if it is none of these.
std::optional<value> stage_part_fact(const solved_supply& s, const part& p, const std::string& name);

/// Whether even full cycles run empty before the next: 1 - (on + emptying)/T at the port.
value stage_slack(const solved_supply& s);
bool surely_discontinuous(const solved_supply& s);

/// Whether whole cycles are let through one after the other, or may be; and what cannot be told of them where they run into each other.
bool by_whole_cycles(const solved_supply& s);
value cannot_tell(const solved_supply& s, const std::string& what);

value inductor_peak(const solved_supply& s);
value start_up_peak(const solved_supply& s);
value switch_effective(const solved_supply& s);
value rectifier_average(const solved_supply& s);

value output_ripple(const solved_supply& s);
value held_on_current(const solved_supply& s);
value body_power(const solved_supply& s);
value lowest_body_current(const solved_supply& s);
value clamp_power(const solved_supply& s);
value wiper_open_raises(const solved_supply& s);

/// Nets that the input's positive net is one with: fuses, wires and plugs counted through, the stage's own coil not.
std::set<std::string> input_side(const solved_supply& s);
/// Switched on with everything empty: peak through the coil and its integral, with the input's own capacitors for the latter.
value inrush_current(const solved_supply& s);
value inrush_integral(const solved_supply& s);

/// What the stage pushes through a resistance across its output, running: by power, by set point.
value pushed_current(const solved_supply& s, double ohms);

/// Without feedback: how soon the rail reaches a voltage from its set point, at its soonest.
value runaway_time(const solved_supply& s, double volts);
/// A part's own voltage when the rail stands at a multiple of its set point: proportional.
struct exceeded {
    std::string ref, what;
    double rail = 0.0; // rail voltage at which it happens
    value time;
};
/// Energy across the output at its runaway.
value runaway_energy(const solved_supply& s);
/// A part's voltage at the runaway: its voltage at the set point, raised as the rail is.
value runaway_share(const solved_supply& s, const part& p);
/// Ratings that a runaway passes, in the order it passes them.
std::vector<exceeded> runaway_order(const solved_supply& s);
/// The same in words, with what ends it and what may follow; empty where nothing is known of it.
std::vector<std::string> runaway_story(const solved_supply& s);
/// What limits the current of a shorted output, in words.
std::string short_story(const solved_supply& s);

} // namespace onehand
