// [supply], [use], [input], [[gap]], [[access]], [[decay]], [protection].
#include "supply/reader.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

using type = field_spec::type;

const std::vector<std::string> surfaces{"board copper", "FR-4", "stripboard", "breadboard", "moulding", "ceramic", "glass"};

std::optional<field> taken(std::map<std::string, field>& from, const std::string& key)
{
    const auto it = from.find(key);
    return it == from.end() ? std::nullopt : std::optional(std::move(it->second));
}

const node* table_at(reader& r, const char* key, bool due)
{
    const entry* e = r.doc.root.find(key);
    if (e == nullptr) {
        if (due) {
            r.complain({r.doc.file, 0, 0}, std::string("no [") + key + "] in this file");
        }
        return nullptr;
    }
    return r.expect(e->value, node_kind::table, std::string("[") + key + "] is a table") ? &e->value : nullptr;
}

/// The items of [[key]]; a single [key] is a slip that is named.
std::vector<const node*> tables_at(reader& r, const char* key)
{
    std::vector<const node*> list;
    const entry* e = r.doc.root.find(key);
    if (e == nullptr) {
        return list;
    }
    if (e->value.kind != node_kind::list) {
        r.complain(e->key_at, std::string("write [[") + key + "]], in double brackets: there may be several");
        return list;
    }
    for (const node& item : e->value.items) {
        if (r.expect(item, node_kind::table, std::string("[[") + key + "]] is a table")) {
            list.push_back(&item);
        }
    }
    return list;
}

place key_place(reader& r, const char* key)
{
    const entry* e = r.doc.root.find(key);
    return e == nullptr ? place{r.doc.file, 0, 0} : e->key_at;
}

std::vector<std::string> read_texts(reader& r, const node& list, const std::vector<std::string>& known, const std::string& what)
{
    std::vector<std::string> out;
    if (!r.expect(list, node_kind::list, "'" + what + "' is a list of texts")) {
        return out;
    }
    for (const node& item : list.items) {
        if (!r.expect(item, node_kind::text, "a text in quotes is due here")) {
            continue;
        }
        if (!known.empty() && std::find(known.begin(), known.end(), item.text) == known.end()) {
            const std::string near = nearest_name(item.text, known);
            r.complain(item.at, "'" + item.text + "' is not known in " + what + (near.empty() ? "" : "; nearest known name: " + near));
            continue;
        }
        out.push_back(item.text);
    }
    return out;
}

void read_supply_table(reader& r)
{
    const node* t = table_at(r, "supply", true);
    if (t == nullptr) {
        return;
    }
    r.built.at = key_place(r, "supply");
    auto f = r.fields(*t, {{"name", type::text, {}, {}}, {"return-bonded", type::truth, {}, {}}}, {"return", "chassis", "complete"}, "[supply]");
    if (const auto name = taken(f, "name")) {
        r.built.name = *name->text();
    }
    r.built.return_bonded = taken(f, "return-bonded");
    if (const entry* e = t->find("return")) {
        r.built.return_net = r.net(e->value);
    } else {
        r.complain(r.built.at, "no 'return' in [supply]: the net that all voltages are told against");
    }
    if (const entry* e = t->find("chassis")) {
        r.built.chassis = r.net(e->value);
        ++r.uses[r.built.chassis]; // a chassis stands alone
    }
    if (const entry* e = t->find("complete")) {
        r.built.complete = read_texts(r, e->value, {"capacitors", "sources", "access"}, "complete");
    }
    if (r.built.return_bonded && r.built.chassis.empty()) {
        r.complain(r.built.return_bonded->at, "'return-bonded' needs a 'chassis' net to be bonded to");
    }
}

