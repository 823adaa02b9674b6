// The laws of the design, each with a test that its breach would fail.
#include "help.hpp"

#include "document/document.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cmath>
#include <functional>
#include <random>
#include <set>
#include <thread>

using namespace onehand;
using namespace onehand::test;

namespace {

int rank(const std::string& conclusion)
{
    return conclusion == "hold" ? 0 : conclusion == "conditional" ? 1 : 2;
}

std::map<std::string, verdict> verdicts(const audit_result& r)
{
    std::map<std::string, verdict> out;
    for (const finding& f : r.judged.findings) {
        out[f.rule + ":" + f.about.name] = f.judged;
    }
    return out;
}

/// Every `, key = "..."` and `key = "..."` line that tells a figure or a choice, cut out one at a time.
std::vector<std::string> cuts(const std::string& text)
{
    static const std::set<std::string> kept{
        "nets", "ends", "wiper", "anode", "cathode", "cathodes", "positive", "negative", "drain", "gate", "source", "return", "outputs", "topology",
        "inductor", "switch", "rectifier", "core", "screen", "poles", "name", "at", "when", "from", "to", "time", "length", "chassis", "input",
        "feedback", "drive", "series", "return-bonded", "ladder", "clamp", "astable", "ra", "rb", "c", "bypass", "zener",
        // Unsaid it is functional inside one circuit by the description's own rule: another question is then judged, with the same figures.
        "insulation"};
    std::vector<std::string> out;
    const read_result read = read_document(text, "t");
    const std::function<void(const node&)> walk = [&](const node& n) {
        for (const entry& e : n.entries) {
            if (e.value.kind == node_kind::table) {
                walk(e.value);
            } else if (e.value.kind == node_kind::list && !e.value.items.empty() && e.value.items[0].kind == node_kind::table) {
                for (const node& item : e.value.items) {
                    walk(item);
                }
            } else if (!kept.contains(e.key)) {
                const std::string& line = read.doc.lines[e.key_at.line - 1];
                const std::size_t start = line.find(e.key, 0) == std::string::npos ? 0 : e.key_at.column - 1;
                std::size_t end = line.find_first_of(",}#", line.find('=', start));
                if (line.find('[', start) != std::string::npos) {
                    end = line.find(']', start) + 1;
                }
                std::string cut = line.substr(0, start);
                std::string rest = end == std::string::npos ? "" : line.substr(end);
                if (!rest.empty() && rest[0] == ',') {
                    rest.erase(0, 1);
                } else if (const std::size_t comma = cut.find_last_not_of(' '); comma != std::string::npos && cut[comma] == ',') {
                    cut.erase(comma);
                }
                std::string all;
                for (std::size_t i = 0; i < read.doc.lines.size(); ++i) {
                    all += (i + 1 == e.key_at.line ? cut + rest : read.doc.lines[i]) + '\n';
                }
                out.push_back(std::move(all));
            }
        }
    };
    walk(read.doc.root);
    return out;
}

} // namespace

namespace {

/// Keys that no sample has, in one supply.
const char* const further_keys = R"([supply]
return = "0V"
chassis = "CASE"
return-bonded = false
complete = ["capacitors", "sources", "access"]
[use]
person = "instructed"
ambient = "20 degC"
inside-rise = "5 K"
altitude = "2500 m"
pollution-degree = 2
location = "wet"
[input]
nets = ["VIN", "0V"]
voltage = "24 V +-5%"
isolated = false
transient = "max 6 kV"
current-limit = "40 A"
[fuse]
F1 = { nets = ["VIN", "VM"], rated-current = "1 A", type = "chip", breaking-capacity = "35 A" }
[converter.K1]
topology = "module"
input = ["VM", "0V"]
outputs = [["HT", "0V"]]
output-voltage = "300 V"
internal-capacitance = "1 nF"
isolates = false
[capacitor]
C1 = { nets = ["HT", "T"], value = "10 nF", safety-class = "Y2", rated-voltage-dc = "250 V", dielectric = "polypropylene" }
C2 = { nets = ["HT", "0V"], value = "4.7 uF", rated-voltage = "400 V", dielectric = "X7R" }
[resistor]
R1 = { nets = ["HT", "0V"], value = "1M", package = "1206", rated-power = "0.25 W", series = 2, qualified = true }
R2 = { nets = ["HT", "T"], value = "100k", package = "2512", rated-power = "1 W" }
[lamp]
N1 = { nets = ["HT", "0V"], maintaining = "65 V", role = "indicator" }
[[gap]]
nets = ["HT", "0V"]
clearance = "1 mm"
creepage = "1 mm"
surface = "board copper"
coating = "qualified"
[[gap]]
nets = ["HT", "T"]
clearance = "5 mm"
creepage = "5 mm"
layer = "internal"
surface = "FR-4"
[[access]]
nets = ["T", "0V"]
when = "plug withdrawn"
[[access]]
nets = ["VIN", "0V"]
when = "plug withdrawn"
[protection]
enclosure = "covered"
label = true
discharge-procedure = true
)";

