#include "supply/reader.hpp"

#include <algorithm>

namespace onehand {

namespace {

using type = field_spec::type;

class converter_reader {
public:
    converter_reader(reader& r, const entry& e) : r_(r), entry_(e) {}

    void read()
    {
        c_.name = entry_.key;
        c_.at = entry_.key_at;
        if (!r_.expect(entry_.value, node_kind::table, "a converter is a table: [converter.K1]")) {
            return;
        }
        c_.fields =
            r_.fields(entry_.value,
                      {{"topology", type::choice, {}, {"boost", "flyback", "boost-multiplier", "module"}},
                       {"output-voltage", type::quantity, dim::voltage, {}},
                       {"source-resistance", type::quantity, dim::resistance, {}},
                       {"power-limit", type::quantity, dim::power, {}},
                       {"internal-capacitance", type::quantity, dim::capacitance, {}},
                       {"internal-bleeder", type::quantity, dim::resistance, {}},
                       {"spike", type::quantity, dim::voltage, {}},
                       {"overshoot", type::quantity, dim::voltage, {}},
                       {"isolates", type::truth, {}, {}}},
                      {"input", "inductor", "switch", "rectifier", "outputs", "drive", "feedback", "ladder", "clamp"}, "[converter." + c_.name + "]");
        if (const auto topology = c_.fields.find("topology"); topology != c_.fields.end()) {
            c_.topology = *topology->second.text();
            c_.fields.erase("topology");
        } else if (entry_.value.find("topology") == nullptr) {
            r_.complain(c_.at, "no 'topology': boost, flyback, boost-multiplier or module");
        }
        const auto isolates = c_.fields.find("isolates");
        if (isolates != c_.fields.end() && c_.topology.starts_with("boost") && *isolates->second.truth()) {
            r_.complain(isolates->second.at, "a " + c_.topology + " stage is one circuit with its input: it isolates nothing");
        }
        c_.inductor = reference("inductor", {"inductor", "transformer"});
        c_.power_switch = reference("switch", {"mosfet", "bjt"});
        c_.rectifier = reference("rectifier", {"diode"});
        if (const entry* e = entry_.value.find("input")) {
            c_.inputs = r_.nets(e->value, 2);
        }
        read_outputs();
        read_ladder();
        read_clamp();
        read_drive();
        read_feedback();
        r_.built.stage = std::move(c_);
    }

private:
    /// A key that names a part of one of these kinds; that it exists is checked once all parts are read.
    std::string reference(const char* key, const std::vector<std::string>& kinds)
    {
        const entry* e = entry_.value.find(key);
        if (e == nullptr) {
            return {};
        }
        return part_named(e->value, kinds);
    }

    std::string part_named(const node& n, const std::vector<std::string>& kinds)
    {
        if (!r_.expect(n, node_kind::text, "a part's reference in quotes is due here")) {
            return {};
        }
        const auto it = r_.refs.find(n.text);
        if (it == r_.refs.end()) {
            std::vector<std::string> known;
            for (const auto& [ref, told] : r_.refs) {
                known.push_back(ref);
            }
            const std::string near = nearest_name(n.text, known);
            r_.complain(n.at, "no part '" + n.text + "'" + (near.empty() ? "" : "; nearest known name: " + near));
            return {};
        }
        if (std::find(kinds.begin(), kinds.end(), it->second.first) == kinds.end()) {
            std::string due = kinds.front();
            for (std::size_t i = 1; i < kinds.size(); ++i) {
                due += " or " + kinds[i];
            }
            r_.contradict(n.at, "'" + n.text + "' is of kind " + it->second.first + "; due here: " + due, it->second.second);
            return {};
        }
        return n.text;
    }

    void read_outputs()
    {
        const entry* e = entry_.value.find("outputs");
        if (e == nullptr) {
            r_.complain(c_.at, "no 'outputs': [[\"HT\", \"0V\"]], positive net first");
            return;
        }
        if (!r_.expect(e->value, node_kind::list, "'outputs' is a list of pairs: [[\"HT\", \"0V\"]]")) {
            return;
        }
        if (e->value.items.size() != 1 || e->value.items[0].kind != node_kind::list) {
            const bool flat = !e->value.items.empty() && e->value.items[0].kind == node_kind::text;
            r_.complain(e->value.at,
                        flat ? "'outputs' is a list of pairs, in double brackets: [[\"HT\", \"0V\"]]" : "one converter with one output for now");
            return;
        }
        c_.outputs = r_.nets(e->value.items[0], 2);
    }

