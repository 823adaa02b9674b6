// Facts of the supply as a whole: fuse in the input path, what is attested, what protects as written.
#include "stress/part_facts.hpp"
#include "stress/paths.hpp"
#include "stress/solved.hpp"

#include <algorithm>

namespace onehand {

namespace {

value attested(const supply& s, const std::string& what)
{
    // Not attesting is not knowing: the list may be short.
    return s.attests(what) ? truth_of(true) : missing_value(value::type::truth, {"supply.complete: \"" + what + "\""});
}

/// What protects and is not written is absent.
value protection_of(const supply& s, const std::string& name)
{
    const auto it = s.guarded.fields.find(name);
    if (it == s.guarded.fields.end()) {
        return truth_of(false);
    }
    value v = it->second.truth() != nullptr ? truth_of(*it->second.truth()) : choice_of(*it->second.text());
    v.shown.formula = "as written";
    v.shown.inputs.push_back(input_of("protection." + name, it->second));
    return v;
}

value enclosure_of(const supply& s)
{
    const value v = protection_of(s, "enclosure");
    return v.holds == value::type::choice ? v : choice_of("open");
}

/// Nets that the input's positive net feeds without passing a fuse; the return ends the walk.
std::set<std::string> unfused_nets(const supply& s, const library& lib)
{
    const std::vector<element> all = wire(s, lib, state::running, {});
    const std::string& ground = s.fed.nets[1];
    return reach(all, s.fed.nets[0], [&](const element& e) {
        const part* p = s.find_part(e.ref);
        return may_conduct(e) && e.from != ground && e.to != ground && (p == nullptr || p->kind != "fuse");
    });
}

value input_fused(const supply& s, const library& lib)
{
    const bool any_fuse = std::any_of(s.parts.begin(), s.parts.end(), [](const part& p) { return p.kind == "fuse"; });
    if (!any_fuse || s.fed.nets.size() != 2) {
        return truth_of(false);
    }
    const std::set<std::string> open = unfused_nets(s, lib);
    for (const part& p : s.parts) {
        const bool small = p.kind == "fuse" || p.kind == "connector" || p.kind == "wire" || p.kind == "switch";
        const bool fed = std::any_of(p.terminals.begin(), p.terminals.end(), [&](const terminal& t) { return open.contains(t.net); });
        if (fed && !small) {
            return truth_of(false);
        }
    }
    const bool stage_open = s.stage && !s.stage->inputs.empty() && open.contains(s.stage->inputs[0]);
    return truth_of(!stage_open);
}

value highest(const std::vector<const value*>& all, dimension d)
{
    value out;
    double in_use = 0.0;
    double whole = 0.0;
    double certain = 0.0; // what the greatest is at the least
    for (const value* v : all) {
        out.missing.insert(out.missing.end(), v->missing.begin(), v->missing.end());
        out.assumed.insert(out.assumed.end(), v->assumed.begin(), v->assumed.end());
        for (const spread& s : v->numbers) {
            in_use = std::max({in_use, std::abs(s.in_use.low), std::abs(s.in_use.high)});
            whole = std::max({whole, std::abs(s.whole.low), std::abs(s.whole.high)});
            certain = std::max(certain, s.whole.low);
        }
    }
    out.numbers.push_back({d, {certain, in_use}, {certain, whole}, std::nullopt});
    out.shown.formula = "greatest of all";
    return out;
}

} // namespace

value solved_supply::supply_fact(const std::string& name) const
{
    if (name == "input-fused") {
        return input_fused(bodies_, lib_);
    }
    if (name == "input-isolated") {
        return written_value(bodies_.fed.isolated, value::type::truth, "input.isolated");
    }
    if (name == "wet") {
        const value where = written_value(bodies_.used.location, value::type::choice, "use.location");
        value v = where.choice.empty() ? missing_value(value::type::truth, where.missing) : truth_of(where.choice == "wet");
        v.shown = where.shown;
        return v;
    }
    if (name == "label" || name == "indicator" || name == "interlock" || name == "discharge-procedure" || name == "shorting-lead" ||
        name == "discharge-resistor") {
        return protection_of(bodies_, name);
    }
    if (name == "enclosure") {
        return enclosure_of(bodies_);
    }
    if (const auto end = name.find("-attested"); end != std::string::npos) {
        return attested(bodies_, name.substr(0, end));
    }
    if (name == "person") {
        return bodies_.used.person ? written_value(bodies_.used.person, value::type::choice, "use.person") : choice_of("ordinary");
    }
    if (name == "setting") {
        return written_value(bodies_.used.setting, value::type::choice, "use.setting");
    }
    if (name == "chassis-declared") {
        return truth_of(!bodies_.chassis.empty());
    }
    if (name == "return-bonded") {
        return written_value(bodies_.return_bonded, value::type::truth, "supply.return-bonded");
    }
    if (name == "meter-error" || name == "meter-error-net") {
        const meter_error worst = worst_meter_error(*this);
        value v = name == "meter-error" ? number(exactly({worst.share, dim::none})) : choice_of(worst.net.empty() ? "none" : worst.net);
        v.shown.formula = "R/(R + 10 Mohm), R what feeds " + worst.net + " at its greatest, all stiff nets joined";
        return v;
    }
    if (name == "input-after-fault") {
        return input_after_fault(*this);
    }
    if (name == "shares-input") {
        const value isolates = converter_fact("isolates");
        return isolates.truth ? truth_of(!*isolates.truth) : missing_value(value::type::truth, isolates.missing);
    }
    if (name == "input-touchable") {
        const std::set<std::string> open = touchable_nets(written_);
        return truth_of(!bodies_.fed.nets.empty() && open.contains(bodies_.fed.nets[0]));
    }
    std::vector<const value*> figures;
    if (name == "highest-voltage") {
        for (const dc_solution& d : states_) {
            for (const auto& [net, v] : d.potential) {
                figures.push_back(&v);
            }
            // Of an output that nothing ties to the return its own voltage is known all the same.
            for (const auto& [nets, v] : d.between) {
                if (d.solved.contains(nets) && d.floating.contains(nets.first)) {
                    figures.push_back(&v);
                }
            }
        }
        return highest(figures, dim::voltage);
    }
    if (name == "highest-energy") {
        for (const stored_item& i : stored_) {
            figures.push_back(&i.energy);
        }
        return highest(figures, dim::energy);
    }
    return missing_value(value::type::number, {"supply." + name});
}

} // namespace onehand