/// Keys of the converter that no sample has: a ladder of two steps driven by a timer, fed back through a zener.
const char* const converter_keys = R"([supply]
return = "0V"
complete = ["capacitors", "sources", "access"]
[use]
ambient = "20 degC"
inside-rise = "5 K"
altitude = "100 m"
pollution-degree = 1
location = "dry"
[input]
nets = ["VIN", "0V"]
voltage = "12 V"
isolated = true
feed = "battery"
current-limit = "9 A"
source-resistance = "0.5 ohm"
highest-adapter = "12 V"
reversible = false
[fuse]
F1 = { nets = ["VIN", "VF"], rated-current = "1 A", rated-voltage-dc = "32 V", breaking-capacity = "35 A", melting-i2t = "5 A2s" }
[converter.K1]
topology = "boost-multiplier"
inductor = "L1"
switch = "Q1"
ladder = ["D1", "C1", "C2", "D2", "D3", "C3"]
outputs = [["HT", "0V"]]
spike = "10 V"
overshoot = "max 5 V"
drive = { gate = "G", astable = { ra = "RA", rb = "RB", c = "CT", bypass = "DB" }, supply = "12 V", control = "8 V", high = "11 V", low = "max 0.5 V" }
feedback = { net = "FB", threshold = "2.5 V", zener = ["Z1"], lag = "max 10 us", bias-current = "0 A .. 1 uA", mode = "gated" }
[inductor]
L1 = { nets = ["VF", "SW"], value = "1 mH", saturation-current = "2 A", rated-current = "1 A", resistance = "0.5 ohm" }
[mosfet]
Q1 = { drain = "SW", gate = "G", source = "0V", rated-voltage = "400 V", rated-current = "2 A", on-resistance = "1 ohm", on-resistance-hot = "2 ohm", on-resistance-at = "10 V", gate-rating = "20 V", gate-threshold = "3 V", output-capacitance = "50 pF", avalanche-energy = "10 mJ", thermal-resistance = "60 K/W", junction-limit = "150 degC" }
[timer]
U1 = { supply = "VF", ground = "0V", output = "G", supply-rating = "18 V", supply-least = "4.5 V" }
[diode]
D1 = { anode = "SW", cathode = "N1", rated-voltage = "400 V", rated-current = "1 A", surge-current = "30 A", recovery-time = "50 ns", forward-voltage = "1 V" }
D2 = { anode = "N1", cathode = "X1", rated-voltage = "400 V", rated-current = "1 A", surge-current = "30 A", recovery-time = "50 ns" }
D3 = { anode = "X1", cathode = "HT", rated-voltage = "400 V", rated-current = "1 A", surge-current = "30 A", recovery-time = "50 ns" }
DB = { anode = "DIS", cathode = "TIM", rated-voltage = "50 V" }
[zener]
Z1 = { cathode = "HT", anode = "ZA", zener-voltage = "150 V +-5%", rated-power = "1 W" }
[capacitor]
C0 = { positive = "VF", negative = "0V", value = "100 uF", rated-voltage = "35 V", dielectric = "aluminium electrolytic" }
C1 = { nets = ["N1", "0V"], value = "100 nF", rated-voltage = "250 V", dielectric = "polypropylene" }
C2 = { nets = ["SW", "X1"], value = "100 nF", rated-voltage = "250 V", dielectric = "polypropylene" }
C3 = { positive = "HT", negative = "0V", value = "10 uF", rated-voltage = "450 V", dielectric = "aluminium electrolytic", ripple-current = "100 mA", surge-voltage = "500 V" }
CT = { nets = ["TIM", "0V"], value = "1 nF", rated-voltage = "50 V", dielectric = "C0G" }
[resistor]
RA = { nets = ["VF", "DIS"], value = "20k", package = "0805", rated-power = "0.125 W" }
RB = { nets = ["DIS", "TIM"], value = "20k", package = "0805", rated-power = "0.125 W" }
R1 = { nets = ["ZA", "FB"], value = "100k", package = "0805", rated-power = "0.125 W" }
R2 = { nets = ["FB", "0V"], value = "10k", package = "0805", rated-power = "0.125 W" }
R3 = { nets = ["HT", "0V"], value = "1M", package = "axial 1 W", rated-power = "1 W" }
R4 = { nets = ["HT", "0V"], value = "1M", package = "axial 1 W", rated-power = "1 W" }
[load]
X1 = { nets = ["HT", "0V"], current = "1 mA" }
[[gap]]
nets = ["HT", "*"]
clearance = "6 mm"
creepage = "8 mm"
surface = "FR-4"
[[gap]]
nets = ["ZA", "*"]
clearance = "6 mm"
creepage = "8 mm"
surface = "FR-4"
[[gap]]
nets = ["SW", "*"]
clearance = "6 mm"
creepage = "8 mm"
surface = "FR-4"
[[gap]]
nets = ["X1", "*"]
clearance = "6 mm"
creepage = "8 mm"
surface = "FR-4"
[[gap]]
nets = ["N1", "*"]
clearance = "6 mm"
creepage = "8 mm"
surface = "FR-4"
[[access]]
nets = ["HT", "0V"]
when = "cover off"
[protection]
enclosure = "finger-proof"
indicator = true
label = true
)";

