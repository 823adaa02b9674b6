#include "audit/session.hpp"

#include "audit/digest.hpp"
#include "published/embedded.hpp"

namespace onehand {

session_result open_session(const std::vector<rule_text>& own)
{
    session_result result;
    auto opened = std::make_shared<session>();
    const std::vector<rule_text> built_in = embedded_rules();
    library_result loaded = load_library(built_in, own);
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
    std::string all;
    for (const auto* list : {&built_in, &own}) {
        for (const rule_text& file : *list) {
            all += file.name + '\n' + file.text;
        }
    }
    opened->stamp = sha256_of(all).substr(0, 12);
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
