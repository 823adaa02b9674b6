// Wrong descriptions: one row each, what is written and every complaint with its line and column. Rows add to, or replace in, a small base that reads
// without complaint.
#include "published/embedded.hpp"
#include "supply/supply.hpp"

#include <doctest/doctest.h>

#include <fmt/format.h>

using namespace onehand;

namespace {

const char* const base = R"toml([supply]
name = "T"
return = "0V"
[input]
nets = ["VIN", "0V"]
voltage = "12 V"
[fuse]
F1 = { nets = ["VIN", "VF"], rated-current = "2 A" }
[resistor]
R1 = { nets = ["HT", "0V"], value = "1M" }
R2 = { nets = ["HT", "VF"], value = "1M" }
)toml";

struct added {
    const char* text;
    const char* complaints;
};

const added additions[] = {
    {"[use]\ninside-rise = \"5 degC\"", "13:15: 'inside-rise' is a difference: write it in K, like \"15 K\""},
    {"[resistors]\nR3 = { nets = [\"HT\", \"0V\"] }", "12:2: 'resistors' is no section and no kind of part; nearest known name: resistor"},
    {"[resistance]\nR3 = { nets = [\"HT\", \"0V\"] }", "12:2: 'resistance' is no section and no kind of part"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], valeu = \"1 uF\" }", "13:29: unknown key 'valeu' in capacitor 'C1'; nearest known name: value"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = 1 }", "13:37: a bare number: a capacitance is due: write it like \"3.3 uF\", in quotes"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"10M\" }",
     "13:40: 'M' on a capacitor is a tolerance letter (20 %) or a multiplier: write the value with its unit, and the tolerance as \"+-20%\""},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"104\" }",
     "13:38: '104' is a bare number, or the three-digit code for 100 nF: write the value with its unit"},
    {"[capacitor]\nC1 = { nets = [\"HT\"], value = \"1 uF\" }", "13:15: 'nets' has 2 nets, 1 are written"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\", \"VF\"], value = \"1 uF\" }", "13:15: 'nets' has 2 nets, 3 are written"},
    {"[capacitor]\nC1 = { nets = \"HT\", value = \"1 uF\" }", "13:15: 'nets' is a list of nets"},
    {"[capacitor]\nC1 = { value = \"1 uF\" }", "13:1: 'C1' names no nets: a capacitor is written with 'nets' or 'positive', 'negative'"},
    {"[capacitor]\nC1 = { positive = \"HT\", value = \"1 uF\" }", "13:1: 'C1' has no 'negative'"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], positive = \"HT\", negative = \"0V\", value = \"1 uF\" }",
     "13:1: 'C1' names its nets in two ways: 'nets' or 'positive', 'negative'"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"HT\"], value = \"1 uF\" }", "13:22: both ends of 'C1' are the same net, 'HT'"},
    {"[capacitor]\nC1 = { positive = \"HT\", negative = \"HT\", value = \"1 uF\" }", "13:36: both ends of 'C1' are the same net, 'HT'"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"-1 uF\" }", "13:37: 'value' cannot be negative"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", rated-voltage = \"400VDC\" }",
     "13:65: write the unit alone, \"400 V\": the file speaks of d.c. throughout"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", dielectric = \"polyproplyene\" }",
     "13:58: 'polyproplyene' is no dielectric; nearest known name: polypropylene"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", dielectric = \"air\" }",
     "13:58: 'air' is no dielectric: aluminium electrolytic, tantalum, polypropylene, polyester, PPS, PEN, paper, C0G, X7R, X5R, Y5V, Z5U, mica, "
     "polystyrene"},
    {"[capacitor]\nR1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\" }", "13:1: 'R1' is a resistor already [also 10:1]"},
    {"[capacitor]\nC1 = \"1 uF\"", "13:6: a part is a table: C1 = { ... }"},
    {"[capacitor]\n\"C/1\" = { nets = [\"HT\", \"0V\"], value = \"1 uF\" }", "13:1: a reference has no '/', '~', '.', '*' or blank: 'C/1'"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0 V\"], value = \"1 uF\" }", "13:22: a net's name has no blanks, quotes, '/', '~' or '*': '0 V'"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"\"], value = \"1 uF\" }", "13:22: a net has a name"},
    {"[capacitor]\nC1 = { nets = [\"HT\", 0], value = \"1 uF\" }", "13:22: a net is a name in quotes"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", series = 0 }", "13:54: 'series' is a whole number from 1 to 50, without quotes"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", series = \"2\" }",
     "13:54: 'series' is a whole number from 1 to 50, without quotes"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", series = 1.5 }",
     "13:54: 'series' is a whole number from 1 to 50, without quotes"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", role = \"bleed\" }", "13:52: 'bleed' is no role; nearest known name: bleeder"},
    {"[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], value = \"1 uF\", measured = \"0.9\" }",
     "13:57: a bare number: a capacitance is due: write it like \"3.3 uF\""},
    {"[capacitor.C1]\nnets = [\"HT\", \"0V\"]\nvalue = \"3300mF\"",
     "14:10: mF is the millifarad: 3300mF is 3.3 F; for microfarads write uF, for farads write F"},
    {"[trimmer]\nP1 = { ends = [\"HT\", \"0V\"], wiper = \"HT\", value = \"2k2\", position = \"0.3 .. 1.4\" }",
     "13:69: 'position' runs from 0, the first end, to 1"},
    {"[trimmer]\nP1 = { ends = [\"HT\", \"0V\"], value = \"2k2\" }", "13:1: 'P1' has no 'wiper'"},
    {"[trimmer]\nP1 = { ends = [\"HT\", \"0V\"], wiper = \"HT\", value = \"2k2\", series = 2 }",
     "13:1: only a part of two ends can be told in series or parallel: write 'P1' part by part"},
    {"[diode]\nD1 = { nets = [\"HT\", \"0V\"] }", "13:1: 'D1' names no nets: a diode is written with 'anode', 'cathode'"},
    {"[diode]\nD1 = { anode = \"0V\", kathode = \"HT\" }",
     "13:1: 'D1' has no 'cathode' || 13:22: unknown key 'kathode' in diode 'D1'; nearest known name: cathode"},
    {"[mosfet]\nQ1 = { drain = \"HT\", gate = \"VF\", rated-voltage = \"400 V\" }", "13:1: 'Q1' has no 'source'"},
    {"[bjt]\nQ2 = { collector = \"HT\", base = \"VF\", emitter = \"0V\", gain = \"100 V\" }",
     "13:63: 100 V is a voltage: a plain number is due: write it like \"0.75\""},
    {"[display-tube]\nV1 = { anode = \"HT\", cathodes = \"0V\" }", "13:33: 'cathodes' is a list of nets"},
    {"[display-tube]\nV1 = { anode = \"HT\", cathodes = [] }", "13:33: 'cathodes' is empty"},
    {"[display-tube]\nV1 = { anode = \"HT\", cathodes = [\"0V\"], striking = \"165\" }",
     "13:53: a bare number: a voltage is due: write it like \"12 V\""},
    {"[connector]\nJ1 = { poles = [\"HT\", \"0V\"] }", "13:17: a pole is a pair of nets, supply side first: [\"HT\", \"HT-L\"] || 13:23: a pole is a "
                                                       "pair of nets, supply side first: [\"HT\", \"HT-L\"]"},
    {"[connector]\nJ1 = { poles = [[\"HT\", \"VF\"], [\"0V\"]] }", "13:31: a pole is a pair of nets, supply side first: [\"HT\", \"HT-L\"]"},
    {"[cable]\nW1 = { core = \"HT\", screen = \"0V\", capacitance = \"100 pF/m\" }", "13:50: 'capacitance' is written per metre: 'length' is needed"},
    {"[cable]\nW1 = { core = \"HT\", screen = \"0V\", capacitance = \"100 pF/m\", length = \"2\" }",
     "13:72: a bare number: a length is due: write it like \"2.4 mm\""},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\nclearance = \"2.4\"", "14:14: a bare number: a length is due: write it like \"2.4 mm\""},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\nclearence = \"2.4 mm\"", "14:1: unknown key 'clearence' in [[gap]]; nearest known name: clearance"},
    {"[[gap]]\nclearance = \"2.4 mm\"", "12:1: no 'nets' in this gap"},
    {"[[gap]]\nnets = [\"HT\", \"HT\"]\nclearance = \"2.4 mm\"", "13:8: both ends are the same net, 'HT'"},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\nsurface = \"FR4\"", "14:11: 'FR4' is no surface; nearest known name: FR-4"},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\ninsulation = \"double\"", "14:14: 'double' is no insulation: functional, basic, supplementary, reinforced"},
    {"[capacitor]\nC9 = { nets = [\"HT\", \"0V\"], value = \"1 nF\", rated-voltage = \"275 V\", safety-class = \"X2\" }",
     "13:61: 'rated-voltage' says nothing beside 'safety-class': write 'rated-voltage-dc' [also 13:85]"},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\ngroove = \"1 mm\"",
     "14:10: a groove is written with its width 'groove' and the path along it 'groove-creepage'"},
    {"[[gap]]\nnets = [\"HT\", \"0V\"]\ncoating = \"varnish\"", "14:11: 'varnish' is no coating: none, solder mask, lacquer, qualified"},
    {"[gap]\nnets = [\"HT\", \"0V\"]\nclearance = \"2.4 mm\"", "12:2: write [[gap]], in double brackets: there may be several"},
    {"[[gap]]\nnets = [\"*\", \"HT\"]\nclearance = \"2.4 mm\"", "13:9: a net's name has no blanks, quotes, '/', '~' or '*': '*'"},
    {"[[access]]\nnets = [\"HT\", \"0V\"]\nat = \"lid\"", "12:1: no 'when' in this access: always, cover off or plug withdrawn"},
    {"[[access]]\nnets = [\"HT\", \"0V\"]\nwhen = \"lid off\"", "14:8: 'lid off' is no when: always, cover off, plug withdrawn"},
    {"[[access]]\nat = \"lid\"\nwhen = \"always\"", "12:1: no 'nets' in this access"},
    {"[[decay]]\nnets = [\"HT\", \"0V\"]\nfrom = \"60 V\"\nto = \"450 V\"\ntime = \"3 s\"", "15:6: a decay ends below where it began [also 14:8]"},
    {"[[decay]]\nnets = [\"HT\", \"0V\"]\nfrom = \"450 V\"\nto = \"60 V\"", "12:1: no 'time' in this decay"},
    {"[protection]\nlabel = \"yes\"", "13:9: 'label' is true or false, without quotes"},
    {"[protection]\nenclosure = \"finger proof\"", "13:13: 'finger proof' is no enclosure; nearest known name: finger-proof"},
    {"[protection]\nlable = true", "13:1: unknown key 'lable' in [protection]; nearest known name: label"},
    {"[use]\nambient = \"35 C\"", "13:12: C is the coulomb: for a temperature write \"35 degC\""},
    {"[use]\nambient = \"10 degC .. 35\"", "13:23: a bare number: a temperature is due: write it like \"35 degC\""},
    {"[use]\nsetting = \"school\"", "13:11: 'school' is no setting: teaching lab, repair bench, display equipment"},
    {"[use]\nsetting = \"teaching-lab\"", "13:11: 'teaching-lab' is no setting; nearest known name: teaching lab"},
    {"[use]\nperson = \"trained\"", "13:10: 'trained' is no person: ordinary, instructed, skilled"},
    {"[use]\npollution-degree = 5", "13:20: 'pollution-degree' is at most 4"},
    {"[use]\npollution-degree = 2.5", "13:20: 'pollution-degree' is 1, 2, 3 or 4"},
    {"[use]\naltitude = 2500", "13:12: a bare number: a length is due: write it like \"2.4 mm\", in quotes"},
    {"[use]\naltitude = \"8000 ft\"", "13:18: no unit 'ft': a length is due: write it like \"2.4 mm\""},
    {"[use]\nlimit-sets = [\"IEC 60664\"]", "13:15: 'IEC 60664' is not known in limit-sets; nearest known name: IEC 60664-1"},
    {"[use]\nlimit-sets = \"IEC 60664-1\"", "13:14: 'limit-sets' is a list of texts"},
    {"[converter.K1]\noutputs = [[\"HT\", \"0V\"]]", "12:12: no 'topology': boost, flyback, boost-multiplier or module"},
    {"[converter.K1]\ntopology = \"bost\"\noutputs = [[\"HT\", \"0V\"]]", "13:12: 'bost' is no topology; nearest known name: boost"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nisolates = true",
     "15:12: a boost stage is one circuit with its input: it isolates nothing"},
    {"[converter.K1]\ntopology = \"module\"\noutputs = [[\"HT\", \"0V\"]]\nisolates = \"yes\"", "15:12: 'isolates' is true or false, without quotes"},
    {"[converter.K1]\ntopology = \"boost\"", "12:12: no 'outputs': [[\"HT\", \"0V\"]], positive net first"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [\"HT\", \"0V\"]",
     "14:11: 'outputs' is a list of pairs, in double brackets: [[\"HT\", \"0V\"]]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"], [\"VF\", \"0V\"]]", "14:11: one converter with one output for now"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nswitch = \"Q1\"", "15:10: no part 'Q1'; nearest known name: F1"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nswitch = \"R1\"",
     "15:10: 'R1' is of kind resistor; due here: mosfet or bjt [also 10:1]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nfeedback = { threshold = \"0.6 V\" }", "15:1: no 'net' in 'feedback'"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\noutput-voltage = \"180 V\"\nfeedback = { net = \"VF\", threshold = \"0.6 "
     "V\" }",
     "16:1: the output is told twice: by 'feedback' and by 'output-voltage' [also 15:18]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"29 kHz\", duty = \"75\" }",
     "15:40: 'duty' is at most 1"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"29 kHz\", astable = { ra = \"R1\", rb = \"R2\", c "
     "= \"C9\" } }",
     "15:33: 'astable' computes the frequency from its parts: 'frequency' is written too [also 15:23] || 15:71: no part 'C9'"},
    {"[converter]\ntopology = \"boost\"", "13:1: a converter has a name: write [converter.K1] above its keys"},
    {"[converter.K1]\ntopology = \"module\"\noutputs = [[\"HT\", \"0V\"]]\n[converter.K2]\ntopology = \"module\"\noutputs = [[\"VF\", \"0V\"]]",
     "15:12: one converter with one output for now [also 12:12]"},
    {"[resistor.R9]\nnets = [\"HT\", \"0V\"]\nvalue = \"1/4W\"", "14:11: no unit '/': a resistance is due: write it like \"4.7 kohm\""},
    {"[led]\nD9 = { anode = \"HT\", cathode = \"0V\", current = \"20 ma\" }", "13:52: no unit 'ma': it is written \"mA\""},
    {"[load]\nX1 = { nets = [\"HT\", \"0V\"], current = \"0 .. 5 mA\" }", "13:40: a bare number: a current is due: write it like \"20 mA\""},
    {"[wobble]\nX1 = { nets = [\"HT\", \"0V\"] }", "12:2: 'wobble' is no section and no kind of part"},
    {"[zener]\nD8 = { anode = \"0V\", cathode = \"HT\", zener-voltage = \"200\" }", "13:55: a bare number: a voltage is due: write it like \"12 V\""},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = 25000 }",
     "15:23: a bare number: a frequency is due: write it like \"29 kHz\", in quotes"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"25 kHz\", delay = \"1 us\" }",
     "15:41: 'delay' is that of the comparator that ends a cycle at 'peak-current': write both"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"25 kHz\", peak-curent = \"1 A\" }",
     "15:33: unknown key 'peak-curent' in 'drive'; nearest known name: peak-current"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"25 kHz\", control = \"3 V\" }",
     "15:43: 'control' speaks of a timer: write 'astable' with its parts too"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { astable = { ra = \"R1\", rb = \"R2\" } }",
     "15:11: no 'c' in 'astable'"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { duty = \"0.5\", astable = { ra = \"R1\", rb = \"R2\", c = \"R1\" "
     "} }",
     "15:25: 'astable' computes the duty from its parts: 'duty' is written too [also 15:18] || 15:63: 'R1' is of kind resistor; due here: capacitor "
     "[also 10:1]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { peak-current = \"1 V\" }",
     "15:27: 1 V is a voltage: a current is due: write it like \"20 mA\""},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nfeedback = { net = \"VF\", threshold = \"2.5\" }",
     "15:39: a bare number: a voltage is due: write it like \"12 V\""},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nfeedback = { net = \"VF\", mode = \"pwm\" }",
     "15:33: 'pwm' is no mode: gated, peak-current, duty"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nfeedback = { net = \"VF\", zener = \"R1\" }",
     "15:34: 'R1' is of kind resistor; due here: zener [also 10:1]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nfeedback = { net = \"VF\", lag = \"20\" }",
     "15:33: a bare number: a time is due: write it like \"5 s\""},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nclamp = { resistor = \"R1\" }",
     "15:1: a clamp is 'diode', 'resistor' and 'capacitor', or a 'suppressor' (with or without its 'diode')"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nclamp = { suppresor = \"R1\" }",
     "15:1: a clamp is 'diode', 'resistor' and 'capacitor', or a 'suppressor' (with or without its 'diode') || 15:11: unknown key 'suppresor' in "
     "'clamp'; nearest known name: suppressor"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nladder = [\"R1\"]",
     "15:11: 'R1' is of kind resistor; due here: capacitor or diode [also 10:1]"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\nladder = \"D1\"",
     "15:10: 'ladder' is a list of references, from the switch node on"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\novershoot = 5",
     "15:13: a bare number: a voltage is due: write it like \"12 V\", in quotes"},
    {"[converter.K1]\ntopology = \"boost\"\noutputs = [[\"HT\", \"0V\"]]\ninductor = \"R1\"",
     "15:12: 'R1' is of kind resistor; due here: inductor or transformer [also 10:1]"},
    {"[converter.K1]\ntopology = \"module\"\noutputs = [[\"HT\", \"0V\"]]\ndrive = { frequency = \"25 kHz\" }",
     "15:1: a module's drive is inside it: its output is declared by 'output-voltage'"},
    {"[mosfet]\nQ1 = { drain = \"SW\", gate = \"VF\", source = \"0V\" }\n[inductor]\nL1 = { nets = [\"VIN\", \"SX1\"] }\n[converter.K1]\ntopology = "
     "\"flyback\"\noutputs = [[\"HT\", \"0V\"]]\nswitch = \"Q1\"\ninductor = \"L1\"",
     "13:16: note: net 'SW' is named in one place only || 15:1: note: 'L1' does not reach net 'SW', where 'Q1' switches || 15:1: a flyback stores in "
     "a transformer; 'L1' is of kind inductor || 15:23: note: net 'SX1' is named in one place only"},
};

struct replaced {
    const char* from;
    const char* to;
    const char* complaints;
};

const replaced replacements[] = {
    {"return = \"0V\"", "", "1:2: no 'return' in [supply]: the net that all voltages are told against"},
    {"[supply]\nname = \"T\"\nreturn = \"0V\"\n", "", "0:0: no [supply] in this file"},
    {"[input]\nnets = [\"VIN\", \"0V\"]\nvoltage = \"12 V\"\n", "",
     "0:0: no [input] in this file || 5:16: note: net 'VIN' is named in one place only"},
    {"name = \"T\"", "nmae = \"T\"", "2:1: unknown key 'nmae' in [supply]; nearest known name: name"},
    {"name = \"T\"", "name = 5", "2:8: 'name' is a text in quotes"},
    {"voltage = \"12 V\"", "voltage = 12", "6:11: a bare number: a voltage is due: write it like \"12 V\", in quotes"},
    {"voltage = \"12 V\"", "voltage = \"12\"", "6:12: a bare number: a voltage is due: write it like \"12 V\""},
    {"voltage = \"12 V\"", "voltage = \"12-15 V\"", "6:12: '12-15 V' is a range or a difference: a range is written \"12 V .. 15 V\""},
    {"voltage = \"12 V\"", "voltage = \"12 VDC\"", "6:15: write the unit alone, \"400 V\": the file speaks of d.c. throughout"},
    {"nets = [\"VIN\", \"0V\"]\nvoltage", "nets = [\"VIN\", \"0V\"]\nisolated = \"yes\"\nvoltage",
     "6:12: 'isolated' is true or false, without quotes"},
    {"return = \"0V\"", "return = \"0V\"\nchassis = \"CASE\"\nreturn-bonded = \"true\"", "5:17: 'return-bonded' is true or false, without quotes"},
    {"return = \"0V\"", "return = \"0V\"\nreturn-bonded = true", "4:17: 'return-bonded' needs a 'chassis' net to be bonded to"},
    {"return = \"0V\"", "return = \"0V\"\ncomplete = [\"capacitor\"]", "4:13: 'capacitor' is not known in complete; nearest known name: capacitors"},
    {"R2 = { nets = [\"HT\", \"VF\"], value = \"1M\" }",
     "R2 = { nets = [\"HT\", \"VF\"], value = \"1meg\" }\nR3 = { nets = [\"HT\", \"VFF\"], value = \"1M\" }\n[capacitor]\nC1 = { nets = [\"HTX\", "
     "\"0V\"], value = \"1 uF\" }",
     "11:39: 'meg' is no prefix: a million ohms is written \"1M\" or \"1 Mohm\" || 12:22: net 'VFF' is named in one place only; nearest known name: "
     "VF [also 8:23] || 14:16: net 'HTX' is named in one place only; nearest known name: HT [also 10:16]"},
    {"return = \"0V\"", "return = \"GND\"", "3:10: nothing joins the return net 'GND'"},
};

const library& data()
{
    static const library_result loaded = load_library(embedded_rules());
    return loaded.lib;
}

std::string told(const std::string& text)
{
    read_result read = read_document(text, "t");
    std::vector<complaint> all = read.complaints;
    if (all.empty()) {
        all = read_supply(read.doc, data()).complaints;
    }
    std::string out;
    for (const complaint& c : all) {
        out += fmt::format("{}{}:{}: {}{}", out.empty() ? "" : " || ", c.at.line, c.at.column, c.weight == gravity::note ? "note: " : "", c.message);
        if (c.also) {
            out += fmt::format(" [also {}:{}]", c.also->line, c.also->column);
        }
    }
    return out;
}

} // namespace

TEST_CASE("the base itself reads without complaint")
{
    CHECK(told(base) == "");
}

TEST_CASE("wrong additions")
{
    for (const added& row : additions) {
        CAPTURE(row.text);
        CHECK(told(std::string(base) + row.text + "\n") == row.complaints);
    }
}

TEST_CASE("wrong replacements")
{
    for (const replaced& row : replacements) {
        CAPTURE(row.to);
        std::string text = base;
        const std::size_t at = text.find(row.from);
        REQUIRE(at != std::string::npos);
        text.replace(at, std::string(row.from).size(), row.to);
        CHECK(told(text) == row.complaints);
    }
}

TEST_CASE("at least eighty wrong inputs are told")
{
    CHECK(std::size(additions) + std::size(replacements) >= 80);
}