/// With every limit set in force: no rule hides behind the setting.
audit_outcome by_all_sets(const std::string& text)
{
    audit_request q;
    q.text = text;
    q.file = "t.toml";
    for (const limit_set& l : library_of(opened()).limit_sets) {
        q.limit_sets.push_back(l.name);
    }
    return audit(opened(), q);
}

} // namespace

namespace {

verdict gravest_of_rule(const audit_outcome& o, const std::string& id)
{
    verdict worst = verdict::not_applicable;
    const std::string rule = id.substr(0, id.find(':'));
    for (const finding& f : o.result->judged.findings) {
        worst = f.rule == rule ? std::min(worst, f.judged) : worst;
    }
    return worst;
}

} // namespace

TEST_CASE("law 1: taking a value away never makes a pass nor a better end state" * doctest::test_suite("long"))
{
    int tried = 0;
    std::vector<std::string> texts{further_keys, converter_keys};
    for (const char* name : names) {
        texts.push_back(sample(name));
    }
    for (const std::string& text : texts) {
        const audit_outcome first = by_all_sets(text);
        CAPTURE(format_complaints(first.complaints));
        REQUIRE(first.result);
        const audit_result& whole = *first.result;
        const auto before = verdicts(whole);
        for (const std::string& cut : cuts(text)) {
            const audit_outcome o = by_all_sets(cut);
            if (!o.result) {
                continue; // it does not read without it
            }
            ++tried;
            for (const auto& [id, v] : verdicts(*o.result)) {
                const auto was = before.find(id);
                if (was == before.end()) {
                    continue;
                }
                // A pair that two floor gaps hold for goes to the other one when a figure of the first is not known: the rule's gravest counts.
                const bool floor = id.ends_with("to any net");
                const verdict now = floor ? gravest_of_rule(o, id) : v;
                const bool better = (now == verdict::pass || now == verdict::not_applicable) && was->second != verdict::pass &&
                                    was->second != verdict::not_applicable;
                CAPTURE(id);
                CAPTURE(cut);
                CHECK_FALSE(better);
            }
            CAPTURE(cut);
            CHECK(rank(o.result->concluded.energise) <= rank(whole.concluded.energise));
            CHECK(rank(o.result->concluded.reach_in) <= rank(whole.concluded.reach_in));
        }
    }
    CHECK(tried > 150);
}

TEST_CASE("law 1: widening a tolerance never makes a pass")
{
    const std::string text = sample("tide-clock-as-built.toml");
    const auto before = verdicts(*run(text).result);
    const std::pair<const char*, const char*> wider[] = {
        {"680k +-1%", "680k +-5%"}, {"0.6 V +-0.1 V", "0.6 V +-0.2 V"}, {"3u3 +-20%", "3u3 +-40%"},      {"12 V +-5%", "12 V +-20%"},
        {"22k +-5%", "22k +-30%"},  {"1k5 +-1%", "1k5 +-10%"},          {"140 V +-10 V", "140 V +-40 V"}};
    for (const auto& [from, to] : wider) {
        for (const auto& [id, v] : verdicts(*run(replaced(text, from, to)).result)) {
            const auto was = before.find(id);
            const bool better = was != before.end() && v > was->second && v != verdict::not_applicable;
            CAPTURE(id);
            CHECK_FALSE(better);
        }
    }
}

