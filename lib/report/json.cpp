#include "report/json.hpp"

#include "quantity/text.hpp"

#include <cmath>
#include <nlohmann/json.hpp>

namespace onehand {

namespace {

using json = nlohmann::ordered_json;

std::string unit_of(const dimension& d)
{
    struct row {
        dimension dim;
        const char* unit;
    };
    static const row rows[] = {{dim::voltage, "V"},      {dim::current, "A"},
                               {dim::resistance, "ohm"}, {dim::capacitance, "F"},
                               {dim::inductance, "H"},   {dim::time, "s"},
                               {dim::frequency, "Hz"},   {dim::power, "W"},
                               {dim::energy, "J"},       {dim::charge, "C"},
                               {dim::length, "m"},       {dim::temperature, "K"},
                               {dim::none, "1"},         {dim::melting_integral, "A2s"}};
    for (const row& r : rows) {
        if (r.dim == d) {
            return r.unit;
        }
    }
    return name_of(d);
}

json end_of(double x)
{
    return std::isfinite(x) ? json(x == 0.0 ? 0.0 : x) : json(nullptr); // no minus before nothing
}

json of_spread(const spread& s)
{
    json j;
    j["low"] = end_of(s.whole.low);
    if (s.nominal) {
        j["nominal"] = end_of(*s.nominal);
    }
    j["high"] = end_of(s.whole.high);
    j["in-use"] = json::array({end_of(s.in_use.low), end_of(s.in_use.high)});
    j["unit"] = unit_of(s.dim);
    return j;
}

json of_value(const value& v)
{
    if (v.holds == value::type::truth) {
        return v.truth ? json(*v.truth) : json{{"missing", v.missing}};
    }
    if (v.holds == value::type::choice) {
        return !v.choice.empty() ? json(v.choice) : json{{"missing", v.missing}};
    }
    json j;
    if (v.never) {
        j = {{"low", nullptr}, {"high", nullptr}, {"in-use", json::array({nullptr, nullptr})}, {"unit", "s"}, {"reason", v.reason}};
    } else if (v.numbers.size() == 1) {
        j = of_spread(v.numbers.front());
    } else if (v.numbers.size() > 1) {
        for (const spread& s : v.numbers) {
            j["one-of"].push_back(of_spread(s));
        }
    }
    if (!v.missing.empty() || j.is_null()) {
        j["missing"] = v.missing;
    }
    return j;
}

json of_evidence(const evidence& e)
{
    json j{{"formula", e.formula}, {"searched", e.searched}};
    if (e.searched) {
        j["margin"] = e.margin;
    }
    j["inputs"] = json::array();
    for (const evidence::input& i : e.inputs) {
        json one{{"name", i.name}, {"figure", i.figure}};
        if (i.at.line != 0) {
            one["place"] = {{"file", i.at.file}, {"line", i.at.line}, {"column", i.at.column}};
        }
        j["inputs"].push_back(one);
    }
    return j;
}

json of_subject(const subject& s)
{
    json j{{"kind", s.kind}, {"name", s.name}};
    if (!s.nets.empty()) {
        j["nets"] = s.nets;
    }
    return j;
}

json of_classes(const std::vector<class_told>& classes)
{
    json j = json::object();
    for (const class_told& c : classes) {
        j[c.id] = c.name.empty() ? json{{"missing", c.missing}} : json(c.name);
    }
    return j;
}

json of_finding(const finding& f)
{
    json j{{"id", f.id},
           {"rule", f.rule},
           {"limit-set", f.limit_set},
           {"subject", of_subject(f.about)},
           {"state", word_for(f.in)},
           {"change", f.change},
           {"verdict", word_for(f.judged)}};
    if (f.judged == verdict::not_applicable && f.advice.empty()) {
        return j; // counted, nothing to tell
    }
    if (!f.marginal_by.empty()) {
        j["marginal-by"] = f.marginal_by;
    }
    j["signal"] = word_for(f.signal);
    j["bears-on"] = f.bears_on;
    if (f.left) {
        j["value"] = of_value(*f.left);
    }
    if (f.limit) {
        j["limit"] = of_value(*f.limit);
    }
    if (f.margin) {
        j["margin"] = *f.margin;
    }
    j["message"] = f.message;
    j["why"] = f.why;
    j["remedy"] = f.remedy;
    if (!f.settles.empty()) {
        j["settles"] = f.settles;
    }
    if (!f.advice.empty()) {
        j["advice"] = f.advice;
    }
    j["missing"] = f.missing;
    j["assumed"] = f.assumed;
    j["evidence"] = json::array();
    for (const evidence& e : f.shown) {
        if (!e.formula.empty() || !e.inputs.empty()) {
            j["evidence"].push_back(of_evidence(e));
        }
    }
    for (const subject& s : f.gathered) {
        j["gathered"].push_back(of_subject(s));
    }
    j["source"] = {{"cite", f.from.cite}, {"clause", f.from.clause}, {"basis", word_for(f.from.rests_on)}};
    if (f.about.at.line != 0) {
        j["place"] = {{"file", f.about.at.file}, {"line", f.about.at.line}, {"column", f.about.at.column}};
    }
    return j;
}

json of_counts(const audit_result& r)
{
    json j;
    for (const verdict v : {verdict::fail, verdict::not_shown, verdict::marginal, verdict::pass, verdict::not_applicable}) {
        int count = 0;
        for (const finding& f : r.judged.findings) {
            count += f.judged == v ? 1 : 0;
        }
        j[word_for(v)] = count;
    }
    return j;
}

json of_discharge(const discharge_facts& d)
{
    json j{{"nets", d.nets},     {"input-end", d.input_end}, {"output-end", d.output_end},
           {"change", d.change}, {"limits", json::array()},  {"left", json::array()}};
    for (const auto& l : d.limits) {
        json one{{"to", l.to.si}, {"time", of_value(l.time)}, {"limit-set", l.limit_set}, {"exempt", l.exempt}, {"governs", l.governs}};
        if (l.within_s) {
            one["within"] = *l.within_s;
        }
        j["limits"].push_back(one);
    }
    for (const auto& l : d.left) {
        j["left"].push_back({{"after", l.after_s}, {"voltage", of_value(l.voltage)}});
    }
    j["final"] = of_value(d.final_voltage);
    if (!d.limits.empty() && d.limits.front().time.never) {
        j["reason"] = d.limits.front().time.reason;
    }
    if (!d.only_path.empty()) {
        j["only-path"] = d.only_path;
    }
    if (!d.measured.empty()) {
        j["measured"] = d.measured;
    }
    return j;
}

json of_spacing(const spacing_facts& s)
{
    json j{{"nets", s.about.nets}, {"voltage", of_value(s.working_voltage)}};
    for (const auto& r : s.asked) {
        json& set = j["required"][r.limit_set];
        set = {{"clearance", of_value(r.clearance)}, {"creepage", of_value(r.creepage)}};
        if (r.rests_on) {
            set["basis"] = word_for(*r.rests_on);
        }
    }
    j["insulation"] = s.insulation;
    j["governs"] = {{"clearance", s.clearance_governs}, {"creepage", s.creepage_governs}};
    j["verdict"] = word_for(s.kept);
    j["measured"] = json::array();
    for (const auto& m : s.measured) {
        json one;
        if (!m.where.empty()) {
            one["at"] = m.where;
        }
        one["clearance"] = of_value(m.clearance);
        one["creepage"] = of_value(m.creepage);
        one["floor"] = m.floor;
        j["measured"].push_back(one);
    }
    j["covered"] = s.covered;
    return j;
}

void add_nets_and_parts(json& j, const audit_result& r)
{
    j["nets"] = json::object();
    for (const net_facts& n : r.nets) {
        json one = json::object();
        for (const auto& [in, v] : n.potential) {
            one[word_for(in)] = of_value(v);
        }
        one["floating"] = n.floating;
        j["nets"][n.net] = one;
    }
    j["parts"] = json::object();
    for (const part_facts& p : r.parts) {
        json one = json::object();
        for (const auto& s : p.states) {
            json in;
            for (const auto& [name, v] : {std::pair("voltage", &s.voltage), std::pair("current", &s.current), std::pair("power", &s.power)}) {
                if (!v->numbers.empty() || !v->missing.empty()) {
                    in[name] = of_value(*v);
                }
            }
            one[word_for(s.in)] = in;
        }
        j["parts"][p.ref] = one;
    }
}

void add_stage(json& j, const converter_facts& c)
{
    if (!c.mode.empty() || !c.mode_missing.empty()) {
        j["mode"] = c.mode.empty() ? json{{"missing", c.mode_missing}} : json(c.mode);
    }
    for (const converter_facts::figure& f : c.figures) {
        const std::size_t point = f.name.find('.');
        json& group = point == std::string::npos ? j : j[f.name.substr(0, point)];
        group[point == std::string::npos ? f.name : f.name.substr(point + 1)] = of_value(f.told);
    }
    if (!c.runaway_story.empty()) {
        json& away = j["runaway"];
        away["story"] = c.runaway_story;
        away["passes"] = json::array();
        for (const converter_facts::passed& p : c.runaway_order) {
            away["passes"].push_back({{"part", p.part}, {"rating", p.rating}, {"rail", p.rail}, {"time", of_value(p.time)}});
        }
    }
    j["shorted"] = c.shorted;
}

void add_converter(json& j, const audit_result& r)
{
    if (!r.set_point) {
        return;
    }
    json point = of_value(r.set_point->output);
    point["basis"] = r.set_point->basis;
    point["set-by"] = json::array();
    for (const auto& e : r.set_point->set_by) {
        point["set-by"].push_back({{"part", e.part}, {"at-low", e.at_low}, {"at-high", e.at_high}});
    }
    j["converter"] = {{"set-point", point}};
    if (r.converter) {
        add_stage(j["converter"], *r.converter);
    }
}

void add_access_and_stored(json& j, const audit_result& r)
{
    j["access"] = json::array();
    for (const access_facts& a : r.accesses) {
        for (const auto& s : a.states) {
            j["access"].push_back({{"nets", a.where.nets},
                                   {"at", a.where.where},
                                   {"when", a.where.when},
                                   {"state", word_for(s.in)},
                                   {"change", s.change},
                                   {"voltage", of_value(s.voltage)},
                                   {"current", of_value(s.current)},
                                   {"charge", of_value(s.charge)},
                                   {"class", of_classes(s.classes)}});
        }
    }
    j["stored"] = json::array();
    for (const stored_facts& s : r.stored) {
        json one{{"name", s.about.name},
                 {"nets", s.about.nets},
                 {"parts", s.parts},
                 {"capacitance", of_value(s.capacitance)},
                 {"voltage", of_value(s.voltage)},
                 {"energy", of_value(s.energy)},
                 {"charge", of_value(s.charge)}};
        if (s.is_pair) {
            one["at-once"] = {{"energy", of_value(s.at_once_energy)}, {"charge", of_value(s.at_once_charge)}};
        }
        one["class"] = of_classes(s.classes);
        j["stored"].push_back(one);
    }
}

void add_discharge(json& j, const audit_result& r)
{
    j["discharge"] = json::array();
    for (const discharge_facts& d : r.discharges) {
        j["discharge"].push_back(of_discharge(d));
    }
    if (r.label) {
        j["label"] = {{"voltage", of_value(r.label->voltage)},
                      {"energy", of_value(r.label->energy)},
                      {"wait", of_value(r.label->wait)},
                      {"reason", r.label->reason}};
    }
}

void add_spacing(json& j, const audit_result& r)
{
    j["spacing"] = json::array();
    for (const spacing_facts& s : r.spacings) {
        j["spacing"].push_back(of_spacing(s));
    }
}

json of_result(const audit_result& r, const std::string& section)
{
    json j;
    j["supply"] = {{"name", r.name}, {"file", r.file}, {"sha256", r.sha256}};
    if (section == "discharge") {
        add_discharge(j, r);
        j["cautions"] = r.cautions;
        return j;
    }
    if (section == "spacing") {
        add_spacing(j, r);
        j["cautions"] = r.cautions;
        return j;
    }
    j["limit-sets"] = r.limit_sets;
    j["left-out"] = r.left_out;
    j["loosened"] = r.loosened;
    j["first"] = r.concluded.first;
    j["conclusion"] = {{"energise", r.concluded.energise},
                       {"reach-in", r.concluded.reach_in},
                       {"time-known", r.concluded.time_known},
                       {"because", r.concluded.because},
                       {"conditions", r.concluded.conditions}};
    j["counts"] = of_counts(r);
    j["findings"] = json::array();
    for (const finding& f : r.judged.findings) {
        j["findings"].push_back(of_finding(f));
    }
    add_nets_and_parts(j, r);
    add_converter(j, r);
    add_access_and_stored(j, r);
    add_discharge(j, r);
    add_spacing(j, r);
    j["assumptions"] = r.assumptions;
    j["not-looked-at"] = r.not_seen;
    j["cautions"] = r.cautions;
    return j;
}

json of_complaint(const complaint& c)
{
    json j{{"file", c.at.file}, {"line", c.at.line}, {"column", c.at.column}, {"message", c.message}, {"note", c.weight == gravity::note}};
    if (c.also) {
        j["also"] = {{"file", c.also->file}, {"line", c.also->line}, {"column", c.also->column}};
    }
    return j;
}

} // namespace

std::string json_report(const std::vector<json_input>& outcomes, const std::string& version, const std::string& rules_stamp,
                        const std::string& section)
{
    json j;
    j["format"] = 1;
    j["tool"] = {{"name", "onehand"}, {"version", version}, {"rules", rules_stamp}};
    j["complaints"] = json::array();
    j["audits"] = json::array();
    for (const json_input& i : outcomes) {
        for (const complaint& c : i.outcome->complaints) {
            j["complaints"].push_back(of_complaint(c));
        }
        if (i.outcome->result) {
            j["audits"].push_back(of_result(*i.outcome->result, section));
        }
    }
    // Text from a description may hold anything that is no UTF-8 only if it was let in; it is replaced, never thrown at.
    return j.dump(1, ' ', false, json::error_handler_t::replace) + '\n';
}

} // namespace onehand
