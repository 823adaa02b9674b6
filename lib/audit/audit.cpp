#include "audit/audit.hpp"

#include "audit/digest.hpp"
#include "audit/gather.hpp"
#include "audit/session.hpp"

#include <algorithm>
#include <exception>

namespace onehand {

namespace {

/// The sets in force: as asked for, else as the file lists them, else those that the setting picks.
std::vector<std::string> sets_in_force(const audit_request& request, const supply& s, const library& lib)
{
    if (!request.limit_sets.empty()) {
        return request.limit_sets;
    }
    if (!s.used.limit_sets.empty()) {
        return s.used.limit_sets;
    }
    return sets_for_setting(s, lib);
}

std::vector<complaint> unknown_sets(const std::vector<std::string>& asked, const library& lib)
{
    std::vector<std::string> known;
    for (const limit_set& l : lib.limit_sets) {
        known.push_back(l.name);
    }
    std::vector<complaint> list;
    for (const std::string& name : asked) {
        if (lib.find_limit_set(name) == nullptr) {
            const std::string near = nearest_name(name, known);
            complaint c;
            c.at.file = "--limit-sets";
            c.message = "no limit set '" + name + "'" + (near.empty() ? "" : "; nearest known name: " + near);
            list.push_back(std::move(c));
        }
    }
    return list;
}

audit_outcome run(const session& s, const audit_request& request)
{
    audit_outcome outcome;
    read_result read = read_document(request.text, request.file);
    outcome.complaints = std::move(read.complaints);
    if (any_mistake(outcome.complaints)) {
        return outcome;
    }
    supply_result described = read_supply(read.doc, s.lib, request.settings);
    outcome.complaints.insert(outcome.complaints.end(), described.complaints.begin(), described.complaints.end());
    for (complaint& c : unknown_sets(request.limit_sets, s.lib)) {
        outcome.complaints.push_back(std::move(c));
    }
    sort_by_place(outcome.complaints);
    if (any_mistake(outcome.complaints)) {
        return outcome;
    }
    const std::vector<std::string> sets = sets_in_force(request, described.built, s.lib);
    outcome.result = gather(described.built, s, sets);
    outcome.result->sha256 = sha256_of(request.text);
    return outcome;
}

} // namespace

audit_outcome audit(const session& s, const audit_request& request)
{
    return run(s, request);
}

int exit_code(const audit_outcome& outcome)
{
    if (!outcome.result) {
        return 2;
    }
    const conclusions& c = outcome.result->concluded;
    if (c.energise == "hold" || c.reach_in == "hold") {
        return 1;
    }
    return c.energise == "no-objection" && c.reach_in == "only-after" ? 0 : 4;
}

} // namespace onehand
