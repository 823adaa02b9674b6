#include "audit/gather.hpp"

#include "audit/sections.hpp"

#include <algorithm>

namespace onehand {

namespace {

void add_once(std::vector<std::string>& list, const std::string& line)
{
    if (std::find(list.begin(), list.end(), line) == list.end()) {
        list.push_back(line);
    }
}

std::vector<std::string> assumptions_of(const judgement& judged)
{
    std::vector<std::string> list;
    for (const finding& f : judged.findings) {
        for (const std::string& a : f.assumed) {
            add_once(list, a);
        }
    }
    return list;
}

std::vector<std::string> left_out(const supply& s, const library& lib, const std::vector<std::string>& sets)
{
    std::vector<std::string> list;
    for (const std::string& name : sets_for_setting(s, lib)) {
        if (std::find(sets.begin(), sets.end(), name) == sets.end()) {
            list.push_back(name);
        }
    }
    return list;
}

std::vector<std::string> cautions_for(const audit_result& r)
{
    std::vector<std::string> list{
        "One hand in a pocket, one lead at a time, and never alone: somebody near who can switch off and call for help.",
        "Capacitors hold their charge after switch-off and can come back after a brief short: discharge through a resistor, prove dead, leave "
        "shorted.",
        "Prove the meter on a known source, test, prove it again; meter, leads and probes rated for the highest voltage told here.",
        "A dark lamp, LED or tube is no proof of dead: a gas lamp goes out near 60 V, an LED with what feeds it. Measure.",
        "This report knows only what the description says: no burr, flux, loose strand, wrong part or hidden second source is in it.",
        "Local codes and the judgement of a licensed or authorised person come before anything printed here."};
    if (!r.label || !r.label->wait.known() || r.label->wait.never || r.label->wait.numbers.empty()) {
        list.insert(list.begin() + 2, "No waiting time can be told for every pair: measure, do not count seconds.");
    }
    return list;
}

const std::vector<std::string>& not_seen()
{
    static const std::vector<std::string> list{
        "ringing of switch and rectifier beyond what is written or assumed, switching losses, core losses, winding temperature",
        "the resistance of wire, fuse and plug in front of the stage, and what a saturated coil does to the currents told",
        "what a module draws when it is switched on, and where it goes when its own feedback fails",
        "what follows a failed part, except where a gap is bridged, a discharge path is missing, a part on the way to what can be touched fails, the "
        "rectifier shorts, or feedback is lost",
        "recovery of a capacitor by dielectric absorption after a short",
        "anything on the mains side"};
    return list;
}

/// As built; with feedback lost or a wiper open; with the input reversed, plugged in live or fed by the highest adapter that fits. What the latter
/// two need are facts of the supply as it stands.
judgement judged_under_changes(const solved_supply& solved, const session& opened, const std::vector<std::string>& sets)
{
    const auto under = [&](const char* changed, const char* kind) {
        return judge(*opened.rules, opened.lib, solved.subjects(), solved, {sets}, changed, kind);
    };
    return together(together(under("none", "none"), under("one fault of the feedback", "single-fault")), under("input event", "input-event"));
}

} // namespace

std::vector<std::string> sets_for_setting(const supply& s, const library& lib)
{
    const std::string* setting = s.used.setting ? s.used.setting->text() : nullptr;
    std::vector<std::string> names;
    for (const limit_set& l : lib.limit_sets) {
        if (setting == nullptr || std::find(l.settings.begin(), l.settings.end(), *setting) != l.settings.end()) {
            names.push_back(l.name);
        }
    }
    return names;
}

audit_result gather(const supply& s, const session& opened, const std::vector<std::string>& sets)
{
    const solved_supply solved(s, opened.lib);
    audit_result r;
    r.name = s.name;
    r.file = s.file;
    r.rules_stamp = opened.stamp;
    r.limit_sets = sets;
    r.left_out = left_out(s, opened.lib, sets);
    r.judged = judged_under_changes(solved, opened, sets);
    r.loosened = r.judged.loosened;
    r.nets = net_section(solved);
    r.parts = part_section(solved);
    r.set_point = set_point_section(solved);
    r.converter = converter_section(solved);
    r.accesses = access_section(solved, r.judged);
    r.stored = stored_section(solved, r.judged);
    r.discharges = discharge_section(solved, *opened.rules, r.judged, sets);
    r.spacings = spacing_section(solved, sets);
    r.label = label_section(solved);
    const bool time_known = r.label && r.label->wait.known() && !r.label->wait.never && !r.label->wait.numbers.empty();
    r.concluded = conclude(r.judged.findings, time_known);
    r.assumptions = assumptions_of(r.judged);
    r.cautions = cautions_for(r);
    r.not_seen = not_seen();
    return r;
}

} // namespace onehand