TEST_CASE("law 2: a part is judged in use and a person over the whole")
{
    const std::string text = sample("tide-clock-corrected.toml");
    // 184 V in use, 192 V over the tolerances: a capacitor of 188 V is marginal.
    const finding* part = nullptr;
    const audit_result r = *run(replaced(text, "rated-voltage = \"400 V\", dielectric", "rated-voltage = \"188 V\", dielectric")).result;
    part = found(r, "electrolytic-voltage", "C4");
    CHECK(part->judged == verdict::marginal);
    CHECK(part->marginal_by == "tolerance");
    CHECK(part->settles.find("measure") != std::string::npos);
    // 1.87 mm would do in use, not over the whole: towards a person that fails.
    const audit_result p = *run(replaced(text, "creepage   = \"3.2 mm\"", "creepage   = \"1.87 mm\"")).result;
    CHECK(found(p, "creepage", "HT to 0V at C4 pads")->judged == verdict::fail);
}

TEST_CASE("law 4: tubes and loads discharge nothing")
{
    const audit_outcome o =
        run("[supply]\nreturn = \"0V\"\n[input]\nnets = [\"VIN\", \"0V\"]\nvoltage = \"12 V\"\n[converter.K1]\ntopology = \"module\"\ninput = "
            "[\"VIN\", \"0V\"]\n"
            "outputs = [[\"HT\", \"0V\"]]\noutput-voltage = \"180 V\"\ninternal-capacitance = \"1 nF\"\n[capacitor]\nC1 = { nets = [\"HT\", \"0V\"], "
            "value = \"10 uF\" }\n"
            "[resistor]\nR1 = { nets = [\"HT\", \"AN\"], value = \"22k\" }\n[display-tube]\nV1 = { anode = \"AN\", cathodes = [\"0V\"], maintaining "
            "= \"140 V\" }\n"
            "[load]\nX1 = { nets = [\"HT\", \"0V\"], current = \"5 mA\" }\n[meter]\nM1 = { nets = [\"HT\", \"0V\"], resistance = \"10 Mohm\" }\n");
    REQUIRE(o.result);
    CHECK(found(*o.result, "bleeder-present", "HT to 0V")->judged == verdict::fail);
    CHECK(found(*o.result, "discharge-cover-off", "HT to 0V")->judged == verdict::fail);
}

TEST_CASE("law 4: a net that nothing holds is told and never reads zero")
{
    const std::string text = replaced(sample("tide-clock-corrected.toml"),
                                      "cathodes = [\"0V\"], striking = \"max 150 V\", maintaining = \"130 V +-10 V\", current = \"2 mA\" }\nV2",
                                      "cathodes = [\"K1N\"], striking = \"max 150 V\", maintaining = \"130 V +-10 V\", current = \"2 mA\" }\nV2");
    REQUIRE_FALSE(text.empty());
    const audit_result r = *run(text).result;
    for (const net_facts& n : r.nets) {
        if (n.net == "K1N") {
            CHECK(n.floating);
            CHECK(n.potential.front().second.numbers.front().whole.high > 150.0);
        }
    }
}

