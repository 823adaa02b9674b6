// Do the examples of the rules and classes notice a changed rule? Each comparison is turned round and each constant moved by 1 %, one at a time;
// every such mutant must change the outcome of at least one example of its own rule. Mutants that change nothing by their nature are not made: a zero
// constant moved by a share of itself, and < against <=, which differ on a set of no width. Survivors with a reason stand in survivors.txt.
#include "published/embedded.hpp"
#include "rule/rule_set.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <fstream>
#include <functional>
#include <iostream>
#include <set>
#include <sstream>

using namespace onehand;

namespace {

using op = expression::op;

struct loaded {
    library lib;
    std::shared_ptr<const rule_set> rules;
};

const loaded& shipped()
{
    static const loaded l = [] {
        loaded out;
        out.lib = load_library(embedded_rules()).lib;
        out.rules = compile_rules(out.lib).rules;
        return out;
    }();
    return l;
}

std::optional<op> turned_round(op is)
{
    switch (is) {
    case op::less:
        return op::greater;
    case op::less_equal:
        return op::greater_equal;
    case op::greater:
        return op::less;
    case op::greater_equal:
        return op::less_equal;
    case op::logic_and:
        return op::logic_or;
    case op::logic_or:
        return op::logic_and;
    default:
        return std::nullopt;
    }
}

/// Calls `try_it` with the description of each mutant while the expression is changed, then puts it back.
void each_mutant(expression& e, const std::function<void(const std::string&)>& try_it, bool exponent = false)
{
    if (const auto other = turned_round(e.is)) {
        const op was = e.is;
        e.is = *other;
        try_it(sign_word(was) + " turned round");
        e.is = was;
    }
    if (e.is == op::equal) {
        const expression was = e;
        expression turned;
        turned.is = op::logic_not;
        turned.type = value::type::truth;
        turned.parts.push_back(was);
        e = turned;
        try_it("= turned round");
        e = was;
    }
    if (e.is == op::constant && e.constant.si != 0.0 && !exponent) {
        const double was = e.constant.si;
        const std::string name = print(e);
        for (const double factor : {0.99, 1.01}) {
            e.constant.si = was * factor;
            try_it(name + (factor > 1.0 ? " and 1 %" : " less 1 %"));
        }
        e.constant.si = was;
    }
    for (std::size_t i = 0; i < e.parts.size(); ++i) {
        const bool raised = e.is == op::power && i == 1;
        const bool table_name = e.is == op::call && e.word == "table" && i == 0;
        if (!table_name) {
            each_mutant(e.parts[i], try_it, raised);
        }
    }
}

bool killed(const std::vector<example_result>& results)
{
    return std::any_of(results.begin(), results.end(), [](const example_result& r) { return !r.agrees; });
}

/// "<rule>: <key>: <mutant>" -> reason
std::map<std::string, std::string> known_survivors()
{
    std::map<std::string, std::string> list;
    std::ifstream in(std::string(ONEHAND_SOURCE) + "/tests/rule/survivors.txt");
    for (std::string line; std::getline(in, line);) {
        if (const std::size_t at = line.find(" | "); !line.empty() && line[0] != '#' && at != std::string::npos) {
            list[line.substr(0, at)] = line.substr(at + 3);
        }
    }
    return list;
}

struct count {
    int made = 0;
    int killed = 0;
    std::vector<std::string> survivors;
};

void mutate_rule(const rule& r, const library& lib, count& c)
{
    rule changed = r;
    for (const auto& [key, e] : {std::pair("when", &changed.when), std::pair("require", &changed.require), std::pair("advise", &changed.advise)}) {
        if (!*e) {
            continue;
        }
        each_mutant(**e, [&, key = key](const std::string& what) {
            ++c.made;
            if (killed(run_examples_of(changed, lib))) {
                ++c.killed;
            } else {
                c.survivors.push_back(r.shown.id + ": " + key + ": " + what);
            }
        });
    }
}

void mutate_class(const compiled_class& original, const library& lib, count& c)
{
    compiled_class changed = original;
    for (std::size_t i = 0; i < changed.holds.size(); ++i) {
        each_mutant(changed.holds[i], [&](const std::string& what) {
            ++c.made;
            if (killed(run_examples_of(changed, lib))) {
                ++c.killed;
            } else {
                c.survivors.push_back(original.text.id + ": " + original.text.steps[i].name + ": " + what);
            }
        });
    }
}

} // namespace

TEST_CASE("every mutant of every rule and class is noticed by an example")
{
    REQUIRE(shipped().rules);
    count c;
    for (const rule& r : shipped().rules->rules) {
        mutate_rule(r, shipped().lib, c);
    }
    for (const compiled_class& k : shipped().rules->classes) {
        mutate_class(k, shipped().lib, c);
    }
    const std::map<std::string, std::string> known = known_survivors();
    std::set<std::string> told;
    for (const std::string& s : c.survivors) {
        CAPTURE(s);
        CHECK_MESSAGE(known.contains(s), "no example notices: " << s);
        told.insert(s);
    }
    for (const auto& [s, reason] : known) {
        CAPTURE(s);
        CHECK_MESSAGE(told.contains(s), "listed as a survivor, but noticed: " << s);
        CHECK(reason.size() > 10);
    }
    std::cout << "mutants noticed: " << c.killed << "/" << c.made << ", survivors with a reason: " << known.size() << '\n';
    CHECK(c.made > 150);
}
