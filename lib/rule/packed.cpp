#include "rule/packed.hpp"

#include "published/packed_library.hpp"
#include "rule/rule_set.hpp"

namespace onehand {

template<class A>
void fields(A& a, expression& e)
{
    a(e.is, e.constant, e.word, e.column, e.other, e.parts, e.offset, e.type, e.dim, e.solved);
}

template<class A>
void fields(A& a, rule_view::example& e)
{
    a(e.name, e.verdict, e.given);
}

template<class A>
void fields(A& a, rule_view& v)
{
    a(v.id, v.title, v.subject, v.when, v.require, v.advise, v.message, v.why, v.remedy, v.limit_set, v.states, v.bears_on, v.signal,
      v.protects_person, v.from, v.examples, v.at, v.shop);
}

template<class A>
void fields(A& a, rule_example& e)
{
    a(e.name, e.verdict, e.advice, e.missing, e.given, e.at);
}

template<class A>
void fields(A& a, rule& r)
{
    a(r.shown, r.states, r.changes, r.when, r.require, r.advise, r.examples, r.names, r.settles, r.gather, r.at_worst);
}

template<class A>
void fields(A& a, compiled_class& c)
{
    a(c.text, c.states, c.holds);
}

template<class A>
void fields(A& a, rule_set& s)
{
    a(s.rules, s.classes);
}

std::string packed(const ready_set& set)
{
    ready_set copy = set;
    rule_set rules = *set.rules;
    packer p;
    p(copy.lib, rules, copy.stamp);
    return std::move(p.bytes);
}

ready_set unpacked(std::string_view bytes)
{
    ready_set set;
    auto rules = std::make_shared<rule_set>();
    unpacker u(bytes);
    u(set.lib, *rules, set.stamp);
    set.rules = std::move(rules);
    return set;
}

} // namespace onehand