void read_use(reader& r)
{
    const node* t = table_at(r, "use", false);
    if (t == nullptr) {
        return;
    }
    use& u = r.built.used;
    u.at = key_place(r, "use");
    auto f = r.fields(*t,
                      {{"setting", type::choice, {}, {"teaching lab", "repair bench", "display equipment"}},
                       {"person", type::choice, {}, {"ordinary", "instructed", "skilled"}},
                       {"ambient", type::quantity, dim::temperature, {}, false},
                       {"inside-rise", type::quantity, dim::temperature, {}, true},
                       {"altitude", type::quantity, dim::length, {}, false},
                       {"pollution-degree", type::quantity, dim::none, {}, true, 1.0, 4.0},
                       {"derating", type::choice, {}, {"none", "usual", "severe"}},
                       {"location", type::choice, {}, {"dry", "wet"}}},
                      {"limit-sets"}, "[use]");
    u.setting = taken(f, "setting");
    u.person = taken(f, "person");
    u.ambient = taken(f, "ambient");
    u.inside_rise = taken(f, "inside-rise");
    u.altitude = taken(f, "altitude");
    u.pollution_degree = taken(f, "pollution-degree");
    u.derating = taken(f, "derating");
    u.location = taken(f, "location");
    if (u.inside_rise && u.inside_rise->written.find('C') != std::string::npos) {
        r.complain(u.inside_rise->at, "'inside-rise' is a difference: write it in K, like \"15 K\"");
        u.inside_rise.reset();
    }
    if (u.pollution_degree) {
        const spread& s = *u.pollution_degree->number();
        if (s.whole.low != s.whole.high || s.whole.low != std::floor(s.whole.low)) {
            r.complain(u.pollution_degree->at, "'pollution-degree' is 1, 2, 3 or 4");
            u.pollution_degree.reset();
        }
    }
    if (const entry* e = t->find("limit-sets")) {
        std::vector<std::string> known;
        for (const limit_set& l : r.lib.limit_sets) {
            known.push_back(l.name);
        }
        u.limit_sets = read_texts(r, e->value, known, "limit-sets");
        u.limit_sets_at = e->value.at;
    }
}

void read_input(reader& r)
{
    const node* t = table_at(r, "input", true);
    if (t == nullptr) {
        return;
    }
    input& in = r.built.fed;
    in.at = key_place(r, "input");
    in.fields = r.fields(*t,
                         {{"voltage", type::quantity, dim::voltage, {}},
                          {"isolated", type::truth, {}, {}},
                          {"current-limit", type::quantity, dim::current, {}},
                          {"highest-adapter", type::quantity, dim::voltage, {}},
                          {"source-resistance", type::quantity, dim::resistance, {}},
                          {"reversible", type::truth, {}, {}},
                          {"feed", type::choice, {}, {"battery", "bench supply", "adapter", "mains"}},
                          {"mains-voltage", type::quantity, dim::voltage, {}},
                          {"overvoltage-category", type::choice, {}, {"I", "II", "III", "IV"}},
                          {"transient", type::quantity, dim::voltage, {}}},
                         {"nets"}, "[input]");
    const auto transient = in.fields.find("transient");
    const auto feed = in.fields.find("feed");
    if (transient != in.fields.end() && feed != in.fields.end()) {
        r.contradict(transient->second.at, "a declared 'transient' stands in place of 'feed' and the mains behind it: write one of them",
                     feed->second.at);
    }
    in.voltage = taken(in.fields, "voltage");
    in.isolated = taken(in.fields, "isolated");
    in.current_limit = taken(in.fields, "current-limit");
    in.fields.erase("voltage");
    in.fields.erase("isolated");
    in.fields.erase("current-limit");
    if (const entry* e = t->find("nets")) {
        in.nets = r.nets(e->value, 2);
    } else {
        r.complain(in.at, "no 'nets' in [input]: its two nets, positive first");
    }
    if (in.voltage && in.voltage->number()->whole.high > 60.0 * (1.0 + 1e-9) && std::isfinite(in.voltage->number()->whole.high)) {
        r.complain(in.voltage->at, "the input is above 60 V: outside what this tool speaks of (3 V to 60 V d.c.)", gravity::note);
    }
}

/// A groove lengthens a path: both of its figures or neither, and longer than straight across.
void check_groove(reader& r, const gap& g)
{
    if (g.groove.has_value() != g.groove_creepage.has_value()) {
        r.complain((g.groove ? g.groove : g.groove_creepage)->at,
                   "a groove is written with its width 'groove' and the path along it 'groove-creepage'");
    } else if (g.groove_creepage && g.creepage && g.groove_creepage->number()->whole.high < g.creepage->number()->whole.low) {
        r.contradict(g.groove_creepage->at, "the path along a groove is longer than straight across it", g.creepage->at);
    }
}

