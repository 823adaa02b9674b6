#pragma once
#include "audit/audit.hpp"

#include <fstream>
#include <sstream>

namespace onehand::test {

inline std::string sample(const std::string& name)
{
    std::ifstream in(std::string(ONEHAND_SOURCE) + "/samples/" + name);
    std::stringstream text;
    text << in.rdbuf();
    return text.str();
}

inline const session& opened()
{
    static const session_result s = open_session();
    return *s.ready;
}

inline audit_outcome run(const std::string& text, const std::vector<std::string>& settings = {})
{
    audit_request q;
    q.text = text;
    q.file = "t.toml";
    q.settings = settings;
    return audit(opened(), q);
}

inline std::string replaced(std::string text, const std::string& from, const std::string& to)
{
    const std::size_t at = text.find(from);
    if (at == std::string::npos) {
        return {};
    }
    text.replace(at, from.size(), to);
    return text;
}

inline const finding* found(const audit_result& r, const std::string& rule, const std::string& subject)
{
    for (const finding& f : r.judged.findings) {
        if (f.rule == rule && f.about.name == subject) {
            return &f;
        }
    }
    return nullptr;
}

inline const char* const names[] = {"tide-clock-as-built.toml", "tide-clock-corrected.toml", "geiger-bench.toml",      "minimal.toml",
                                    "negative-rail.toml",       "repair-rail.toml",          "valve-rail-flyback.toml"};

} // namespace onehand::test
