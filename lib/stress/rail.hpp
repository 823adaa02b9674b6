#pragma once
// The output as the converter holds it: its set point from the feedback net, as declared or with the cycles running free; what sets each end; how far
// it is carried at start-up; where it goes when feedback is lost; the nets of the stage that swing. An unsaid spike on the switch is an assumption of
// 30 % of the rail (common practice, no source).
#include "stress/ladder.hpp"
#include "stress/stage_model.hpp"

namespace onehand {

struct rail {
    struct end {
        std::string part;
        std::string at_low, at_high; // "low", "high", "inside"
    };
    std::string positive, negative; // output nets
    std::string topology;           // empty: no converter written
    value output;                   // positive above negative, running
    std::string basis;              // "held by FB" | "as declared" | empty
    std::vector<end> set_by;
    bool feedback_lost = false;
    std::string lost_why;
    value standby;          // stage stopped and settled, input on
    std::string switch_net; // boost: swings between the return of the switch and the peak
    std::string switch_return;
    value peak; // drain to source at its highest
    std::string gate_net;
    std::vector<std::string> stage_parts; // switch, rectifier, ladder and clamp diodes: told by the stage, not by the d.c. network

    stage_model model; // of the inductive stage; port, drop and so on are set
    ladder rungs;      // of a boost-multiplier, or of any ladder on the switch node
    value port;        // what the inductive stage feeds: the output, or the first peak of its ladder
    value multiple;    // output over port, droop under load counted
    value droop;       // of a ladder's peak under load
    value ladder_ripple;
    value start_up;                              // output at its highest while it starts, or its load goes
    value overshoot;                             // above the set point
    value runaway;                               // output with feedback lost, until something gives
    std::string runaway_ends;                    // what ends it
    value reflected;                             // flyback: output seen from the primary
    std::string secondary_net, secondary_return; // flyback: the end of the secondary that swings, the one that stands
    value secondary_swing;                       // of the one above the other
    std::string clamp_net, clamp_return;
    value clamp_voltage; // of the clamp's capacitor
    value clamp_power;
};

rail find_rail(const supply& s, const library& lib);

} // namespace onehand
