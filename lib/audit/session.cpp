#include "audit/session.hpp"

#include "audit/digest.hpp"
#include "published/embedded.hpp"
#include "rule/packed.hpp"

namespace onehand {

namespace {

/// Built-in and own files together, from their texts: an own file may add to anything.
session_result open_with(const std::vector<rule_text>& own)
{
    session_result result;
    auto opened = std::make_shared<session>();
    library_result loaded = load_library(embedded_rules(), own);
    result.complaints = std::move(loaded.complaints);
    if (any_mistake(result.complaints)) {
        return result;
    }
    opened->lib = std::move(loaded.lib);
    rules_result compiled = compile_rules(opened->lib);
    result.complaints.insert(result.complaints.end(), compiled.complaints.begin(), compiled.complaints.end());
    sort_by_place(result.complaints);
    if (any_mistake(result.complaints)) {
        return result;
    }
    opened->rules = std::move(compiled.rules);
    std::string all = embedded_stamp();
    for (const rule_text& file : own) {
        all += file.name + '\n' + file.text;
    }
    opened->stamp = sha256_of(all).substr(0, 12);
    result.ready = std::move(opened);
    return result;
}

} // namespace

session_result open_session(const std::vector<rule_text>& own)
{
    if (!own.empty()) {
        return open_with(own);
    }
    ready_set set = unpacked(packed_rules());
    auto opened = std::make_shared<session>();
    opened->lib = std::move(set.lib);
    opened->rules = std::move(set.rules);
    opened->stamp = set.stamp.substr(0, 12);
    session_result result;
    result.ready = std::move(opened);
    return result;
}

const library& library_of(const session& s)
{
    return s.lib;
}

const rule_set& rules_of(const session& s)
{
    return *s.rules;
}

} // namespace onehand
