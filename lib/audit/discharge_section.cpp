// What stays after switch-off, pair by pair and case by case, and the waiting time for the label.
#include "audit/sections.hpp"
#include "stress/paths.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <array>
#include <fmt/format.h>
#include <map>

namespace onehand {

namespace {

constexpr std::array<double, 5> remainders{1.0, 5.0, 10.0, 60.0, 300.0}; // design section 6, in seconds

/// Not judged of this pair by the rule that asks it: exempt.
bool exempt(const judgement& judged, const std::string& rule, const subject& about)
{
    return std::none_of(judged.findings.begin(), judged.findings.end(),
                        [&](const finding& f) { return f.rule == rule && f.about == about && f.judged != verdict::not_applicable; });
}

/// Of what is asked and not exempt, the time that takes the greatest share of what is allowed.
void mark_governing(std::vector<discharge_facts::limit>& limits)
{
    discharge_facts::limit* worst = nullptr;
    double most = 0.0;
    for (discharge_facts::limit& l : limits) {
        if (!l.within_s || l.exempt) {
            continue;
        }
        const double share = l.time.never || l.time.numbers.empty() ? unbounded : l.time.numbers.front().whole.high / *l.within_s;
        if (worst == nullptr || share > most) {
            worst = &l;
            most = share;
        }
    }
    if (worst != nullptr) {
        worst->governs = true;
    }
}

discharge_facts case_of(const solved_supply& s, const access_item& a, const off_case& how, const std::vector<asked_time>& asked,
                        const judgement& judged)
{
    const decay_network& network = s.after(how);
    const std::string& from = a.where.nets[0];
    const std::string& to = a.where.nets[1];
    discharge_facts f;
    f.nets = a.where.nets;
    f.input_end = how.input_shorted ? "shorted" : "open";
    f.output_end = how.output_unplugged ? "unplugged" : "fitted";
    f.change = how.broken.empty() ? "none" : how.broken + " open";
    f.limits.push_back({{low_voltage, dim::voltage}, network.time_to(from, to, low_voltage), "practice", {}, false, false});
    std::map<double, value> known{{low_voltage, f.limits.front().time}};
    for (const asked_time& t : asked) {
        const auto it = known.find(t.volts);
        const value& time = it != known.end() ? it->second : known.emplace(t.volts, network.time_to(from, to, t.volts)).first->second;
        f.limits.push_back({{t.volts, dim::voltage}, time, t.limit_set, t.seconds, exempt(judged, t.rule, a.about), false});
    }
    mark_governing(f.limits);
    for (const double t : remainders) {
        f.left.push_back({t, network.left_after(from, to, t)});
    }
    f.final_voltage = network.final_voltage(from, to);
    return f;
}

std::string measured_words(const solved_supply& s, const std::vector<std::string>& nets)
{
    for (const decay& d : s.written().decays) {
        const bool same = (d.nets[0] == nets[0] && d.nets[1] == nets[1]) || (d.nets[0] == nets[1] && d.nets[1] == nets[0]);
        if (same && d.from && d.to && d.time) {
            return fmt::format("measured from {} to {} in {}: it bounds what is inside", d.from->written, d.to->written, d.time->written);
        }
    }
    return {};
}

/// The longest time to 60 V of any capacitor pair worth waiting for, every path broken in turn.
value longest_wait(const solved_supply& s, const access_item& a)
{
    value worst;
    const auto add = [&](const off_case& how) {
        const value t = s.after(how).time_to(a.where.nets[0], a.where.nets[1], low_voltage);
        if (t.never) {
            worst = t;
            worst.reason += how.broken.empty() ? "" : " (with " + how.broken + " open)";
            return false;
        }
        worst = worst.numbers.empty() && worst.missing.empty() ? t : greater(worst, t);
        return true;
    };
    for (const off_case& how : s.off_cases()) {
        if (!add(how)) {
            return worst;
        }
    }
    for (const std::string& ref : s.paths_to_break()) {
        for (const off_case& how : s.off_cases_without(ref)) {
            if (!add(how)) {
                return worst;
            }
        }
    }
    return worst;
}

/// Within the ES1 line of the capacitor table, and exempt by charge in every set.
bool too_little_to_wait_for(const solved_supply& s, const access_item& a)
{
    const auto charge = highest(a.charge);
    const auto item =
        std::find_if(s.stored().begin(), s.stored().end(), [&](const stored_item& i) { return i.is_pair && i.about.nets == a.where.nets; });
    if (!charge || *charge > 45e-6 || item == s.stored().end() || item->es1_voltage.numbers.empty() || !item->es1_voltage.known()) {
        return false;
    }
    const auto volts = highest(item->voltage);
    return volts && *volts <= item->es1_voltage.numbers.front().whole.low;
}

} // namespace

std::vector<discharge_facts> discharge_section(const solved_supply& s, const rule_set& rules, const judgement& judged,
                                               const std::vector<std::string>& sets)
{
    const std::vector<asked_time> asked = times_asked(rules, sets);
    std::vector<discharge_facts> list;
    for (const access_item& a : s.accesses()) {
        const auto stored =
            std::find_if(s.stored().begin(), s.stored().end(), [&](const stored_item& i) { return i.is_pair && i.about.nets == a.where.nets; });
        for (const off_case& how : s.off_cases()) {
            discharge_facts f = case_of(s, a, how, asked, judged);
            f.only_path = stored != s.stored().end() ? stored->only_part : "";
            f.measured = measured_words(s, a.where.nets);
            list.push_back(std::move(f));
        }
    }
    return list;
}

std::optional<label_facts> label_section(const solved_supply& s)
{
    if (s.accesses().empty()) {
        return std::nullopt;
    }
    label_facts f;
    const subject whole{"supply", "", {}, {}};
    f.voltage = s.look_up(whole, state::running, "highest-voltage");
    f.energy = s.look_up(whole, state::running, "highest-energy");
    for (const access_item& a : s.accesses()) {
        if (too_little_to_wait_for(s, a)) {
            continue;
        }
        const value t = longest_wait(s, a);
        if (t.never || !t.known()) {
            f.wait = t;
            f.reason = a.about.name + ": " + (t.never ? t.reason : "not all is known");
            return f;
        }
        f.wait = f.wait.numbers.empty() ? t : greater(f.wait, t);
    }
    if (f.wait.numbers.empty()) {
        f.wait = number(exactly({0.0, dim::time}));
        f.reason = "every pair is within ES1 by what flows at once, and holds 45 \u00b5C or less";
    } else {
        f.reason = "longest time to 60 V, any one discharge path open";
    }
    return f;
}

} // namespace onehand