TEST_CASE("law 4: an output that nothing ties to the return keeps its own voltage")
{
    const std::string text = R"([supply]
return = "0V"
complete = ["capacitors", "sources", "access"]
[use]
ambient = "20 degC"
inside-rise = "5 K"
altitude = "100 m"
pollution-degree = 2
[input]
nets = ["VIN", "0V"]
voltage = "12 V"
isolated = true
[fuse]
F1 = { nets = ["VIN", "VM"], rated-current = "1 A" }
[converter.K1]
topology = "module"
input = ["VM", "0V"]
outputs = [["HT", "HN"]]
output-voltage = "400 V"
internal-capacitance = "1 nF"
[capacitor]
C1 = { nets = ["HT", "HN"], value = "1 uF", rated-voltage = "100 V", dielectric = "polypropylene" }
[resistor]
R1 = { nets = ["HT", "HN"], value = "1M", package = "1206", rated-power = "0.25 W" }
R2 = { nets = ["HT", "HN"], value = "1M", package = "1206", rated-power = "0.25 W" }
[[access]]
nets = ["HT", "HN"]
at = "terminals"
when = "always"
[protection]
label = true
)";
    const audit_result r = *run(text).result;
    CHECK(found(r, "capacitor-voltage", "C1")->judged == verdict::fail);
    REQUIRE(r.label);
    CHECK(r.label->voltage.numbers.front().whole.high == doctest::Approx(400.0).epsilon(1e-9).scale(0));
    CHECK(r.label->energy.numbers.front().whole.high == doctest::Approx(0.5 * 1.001e-6 * 160000.0).epsilon(1e-9).scale(0));
    bool timed = false;
    for (const discharge_facts& d : r.discharges) {
        for (const discharge_facts::limit& l : d.limits) {
            if (l.to.si == 60.0 && d.change == "none") {
                // 500 kohm across 1.001 uF: RC ln(400/60).
                CHECK(l.time.numbers.front().whole.high == doctest::Approx(0.5005 * std::log(400.0 / 60.0)).epsilon(1e-9).scale(0));
                timed = true;
            }
        }
    }
    CHECK(timed);
}

TEST_CASE("law 3: what is closed has no current of its own and none is told")
{
    const audit_result r = *run(sample("tide-clock-corrected.toml")).result;
    int closed = 0;
    for (const part_facts& p : r.parts) {
        if (p.kind == "fuse" || p.kind == "inductor") {
            for (const part_facts::in_state& s : p.states) {
                CHECK(s.current.numbers.empty());
                CHECK((p.kind != "fuse" || !s.current.missing.empty()));
                CHECK(s.power.numbers.empty());
                ++closed;
            }
        }
    }
    CHECK(closed == 8); // F1 and L1 in four states
}

TEST_CASE("law 6: unknown packages must agree in every published value")
{
    const std::string text = sample("tide-clock-corrected.toml");
    // R8 sees 2.5 V: every published body stands it.
    const audit_result r = *run(replaced(text, "value = \"9k1 +-1%\", package = \"0805\"", "value = \"9k1 +-1%\"")).result;
    CHECK(found(r, "resistor-limiting-voltage", "R8")->judged == verdict::pass);
    // R7 sees 94 V: some stand it, some do not.
    const audit_result s = *run(replaced(text, "value = \"330k +-1%\", package = \"1206\"", "value = \"330k +-1%\"")).result;
    CHECK(found(s, "resistor-limiting-voltage", "R7/1")->judged == verdict::not_shown);
    CHECK(found(s, "resistor-limiting-voltage", "R7/1")->missing == std::vector<std::string>{"R7/1.package"});
}

TEST_CASE("law 6: an assumption is listed and no verdict on it is better than marginal")
{
    const audit_result r = *run(sample("tide-clock-corrected.toml")).result;
    CHECK(r.assumptions.size() == 1);
    for (const finding& f : r.judged.findings) {
        if (!f.assumed.empty()) {
            CHECK(f.judged != verdict::pass);
        }
    }
}

TEST_CASE("law 7: every finding cites and every figure has its formula")
{
    for (const char* name : names) {
        const audit_result r = *run(sample(name)).result;
        for (const finding& f : r.judged.findings) {
            CHECK(library_of(opened()).find_source(f.from.cite) != nullptr);
            CHECK_FALSE(f.from.clause.empty());
            if (f.left && !f.left->numbers.empty()) {
                CAPTURE(f.id);
                CHECK_FALSE(f.shown.front().formula.empty());
            }
        }
    }
}

