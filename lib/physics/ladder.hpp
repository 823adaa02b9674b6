#pragma once
// Diode-capacitor ladders under load. Convention: the drop is that of the output's peak; half the peak-to-peak ripple more gives the drop of its
// mean. For n stages of equal capacitors the sums below are I/(f C)(2n^3/3 + n^2/2 - n/6) and I/(f C) n(n+1)/2 (Naidu and Kamaraju, chapter 6); with
// unequal ones they are derived from the charge that passes each capacitor, and give Khalifa's figures for a doubler (example 16.1).
#include "quantity/bridge.hpp"

#include <vector>

namespace onehand::physics {

/// How the capacitors of a ladder hang: each on the one two nodes before it, or each on the switch node or a fixed net.
enum class ladder_form { stacked, from_base };

struct ladder_load {
    volt drop;   // of the output's peak
    volt ripple; // peak to peak
};

/// Capacitors in order of the nodes along the diodes, from the fixed end; the last is the output's.
ladder_load loaded(const std::vector<farad>& capacitors, ladder_form form, ampere load, hertz f);

/// Stages at which the output is greatest: sqrt(Up f C/I) (Naidu and Kamaraju).
double best_stages(volt peak, hertz f, farad c, ampere load);

/// Energy of n stages of equal capacitors, unloaded: C Up^2 (8n - 3)/2 (derived).
joule ladder_energy(int stages, farad c, volt peak);

} // namespace onehand::physics