    void read_ladder()
    {
        const entry* e = entry_.value.find("ladder");
        if (e == nullptr || !r_.expect(e->value, node_kind::list, "'ladder' is a list of references, from the switch node on")) {
            return;
        }
        for (const node& n : e->value.items) {
            if (std::string ref = part_named(n, {"capacitor", "diode"}); !ref.empty()) {
                c_.ladder.push_back(std::move(ref));
            }
        }
    }

    void read_drive()
    {
        const entry* e = entry_.value.find("drive");
        if (e == nullptr || !r_.expect(e->value, node_kind::table, "'drive' is a table in braces")) {
            return;
        }
        auto f = r_.fields(e->value,
                           {{"frequency", type::quantity, dim::frequency, {}},
                            {"duty", type::quantity, dim::none, {}, true, 0.0, 1.0},
                            {"high", type::quantity, dim::voltage, {}},
                            {"low", type::quantity, dim::voltage, {}},
                            {"supply", type::quantity, dim::voltage, {}},
                            {"control", type::quantity, dim::voltage, {}},
                            {"peak-current", type::quantity, dim::current, {}},
                            {"delay", type::quantity, dim::time, {}},
                            {"inverted", type::truth, {}, {}}},
                           {"gate", "astable"}, "'drive'");
        if (const auto it = f.find("frequency"); it != f.end()) {
            c_.frequency = it->second;
        }
        if (const auto it = f.find("duty"); it != f.end()) {
            c_.duty = it->second;
        }
        if (const entry* gate = e->value.find("gate")) {
            c_.gate = r_.net(gate->value);
        }
        if (const entry* astable = e->value.find("astable")) {
            read_astable(*astable);
            if (c_.frequency) {
                r_.contradict(astable->key_at, "'astable' computes the frequency from its parts: 'frequency' is written too", c_.frequency->at);
            }
            if (c_.duty) {
                r_.contradict(astable->key_at, "'astable' computes the duty from its parts: 'duty' is written too", c_.duty->at);
            }
        }
        f.erase("frequency");
        f.erase("duty");
        c_.drive = std::move(f);
        check_drive(*e);
    }

    /// A peak current without its comparator's delay is no bound, and some keys speak of the timer only.
    void check_drive(const entry& e)
    {
        if (c_.drive.contains("delay") && !c_.drive.contains("peak-current")) {
            r_.complain(c_.drive.at("delay").at, "'delay' is that of the comparator that ends a cycle at 'peak-current': write both");
        }
        for (const char* key : {"control", "inverted", "supply"}) {
            if (c_.drive.contains(key) && !c_.astable) {
                r_.complain(c_.drive.at(key).at, std::string("'") + key + "' speaks of a timer: write 'astable' with its parts too");
            }
        }
        if (c_.topology == "module") {
            r_.complain(e.key_at, "a module's drive is inside it: its output is declared by 'output-voltage'");
        }
    }

    void read_clamp()
    {
        const entry* e = entry_.value.find("clamp");
        if (e == nullptr ||
            !r_.expect(e->value, node_kind::table, "'clamp' is a table in braces: { diode = \"D2\", resistor = \"R5\", capacitor = \"C6\" }")) {
            return;
        }
        switch_clamp k;
        k.at = e->key_at;
        const std::pair<const char*, std::string*> keys[] = {
            {"resistor", &k.resistor}, {"capacitor", &k.capacitor}, {"diode", &k.diode}, {"suppressor", &k.suppressor}};
        for (const entry& one : e->value.entries) {
            const auto it = std::find_if(std::begin(keys), std::end(keys), [&](const auto& known) { return one.key == known.first; });
            if (it == std::end(keys)) {
                r_.unknown_key(one, {"resistor", "capacitor", "diode", "suppressor"}, "'clamp'");
            } else {
                *it->second = part_named(one.value, one.key == "suppressor" ? std::vector<std::string>{"suppressor", "zener"}
                                                                            : std::vector<std::string>{one.key});
            }
        }
        const bool by_parts = !k.resistor.empty() && !k.capacitor.empty() && !k.diode.empty();
        if (by_parts == !k.suppressor.empty()) {
            r_.complain(k.at, "a clamp is 'diode', 'resistor' and 'capacitor', or a 'suppressor' (with or without its 'diode')");
        }
        c_.clamp = std::move(k);
    }

