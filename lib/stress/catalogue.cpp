#include "stress/facts.hpp"

namespace onehand {

namespace {

using type = value::type;

fact_spec solved(std::string subject, std::string name, dimension d, std::string meaning, std::vector<std::string> depends = {})
{
    return {std::move(subject), std::move(name), type::number, d, std::move(meaning), true, std::move(depends), {}};
}

fact_spec told(std::string subject, std::string name, dimension d, std::string meaning)
{
    return {std::move(subject), std::move(name), type::number, d, std::move(meaning), false, {}, {}};
}

fact_spec truth(std::string subject, std::string name, std::string meaning)
{
    return {std::move(subject), std::move(name), type::truth, dim::none, std::move(meaning), false, {}, {}};
}

fact_spec choice(std::string subject, std::string name, std::string meaning, std::vector<std::string> choices)
{
    return {std::move(subject), std::move(name), type::choice, dim::none, std::move(meaning), false, {}, std::move(choices)};
}

void add_parts(std::vector<fact_spec>& list)
{
    list.push_back(solved("part", "voltage", dim::voltage, "across the part, first terminal positive; of one body where it is a string"));
    list.push_back(solved("part", "current", dim::current, "through the part, into its first terminal"));
    list.push_back(solved("part", "power", dim::power, "dissipated in the part, spread jointly", {"value"}));
    list.push_back(choice("part", "derating", "how far good practice goes; none if unsaid", {"none", "usual", "severe"}));
    list.push_back(told("part", "ambient", dim::temperature, "air around the part: ambient and the rise inside"));
    list.push_back(solved("part", "insulation-voltage", dim::voltage, "greatest between any two of its nets, or of one against the return"));
    list.push_back(told("fuse", "source-current", dim::current, "what the input can deliver for long, as written"));
    list.push_back(truth("lamp", "indicates", "its role is to indicate; unknown without a role"));
    list.push_back(truth("capacitor", "class-2", "its dielectric is a class 2 ceramic"));
    list.push_back(truth("capacitor", "bridges-touchable", "it joins something that can be touched, not bonded to the return, to another net"));
    list.push_back(told("capacitor", "leakage-drop", dim::voltage, "greatest leakage times the resistance that feeds it"));
    list.push_back(truth("capacitor", "in-series", "it shares a voltage with other capacitors in a string"));
    list.push_back(truth("capacitor", "balanced", "a resistor stands straight across it"));
    list.push_back(told("capacitor", "balancing-resistance", dim::resistance, "of the resistors straight across it, at its greatest"));
    list.push_back(told("capacitor", "balancing-limit", dim::resistance, "(n U_rated - U)/((n - 1) I_leak)"));
    list.push_back(solved("capacitor", "initial-share", dim::voltage, "its share of the string's voltage by capacitance alone"));
    list.push_back(solved("diode", "reverse-voltage", dim::voltage, "cathode above anode at its highest"));
    list.push_back(solved("zener", "reverse-voltage", dim::voltage, "cathode above anode at its highest"));
    list.push_back(
        solved("capacitor", "reverse-voltage", dim::voltage, "how far its marked negative stands above its marked positive; 0 V if never"));
    list.push_back(truth("capacitor", "polarised", "written with positive and negative"));
    list.push_back(truth("capacitor", "electrolytic", "its dielectric is an electrolyte: over voltage or reversed it can burst"));
    list.push_back(solved("trimmer", "track-current", dim::current, "the greater of the two sections' currents, wiper anywhere in its travel"));
    list.push_back(solved("trimmer", "span-voltage", dim::voltage, "greatest voltage between any two of its terminals", {}));
}

void add_stage_parts(std::vector<fact_spec>& list)
{
    for (const char* s : {"inductor", "transformer"}) {
        list.push_back(truth(s, "stores", "it is the coil or transformer of the converter's stage"));
        list.push_back(solved(s, "peak-current", dim::current, "greatest recurring peak of the stage's coil current"));
        list.push_back(solved(s, "start-up-peak", dim::current, "greatest coil current until the rail stands, lossless"));
        list.push_back(solved(s, "effective-current", dim::current, "root mean square of the coil current at the greatest load"));
    }
    for (const char* s : {"mosfet", "bjt"}) {
        list.push_back(truth(s, "switches-stage", "it is the switch of the converter's stage"));
        list.push_back(solved(s, "effective-current", dim::current, "root mean square of the switch current at the greatest load"));
        list.push_back(solved(s, "peak-voltage", dim::voltage, "across the switch at its highest, the spike included"));
    }
    list.push_back(solved("mosfet", "heat", dim::power, "I^2 Ron hot, and its own capacitance emptied into it each cycle"));
    list.push_back(solved("mosfet", "junction", dim::temperature, "air inside + heat times thermal resistance"));
    list.push_back(solved("mosfet", "avalanche-pulse", dim::energy, "one full cycle into the switch when the rectifier opens"));
    list.push_back(told("mosfet", "gate-peak", dim::voltage, "highest drive level; unsaid what feeds the driver"));
    list.push_back(told("mosfet", "gate-high", dim::voltage, "drive level that switches it on, as written"));
    list.push_back(told("mosfet", "gate-low", dim::voltage, "drive level that switches it off, as written"));
    list.push_back(truth("diode", "rectifies", "it is the rectifier of the stage, or a diode of its ladder"));
    list.push_back(told("diode", "recovery-share", dim::none, "recovery time times switching frequency"));
    list.push_back(solved("diode", "average-current", dim::current, "mean forward current at the greatest load"));
    list.push_back(solved("diode", "inrush", dim::current, "peak through it when the input is switched on, everything empty"));
    list.push_back(solved("diode", "junction", dim::temperature, "air inside + forward drop times current times thermal resistance"));
    list.push_back(truth("capacitor", "on-input", "it stands straight across the input"));
    list.push_back(truth("capacitor", "start-up-differs", "start-up is computed or told apart from the output; a declared output includes it"));
    list.push_back(truth("capacitor", "at-output", "it stands straight across the output of a stage"));
    list.push_back(solved("capacitor", "ripple-through", dim::current, "effective current that the rectifier's pulses may send through it"));
    list.push_back(told("capacitor", "surge-limit", dim::voltage, "what it stands briefly: as written, by its standard, else its rated voltage"));
    list.push_back(solved("capacitor", "runaway-voltage", dim::voltage, "its voltage when feedback is lost"));
    list.push_back(told("capacitor", "hot-plug-voltage", dim::voltage, "twice the input"));
    list.push_back(told("capacitor", "adapter-voltage", dim::voltage, "highest adapter whose plug fits"));
    list.push_back(
        told("capacitor", "reversed-voltage", dim::voltage, "against its marking with the input reversed; 0 V if it is not straight on it"));
    list.push_back(truth("capacitor", "input-reversible", "the input can be connected the wrong way round, as written"));
    for (const char* s : {"capacitor", "fuse"}) {
        list.push_back(truth(s, "own-stage", "the converter's stage is described part by part, not a module"));
    }
    list.push_back(solved("fuse", "inrush-integral", {{0, 0, 1, 2, 0}}, "I2t of switching on with everything empty"));
    list.push_back(told("fuse", "short-current", dim::current, "what flows with the switch held on: coil and switch, or what the input delivers"));
    list.push_back(truth("fuse", "in-input", "it stands in the input path"));
    for (const char* s : {"timer", "controller"}) {
        list.push_back(truth(s, "on-input", "its supply is the input itself"));
        list.push_back(told(s, "adapter-voltage", dim::voltage, "highest adapter whose plug fits"));
    }
}

void add_converter(std::vector<fact_spec>& list)
{
    list.push_back(choice("converter", "mode", "whether the coil runs empty each cycle", {"continuous", "discontinuous", "either"}));
    const std::pair<const char*, const char*> amperes[] = {{"inductor-peak", "greatest recurring peak of the coil current"},
                                                           {"inductor-average", "mean coil current at the load"},
                                                           {"inductor-effective", "root mean square of the coil current"},
                                                           {"inductor-ripple", "coil current, peak to peak"},
                                                           {"start-up-peak", "greatest coil current until the rail stands, lossless"},
                                                           {"switch-effective", "root mean square of the switch current"},
                                                           {"rectifier-average", "mean rectifier current"},
                                                           {"rectifier-effective", "root mean square of the rectifier current"},
                                                           {"input-current", "mean input current, none to full load"},
                                                           {"load-current", "what hangs on the output draws, none to its most"},
                                                           {"inrush-current", "peak through coil and rectifier at switch-on"},
                                                           {"held-on-current", "with the switch held on"}};
    for (const auto& [name, meaning] : amperes) {
        list.push_back(solved("converter", name, dim::current, meaning));
    }
    list.push_back(solved("converter", "slack", dim::none, "1 - (on + emptying)/T of a full cycle: negative where cycles run into each other"));
    list.push_back(solved("converter", "frequency", dim::frequency, "of full cycles"));
    list.push_back(solved("converter", "duty", dim::none, "of full cycles"));
    list.push_back(solved("converter", "output-ripple", dim::voltage, "peak to peak on the output's capacitance, series resistance not counted"));
    list.push_back(solved("converter", "load-power", dim::power, "output times load current"));
    list.push_back(solved("converter", "available-power", dim::power, "full cycles without a pause, losses counted"));
    list.push_back(solved("converter", "headroom", dim::none, "greatest load current it can hold over what is drawn"));
    list.push_back(solved("converter", "losses", dim::power, "coil, switch and rectifier at the load"));
    list.push_back(solved("converter", "overshoot", dim::voltage, "above the set point at start-up or when the load goes"));
    list.push_back(solved("converter", "inrush-integral", {{0, 0, 1, 2, 0}}, "I2t of switching on with everything empty"));
    list.push_back(solved("converter", "runaway-voltage", dim::voltage, "output with feedback lost, until something ends it"));
    list.push_back(solved("converter", "runaway-energy", dim::energy, "stored across the output then"));
    list.push_back(solved("converter", "body-power", dim::power, "into 2 kohm across the output, running"));
    list.push_back(solved("converter", "lowest-body-current", dim::current, "across the output, into the lowest published body resistance"));
    list.push_back(solved("converter", "clamp-power", dim::power, "what a flyback's clamp dissipates"));
    list.push_back(truth("converter", "wiper-open-raises", "a trimmer of the feedback whose wiper lifts off raises the output"));
}

void add_gaps(std::vector<fact_spec>& list)
{
    for (const char* s : {"gap", "net-pair"}) {
        list.push_back(solved(s, "voltage", dim::voltage, "working voltage between the nets: magnitude, over running, no-load and standby"));
        list.push_back(truth(s, "person-side", "one of the nets can be touched, the other is another circuit's or above 60 V"));
    }
    list.push_back(told("gap", "clearance", dim::length, "measured distance through air"));
    list.push_back(told("gap", "creepage", dim::length, "measured distance along the surface"));
    list.push_back(told("gap", "required-creepage", dim::length,
                        "IEC 60664-1 creepage at the working voltage, pollution degree and material; twice for reinforced"));
    list.push_back(told("gap", "required-clearance", dim::length,
                        "IEC 60664-1 clearance: steady peak, the mains' transient, least by pollution degree, altitude counted"));
    list.push_back(told("gap", "iec-61010-1-clearance", dim::length, "IEC 61010-1 table K.11, altitude counted; 0 m inside one circuit"));
    list.push_back(told("gap", "iec-61010-1-creepage", dim::length, "as IEC 60664-1, twice for reinforced; 0 m inside one circuit"));
    list.push_back(told("gap", "iec-62368-1-clearance", dim::length, "IEC 62368-1 tables 10 and 14, altitude counted; 0 m inside one circuit"));
    list.push_back(told("gap", "iec-62368-1-creepage", dim::length, "IEC 62368-1 table 17, twice for reinforced; 0 m inside one circuit"));
    list.push_back(told("gap", "ipc-2221-spacing", dim::length, "IPC-2221 table 6-1 at its column"));
    list.push_back(
        choice("gap", "board-column", "IPC-2221 column by surface, coating, layer and altitude", {"none", "B1", "B2", "B3", "B4", "A5", "A6", "A7"}));
    list.push_back(told("gap", "least-distance", dim::length, "lesser of clearance and creepage"));
    list.push_back(truth("gap", "grooved", "a groove or slot is counted in its path"));
    list.push_back(told("gap", "groove", dim::length, "width of the narrowest groove in the path"));
    list.push_back(told("gap", "least-groove", dim::length, "X of IEC 60664-1: narrower grooves are measured straight across"));
    list.push_back(truth("gap", "switches", "one of its nets is the switch node"));
    list.push_back(told("gap", "switching-frequency", dim::frequency, "of the drive, as written"));
    list.push_back(choice("gap", "insulation", "as written, or by law", {"functional", "basic", "supplementary", "reinforced"}));
    list.push_back(truth("gap", "bridge-worse", "bridging the gap puts hazardous voltage on something that can be touched, or raises a class"));
    list.push_back(told("gap", "pollution-degree", dim::none, "1 to 4"));
    list.push_back(choice("net-pair", "covered", "whether a written gap, a floor gap or nothing covers the pair", {"gap", "floor", "none"}));
}

void add_energy(std::vector<fact_spec>& list)
{
    list.push_back(solved("stored", "voltage", dim::voltage, "greatest voltage held"));
    list.push_back(told("stored", "capacitance", dim::capacitance, "all that can reach the pair, tolerance included"));
    list.push_back(solved("stored", "energy", dim::energy, "C U^2 / 2, spread jointly", {"value"}));
    list.push_back(solved("stored", "charge", dim::charge, "C U, spread jointly", {"value"}));
    list.push_back(solved("stored", "at-once-energy", dim::energy, "into the body within 10 ms, through what is in series"));
    list.push_back(solved("stored", "at-once-charge", dim::charge, "into the body within 10 ms, through what is in series"));
    list.push_back(truth("stored", "is-pair", "an accessible pair, not a single capacitor"));
    list.push_back(truth("stored", "discharge-path", "a soldered resistive path joins the two nets"));
    list.push_back(choice("stored", "paths", "how many single parts would have to fail before nothing discharges it; qualified: one, and it is",
                          {"none", "one", "qualified", "several"}));
    list.push_back(solved("stored", "pulse-current", dim::current, "through 2 kohm in the first instant after switch-off"));
    list.push_back(solved("stored", "pulse-time", dim::time, "how long 2 kohm across the pair sees more than 60 V"));
    list.push_back(told("stored", "pulse-es2-voltage", dim::voltage, "IEC 62368-1 table 6, ES2, at the time to 60 V"));
    list.push_back(told("stored", "pulse-es2-current", dim::current, "IEC 62368-1 table 7, ES2, at the pulse time"));
    list.push_back(choice("stored", "person", "ordinary if unsaid", {"ordinary", "instructed", "skilled"}));
    list.push_back(truth("stored", "label", "as written; absent if not"));
    list.push_back(truth("stored", "discharge-procedure", "a written discharge procedure is at the bench; absent if not written"));
    list.push_back(truth("stored", "shorting-lead", "a shorting lead is there to be left in place; absent if not written"));
    list.push_back(truth("stored", "discharge-resistor", "a resistor tool to discharge through first; absent if not written"));
    list.push_back(told("stored", "es1-voltage", dim::voltage, "IEC 62368-1 table 5, ES1 limit at its capacitance"));
    list.push_back(told("stored", "es2-voltage", dim::voltage, "IEC 62368-1 table 5, ES2 limit at its capacitance"));

    list.push_back(solved("access", "voltage", dim::voltage, "between the nets, magnitude"));
    list.push_back(solved("access", "touch-current", dim::current, "steady, through the standard's body of 2 kohm"));
    list.push_back(solved("access", "charge", dim::charge, "all that can flow from the pair after switch-off"));
    list.push_back(choice("access", "when", "when it can be reached", {"always", "cover off", "plug withdrawn"}));
    list.push_back(choice("access", "person", "ordinary if unsaid", {"ordinary", "instructed", "skilled"}));
    list.push_back(told("access", "capacitance", dim::capacitance, "all the charge that can flow, at the pair's voltage"));
    list.push_back(told("access", "es1-voltage", dim::voltage, "IEC 62368-1 table 5, ES1 limit at what flows at once"));
    list.push_back(told("access", "es2-voltage", dim::voltage, "IEC 62368-1 table 5, ES2 limit at what flows at once"));
    list.push_back(solved("access", "faulted-voltage", dim::voltage, "greatest with any single part on its way failed; touchable pairs only"));
    list.push_back(
        solved("access", "faulted-touch-current", dim::current, "through 2 kohm, any single part on its way failed; touchable pairs only"));
    list.push_back(truth("access", "label", "as written; absent if not"));
    list.push_back(truth("access", "wet", "used where it is wet, as written"));
    list.push_back(solved("access", "broken-after-2-s", dim::voltage,
                          "left two seconds after switch-off with the worst single discharge path open, qualified resistors excepted"));
    list.push_back(truth("stored", "touchable", "a pair that is open always or by plug withdrawn"));
    list.push_back(truth("access", "touchable", "open always, by plug withdrawn, or the chassis"));
    list.push_back(truth("access", "discharge-path", "a soldered resistive path joins the two nets"));
    list.push_back(solved("access", "after-1-s", dim::voltage, "left one second after switch-off, input open or shorted, whichever is worse"));
    list.push_back(solved("access", "after-2-s", dim::voltage, "left two seconds after switch-off"));
    list.push_back(solved("access", "after-5-s", dim::voltage, "left five seconds after switch-off"));
    list.push_back(solved("access", "after-10-s", dim::voltage, "left ten seconds after switch-off"));
}

void add_whole(std::vector<fact_spec>& list)
{
    list.push_back(solved("converter", "set-point", dim::voltage, "output at its set point, trimmer anywhere, tolerances against it"));
    list.push_back(truth("converter", "feedback-lost", "at some setting the feedback no longer depends on the output, or cannot hold it"));
    list.push_back(choice("converter", "topology", "as written", {"boost", "flyback", "boost-multiplier", "module"}));
    list.push_back(truth("converter", "isolates", "the topology separates output from input"));
    list.push_back(truth("supply", "input-fused", "a fuse stands in the input path: nothing is fed but through it"));
    list.push_back(truth("supply", "input-isolated", "as written"));
    list.push_back(truth("supply", "label", "as written; absent if not"));
    list.push_back(truth("supply", "indicator", "as written; absent if not"));
    list.push_back(truth("supply", "interlock", "as written; absent if not"));
    list.push_back(truth("supply", "discharge-procedure", "a written discharge procedure is at the bench; absent if not written"));
    list.push_back(truth("supply", "shorting-lead", "absent if not written"));
    list.push_back(truth("supply", "discharge-resistor", "absent if not written"));
    list.push_back(truth("supply", "wet", "used where it is wet, as written"));
    list.push_back(choice("supply", "enclosure", "as written; open if not", {"open", "covered", "finger-proof"}));
    for (const char* what : {"capacitors", "sources", "access"}) {
        list.push_back(truth("supply", std::string(what) + "-attested", "the description says that its list is complete"));
    }
    list.push_back(choice("supply", "person", "ordinary if unsaid", {"ordinary", "instructed", "skilled"}));
    list.push_back(choice("supply", "setting", "as written", {"teaching lab", "repair bench", "display equipment"}));
    list.push_back(told("supply", "meter-error", dim::none, "how much too low a 10 Mohm meter reads on the net that is fed most weakly"));
    list.push_back(choice("supply", "meter-error-net", "that net", {}));
    list.push_back(
        solved("supply", "input-after-fault", dim::voltage, "input pins after a shorted rectifier, charge shared with the input's capacitors"));
    list.push_back(truth("supply", "shares-input", "the topology joins output and input"));
    list.push_back(truth("supply", "input-touchable", "the input's positive net is open always or by plug withdrawn"));
    list.push_back(truth("supply", "chassis-declared", "a chassis net is written"));
    list.push_back(truth("supply", "return-bonded", "the return is bonded to the chassis"));
    list.push_back(
        solved("supply", "highest-voltage", dim::voltage, "greatest voltage between any net and the return, or inside an output that floats"));
    list.push_back(solved("supply", "highest-energy", dim::energy, "greatest energy stored in one accessible pair"));
}

} // namespace

const std::vector<fact_spec>& fact_catalogue()
{
    static const std::vector<fact_spec> list = [] {
        std::vector<fact_spec> l;
        add_parts(l);
        add_stage_parts(l);
        add_gaps(l);
        add_energy(l);
        add_converter(l);
        add_whole(l);
        return l;
    }();
    return list;
}

} // namespace onehand
