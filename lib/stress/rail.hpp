#pragma once
// The output as the converter holds it: its set point from the feedback net or as declared, what sets each end, the spike on the switch. Until the
// stage itself is computed, an unsaid spike is an assumption of 30 % of the rail (common practice, no source).
#include "stress/fields.hpp"

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
    std::vector<std::string> stage_parts; // switch and rectifier: told by the stage, not by the d.c. network
};

rail find_rail(const supply& s, const library& lib);

} // namespace onehand