TEST_CASE("law 8: the same answer however it is written")
{
    const std::string text = sample("tide-clock-corrected.toml");
    const auto before = verdicts(*run(text).result);
    const std::pair<const char*, const char*> same[] = {
        {"330k +-1%", "0.33 Mohm +-1%"},
        {"9k1 +-1%", "9100 ohm \xc2\xb1"
                     "1 %"},
        {"3u3 +-20%", "3300 nF +-20%"},
        {"nets = [\"HT\", \"0V\"], value = \"100n +-10%\"", "nets = [\"0V\", \"HT\"], value = \"0.1 uF +-10%\""},
        {"limiting-voltage = \"250 V\"", "limiting-voltage = \"0.25 kV\""}};
    for (const auto& [from, to] : same) {
        const std::string changed = replaced(text, from, to);
        REQUIRE_FALSE(changed.empty());
        CHECK(verdicts(*run(changed).result) == before);
    }
    // Parts in another order.
    std::string moved = replaced(text, "R8  = { nets = [\"B\", \"0V\"], value = \"9k1 +-1%\", package = \"0805\", rated-power = \"0.125 W\" }\n", "");
    moved = replaced(moved, "[resistor]\n",
                     "[resistor]\nR8  = { nets = [\"0V\", \"B\"], value = \"9k1 +-1%\", package = \"0805\", rated-power = \"0.125 W\" }\n");
    CHECK(verdicts(*run(moved).result) == before);
}

TEST_CASE("law 3: draws inside the description never beat the set point or the parts' stress")
{
    std::mt19937 r(31415);
    const std::string text = sample("tide-clock-corrected.toml");
    const audit_result whole = *run(text).result;
    const auto draw = [&](double x, double share) { return std::uniform_real_distribution<double>(x * (1.0 - share), x * (1.0 + share))(r); };
    const range output = whole.set_point->output.numbers.front().whole;
    for (int i = 0; i < 40; ++i) {
        const std::vector<std::string> settings{"R8=" + std::to_string(draw(9100, 0.01)) + " ohm", "P1.position=" + std::to_string(draw(0.5, 1.0)),
                                                "P1.value=" + std::to_string(draw(1000, 0.2)) + " ohm",
                                                "R7=" + std::to_string(draw(330e3, 0.01)) + " ohm"};
        const audit_outcome o =
            run(replaced(text, "threshold = \"2.5 V +-2%\"", "threshold = \"" + std::to_string(draw(2.5, 0.02)) + " V\""), settings);
        REQUIRE(o.result);
        CHECK(output.contains(o.result->set_point->output.numbers.front().whole));
        for (const part_facts& p : o.result->parts) {
            const auto was = std::find_if(whole.parts.begin(), whole.parts.end(), [&](const part_facts& w) { return w.ref == p.ref; });
            for (std::size_t k = 0; k < p.states.size(); ++k) {
                if (p.states[k].power.numbers.empty()) {
                    continue;
                }
                CAPTURE(p.ref);
                CHECK(p.states[k].power.numbers.front().whole.high <= was->states[k].power.numbers.front().whole.high * (1.0 + 1e-9) + 1e-15);
            }
        }
    }
}

TEST_CASE("two threads may audit at once and get the same")
{
    const std::string text = sample("geiger-bench.toml");
    audit_outcome one;
    audit_outcome two;
    std::thread a([&] { one = run(text); });
    std::thread b([&] { two = run(text); });
    a.join();
    b.join();
    CHECK(verdicts(*one.result) == verdicts(*two.result));
    CHECK(one.result->sha256 == two.result->sha256);
}

TEST_CASE("no input crashes the audit")
{
    std::mt19937 r(777);
    const std::string wholes[] = {sample("tide-clock-corrected.toml"), sample("valve-rail-flyback.toml"), sample("tide-clock-as-built.toml")};
    const char* const figures[] = {"\"0 ohm\"",    "\"1 Gohm\"", "\"max 5 V\"",    "\"min 1 mA\"", "\"0 V\"", "\"1 pF\"",
                                   "\"0.001 mm\"", "\"0 H\"",    "\"max 50 kHz\"", "\"1\"",        "\"0 s\""};
    for (int i = 0; i < 240; ++i) {
        std::string text = wholes[i % 3];
        for (int k = 0; k < 2; ++k) {
            std::size_t at = text.find('"', r() % text.size());
            const std::size_t end = at == std::string::npos ? at : text.find('"', at + 1);
            if (end != std::string::npos && end - at < 30) {
                text.replace(at, end - at + 1, figures[r() % std::size(figures)]);
            }
        }
        const audit_outcome o = run(text);
        CHECK((o.result.has_value() || !o.complaints.empty()));
        if (o.result && o.result->converter) {
            for (const converter_facts::figure& f : o.result->converter->figures) {
                for (const spread& x : f.told.numbers) {
                    CAPTURE(f.name);
                    CAPTURE(text);
                    CHECK_FALSE((std::isnan(x.whole.low) || std::isnan(x.whole.high) || x.whole.low > x.whole.high));
                }
            }
        }
    }
}
