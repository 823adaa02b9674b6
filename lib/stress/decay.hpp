#pragma once
// Switched off: what the linear R-C network that surely stays connected leaves on a pair of nets, and for how long (design section 6, laws 3 and 4).
// Only soldered resistive paths discharge; tubes, loads, switches and plugs do not; the rectifier is open. Each capacitor starts anywhere between its
// least and greatest voltage.
#include "stress/solution.hpp"

#include <memory>

namespace onehand {

/// A capacitor as it may stand charged when the stage stops. A module's inner capacitance is one, named by the converter.
struct charged_capacitor {
    std::string ref;
    std::string positive, negative;
    value capacitance;
    value voltage; // positive above negative
    value energy;
    value charge;
    bool discharge_path = false; // soldered resistances join its nets
    std::string only_part;       // the one part without which nothing does; empty: none or several
};

/// Every capacitor of the description with what it can hold, over running and no-load.
std::vector<charged_capacitor> charged_capacitors(const supply& s, const library& lib, const rail& output, const std::vector<dc_solution>& states);

/// How the supply stands after the stage has stopped.
struct off_case {
    bool input_shorted = false;
    bool output_unplugged = false;
    std::string broken; // one part taken out ("R9/1"); empty: all there

    friend bool operator==(const off_case&, const off_case&) = default;
};

class decay_network {
public:
    decay_network(const supply& s, const library& lib, const std::vector<charged_capacitor>& capacitors, const off_case& how);
    ~decay_network();
    decay_network(decay_network&&) noexcept;
    decay_network& operator=(decay_network&&) noexcept;

    value time_to(const std::string& a, const std::string& b, double volts) const;
    value left_after(const std::string& a, const std::string& b, double seconds) const;
    value final_voltage(const std::string& a, const std::string& b) const;

    struct pulse {
        value charge;
        value energy;
    };
    /// Into a resistance put from a to b at the instant of switch-off, over the first `seconds`.
    pulse into_body(const std::string& a, const std::string& b, double ohms, double seconds) const;

    struct touch {
        value peak;  // voltage across the resistance in the first instant
        value above; // how long it stays above the limit
    };
    /// The single pulse that a resistance put from a to b at the instant of switch-off sees.
    touch touched(const std::string& a, const std::string& b, double ohms, double volts) const;

private:
    struct inside;
    std::unique_ptr<inside> inside_;
};

} // namespace onehand
