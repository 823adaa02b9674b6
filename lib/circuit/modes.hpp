#pragma once
// Modes of one R-C network of plain numbers. Inside the room only.
#include "circuit/discharge.hpp"

namespace onehand::circuit {

/// Values of one point of the boxes.
struct rc_point {
    std::vector<double> ohms; // infinity: absent
    std::vector<double> farads;
};

/// v(a) - v(b) as a sum over modes, told apart by the initial voltage of each capacitor: share[mode][capacitor].
struct rc_modes {
    std::vector<double> rate; // 1/s; 0: keeps its charge
    std::vector<std::vector<double>> share;
    bool floating = false;

    /// Greatest |v| at a time over the initial voltages' boxes.
    double envelope(const std::vector<rc_capacitor>& capacitors, double seconds) const;
};

rc_modes modes_of(const rc_network& n, const rc_point& p, int a, int b);

/// The part of the network that can influence the pair: everything R or C joins to it. Node numbers stay.
rc_network island_of(const rc_network& n, int a, int b);

/// The capacitor whose plates no resistance path joins; -1 if all are joined.
int keeper_of(const rc_network& n, const rc_point& p);

/// Last time the envelope exceeds the limit; infinity if it never falls below; 0 if it never exceeds.
double last_time(const rc_modes& m, const std::vector<rc_capacitor>& capacitors, double limit);

} // namespace onehand::circuit