    void read_astable(const entry& e)
    {
        if (!r_.expect(e.value, node_kind::table, "'astable' is a table in braces: { ra = \"R1\", rb = \"R2\", c = \"C1\" }")) {
            return;
        }
        astable_drive a;
        for (const entry& k : e.value.entries) {
            if (k.key == "ra" || k.key == "rb") {
                (k.key == "ra" ? a.ra : a.rb) = part_named(k.value, {"resistor"});
            } else if (k.key == "c") {
                a.c = part_named(k.value, {"capacitor"});
            } else if (k.key == "bypass") {
                a.bypass = part_named(k.value, {"diode"});
            } else {
                r_.unknown_key(k, {"ra", "rb", "c", "bypass"}, "'astable'");
            }
        }
        for (const auto& [key, ref] : {std::pair("ra", &a.ra), std::pair("rb", &a.rb), std::pair("c", &a.c)}) {
            if (e.value.find(key) == nullptr && ref->empty()) {
                r_.complain(e.key_at, std::string("no '") + key + "' in 'astable'");
            }
        }
        c_.astable = a;
    }

    void read_feedback()
    {
        const entry* e = entry_.value.find("feedback");
        if (e == nullptr || !r_.expect(e->value, node_kind::table, "'feedback' is a table in braces")) {
            return;
        }
        c_.feedback = r_.fields(e->value,
                                {{"threshold", type::quantity, dim::voltage, {}, false},
                                 {"bias-current", type::quantity, dim::current, {}, false},
                                 {"lag", type::quantity, dim::time, {}},
                                 {"mode", type::choice, {}, {"gated", "peak-current", "duty"}}},
                                {"net", "against", "zener"}, "'feedback'");
        if (const entry* zener = e->value.find("zener")) {
            read_zeners(*zener);
        }
        if (const entry* net = e->value.find("net")) {
            c_.feedback_net = r_.net(net->value);
        } else {
            r_.complain(e->key_at, "no 'net' in 'feedback'");
        }
        c_.feedback_return = r_.built.return_net;
        if (const entry* against = e->value.find("against")) {
            c_.feedback_return = r_.net(against->value);
        }
        if (const auto declared = c_.fields.find("output-voltage"); declared != c_.fields.end()) {
            r_.contradict(e->key_at, "the output is told twice: by 'feedback' and by 'output-voltage'", declared->second.at);
        }
    }

    void read_zeners(const entry& e)
    {
        if (e.value.kind == node_kind::text) {
            c_.zeners.push_back(part_named(e.value, {"zener"}));
            return;
        }
        if (!r_.expect(e.value, node_kind::list, "'zener' is a reference or a list of them: [\"Z1\", \"Z2\"]")) {
            return;
        }
        for (const node& n : e.value.items) {
            c_.zeners.push_back(part_named(n, {"zener"}));
        }
    }

    reader& r_;
    const entry& entry_;
    converter c_;
};

} // namespace

void read_converter(reader& r)
{
    const entry* e = r.doc.root.find("converter");
    if (e == nullptr) {
        return;
    }
    if (!r.expect(e->value, node_kind::table, "a converter is written [converter.K1]")) {
        return;
    }
    for (std::size_t i = 0; i < e->value.entries.size(); ++i) {
        const entry& one = e->value.entries[i];
        if (one.value.kind != node_kind::table) {
            r.complain(one.key_at, "a converter has a name: write [converter.K1] above its keys");
            return;
        }
        if (i > 0) {
            r.contradict(one.key_at, "one converter with one output for now", e->value.entries[0].key_at);
            return;
        }
        converter_reader(r, one).read();
    }
}

} // namespace onehand
