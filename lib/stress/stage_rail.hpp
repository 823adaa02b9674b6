#pragma once
// The part of a rail that the stage's own figures decide: what a ladder multiplies, how far start-up carries it, where it goes without feedback, what
// swings and how far. Inside the room only.
#include "stress/rail_load.hpp"

namespace onehand {

/// How far start-up carries the output past its set point.
void find_start_up(const supply& s, const library& lib, rail& r);

/// What a ladder makes of its port; 1 for any other stage, 0 where it cannot be solved.
double lift_of(const rail& r);
/// The parameters of a full cycle and more.
std::vector<stage_model::given> with_cycle(const stage_model& m, std::vector<stage_model::given> more);
value scaled_by(value v, double factor);

/// Fills model, ladder, port, start-up and runaway; the output itself where nothing regulates it, or feedback is lost.
void find_stage(const supply& s, const library& lib, rail& r);

/// Switch peak, clamp and secondary of a stage whose start-up is known.
void find_peak(const supply& s, rail& r);

/// Rail at which full cycles without a pause settle: balance with what surely loads it, the switch's own capacitance, its breakdown at 1.3 times its
/// rating; the least of them.
struct free_run {
    value rail;
    std::string ends;
};
free_run run_free(const supply& s, const rail& r, double siemens);

/// Capacitance at the port that the stage pumps into: of a ladder the sum of C times the square of its own multiple.
value port_capacitance(const supply& s, const library& lib, const rail& r);

/// Steady current through a resistance put from a to b: by the nodal solve with the rail stiff, and no more than the stage delivers where the rail
/// alone feeds the pair. On the chain that senses the output the resistance moves the set point: the rail is then taken as far as it can run.
value touch_current(const supply& s, const library& lib, const rail& r, state in, const std::string& a, const std::string& b, double ohms);

/// Current and power that the stage can push at most into a resistance across its output, the set point counted.
struct push {
    value current;
    value power;
};
push push_into(const supply& s, const rail& r, double ohms);

} // namespace onehand
