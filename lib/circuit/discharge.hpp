#pragma once
// Linear resistor-capacitor networks left to themselves: exact between t = 0 and for ever as sums of exponentials whose rates come from the one-sided
// form (singular values of sqrt(G) A C^-1/2), so that the slow rate survives stiff networks. Worst cases over boxes of every resistance, capacitance
// and initial voltage: initial voltages exactly (the response is linear in them), a network of one mode by monotonicity, others by corners, inner
// points and a certified bound from the slowest rate; what the bound does not reach is searched and widened by a stated margin. Diodes, tubes and
// switches have no place here yet. Node 0 is any reference node.
#include "circuit/network.hpp"

#include <string>

namespace onehand::circuit {

struct rc_resistance {
    int a = 0;
    int b = 0;
    box ohms; // infinite high end: may be absent
};

struct rc_capacitor {
    int plus = 0;
    int minus = 0;
    box farads;
    box volts; // at t = 0, plus above minus
};

struct rc_network {
    int nodes = 1;
    std::vector<rc_resistance> resistances;
    std::vector<rc_capacitor> capacitors;
    std::vector<int> original; // of a part of a network: the capacitors' places in the whole
};

/// A worst-case figure. `floating`: the pair is tied by nothing, there is no figure.
struct rc_figure {
    double value = 0.0;
    bool never = false; // a time that never comes
    int keeper = -1;    // the capacitor that keeps it
    bool floating = false;
    bool searched = false;
    double margin = 0.0; // relative, already in value
};

/// The last time |v(a) - v(b)| exceeds `limit` volt; 0 if it never does.
rc_figure last_time_above(const rc_network& n, int a, int b, double limit);

/// Greatest |v(a) - v(b)| that may be there after `seconds` (infinity: in the end).
rc_figure voltage_after(const rc_network& n, int a, int b, double seconds);

struct rc_pulse {
    rc_figure charge; // coulomb
    rc_figure energy; // joule
};
/// What flows through `ohms` put from a to b at t = 0, within `seconds` (infinity: in the end).
rc_pulse delivered(const rc_network& n, int a, int b, double ohms, double seconds);

/// One network of plain numbers, for tests and curves: v(a) - v(b) at a time.
double response(const rc_network& n, int a, int b, double seconds);

} // namespace onehand::circuit