void read_gaps(reader& r)
{
    for (const node* t : tables_at(r, "gap")) {
        gap g;
        g.at = t->at;
        auto f = r.fields(*t,
                          {{"at", type::text, {}, {}},
                           {"clearance", type::quantity, dim::length, {}},
                           {"creepage", type::quantity, dim::length, {}},
                           {"surface", type::choice, {}, surfaces},
                           {"cti", type::quantity, dim::none, {}},
                           {"insulation", type::choice, {}, {"functional", "basic", "supplementary", "reinforced"}},
                           {"coating", type::choice, {}, {"none", "solder mask", "lacquer", "qualified"}},
                           {"layer", type::choice, {}, {"external", "internal"}},
                           {"groove", type::quantity, dim::length, {}},
                           {"groove-creepage", type::quantity, dim::length, {}}},
                          {"nets"}, "[[gap]]");
        if (const auto where = taken(f, "at")) {
            g.where = *where->text();
        }
        g.clearance = taken(f, "clearance");
        g.creepage = taken(f, "creepage");
        g.surface = taken(f, "surface");
        g.cti = taken(f, "cti");
        g.insulation = taken(f, "insulation");
        g.coating = taken(f, "coating");
        g.layer = taken(f, "layer");
        g.groove = taken(f, "groove");
        g.groove_creepage = taken(f, "groove-creepage");
        check_groove(r, g);
        const entry* e = t->find("nets");
        if (e == nullptr) {
            r.complain(t->at, "no 'nets' in this gap");
            continue;
        }
        const bool floor = e->value.kind == node_kind::list && e->value.items.size() == 2 && e->value.items[1].kind == node_kind::text &&
                           e->value.items[1].text == "*";
        if (floor) {
            if (const std::string net = r.net(e->value.items[0]); !net.empty()) {
                g.nets = {net, "*"};
            }
        } else {
            g.nets = r.nets(e->value, 2);
        }
        if (!g.nets.empty()) {
            r.built.gaps.push_back(std::move(g));
        }
    }
}

void read_accesses(reader& r)
{
    for (const node* t : tables_at(r, "access")) {
        access a;
        a.at = t->at;
        auto f =
            r.fields(*t, {{"at", type::text, {}, {}}, {"when", type::choice, {}, {"always", "cover off", "plug withdrawn"}}}, {"nets"}, "[[access]]");
        if (const auto where = taken(f, "at")) {
            a.where = *where->text();
        }
        if (const auto when = taken(f, "when")) {
            a.when = *when->text();
        } else if (t->find("when") == nullptr) {
            r.complain(t->at, "no 'when' in this access: always, cover off or plug withdrawn");
        }
        if (const entry* e = t->find("nets")) {
            a.nets = r.nets(e->value, 2);
        } else {
            r.complain(t->at, "no 'nets' in this access");
        }
        if (!a.nets.empty() && !a.when.empty()) {
            r.built.accesses.push_back(std::move(a));
        }
    }
}

void read_decays(reader& r)
{
    for (const node* t : tables_at(r, "decay")) {
        decay d;
        d.at = t->at;
        auto f = r.fields(*t,
                          {{"from", type::quantity, dim::voltage, {}},
                           {"to", type::quantity, dim::voltage, {}},
                           {"time", type::quantity, dim::time, {}},
                           {"meter", type::quantity, dim::resistance, {}}},
                          {"nets"}, "[[decay]]");
        for (const char* due : {"from", "to", "time", "nets"}) {
            if (t->find(due) == nullptr) {
                r.complain(t->at, std::string("no '") + due + "' in this decay");
            }
        }
        d.from = taken(f, "from");
        d.to = taken(f, "to");
        d.time = taken(f, "time");
        d.meter = taken(f, "meter");
        if (const entry* e = t->find("nets")) {
            d.nets = r.nets(e->value, 2);
        }
        if (d.from && d.to && d.to->number()->whole.high >= d.from->number()->whole.low) {
            r.contradict(d.to->at, "a decay ends below where it began", d.from->at);
        } else if (d.from && d.to && d.time && !d.nets.empty()) {
            r.built.decays.push_back(std::move(d));
        }
    }
}

void read_protection(reader& r)
{
    const node* t = table_at(r, "protection", false);
    if (t == nullptr) {
        return;
    }
    r.built.guarded.at = key_place(r, "protection");
    r.built.guarded.fields = r.fields(*t,
                                      {{"enclosure", type::choice, {}, {"open", "covered", "finger-proof"}},
                                       {"interlock", type::truth, {}, {}},
                                       {"indicator", type::truth, {}, {}},
                                       {"label", type::truth, {}, {}},
                                       {"discharge-procedure", type::truth, {}, {}},
                                       {"shorting-lead", type::truth, {}, {}},
                                       {"discharge-resistor", type::truth, {}, {}}},
                                      {}, "[protection]");
}

} // namespace

void read_sections(reader& r)
{
    read_supply_table(r);
    read_use(r);
    read_input(r);
    read_gaps(r);
    read_accesses(r);
    read_decays(r);
    read_protection(r);
}

} // namespace onehand
