// What each limit set holds: its rules, classes and tables, and how well their figures are known.
#include "rule/rule_set.hpp"

#include <algorithm>

namespace onehand {

namespace {

int constants_in(const expression& e)
{
    int n = e.is == expression::op::constant ? 1 : 0;
    for (const expression& p : e.parts) {
        n += constants_in(p);
    }
    return n;
}

int constants_in(const std::optional<expression>& e)
{
    return e ? constants_in(*e) : 0;
}

int printed_figures(const table& t)
{
    int n = 0;
    for (const auto& row : t.cells) {
        n += static_cast<int>(std::count_if(row.begin(), row.end(), [](const std::vector<double>& cell) { return !cell.empty(); }));
    }
    return n;
}

void count(set_counts& c, basis b, int figures)
{
    (b == basis::confirmed ? c.confirmed : b == basis::memory ? c.memory : c.practice) += figures;
}

} // namespace

std::vector<set_counts> count_by_set(const rule_set& rules, const library& lib)
{
    std::vector<set_counts> list;
    for (const limit_set& l : lib.limit_sets) {
        set_counts c;
        c.limit_set = l.name;
        const auto cites = [&](const citation& from) { return std::find(l.sources.begin(), l.sources.end(), from.cite) != l.sources.end(); };
        for (const rule& r : rules.rules) {
            if (cites(r.shown.from)) {
                c.rules.push_back(r.shown.id);
                count(c, r.shown.from.rests_on, constants_in(r.when) + constants_in(r.require) + constants_in(r.advise));
            }
        }
        for (const compiled_class& k : rules.classes) {
            if (cites(k.text.from)) {
                c.classes.push_back(k.text.id);
                for (const expression& e : k.holds) {
                    count(c, k.text.from.rests_on, constants_in(e));
                }
            }
        }
        for (const table& t : lib.tables) {
            if (cites(t.from)) {
                c.tables.push_back(t.id);
                count(c, t.from.rests_on, printed_figures(t));
            }
        }
        list.push_back(std::move(c));
    }
    return list;
}

} // namespace onehand
