#pragma once
// Every field of the published data, for packing (pack.hpp). A test packs, unpacks and compares: a field forgotten here is noticed.
#include "published/library.hpp"
#include "published/pack.hpp"

namespace onehand {

template<class A>
void fields(A& a, dimension& d)
{
    for (std::int8_t& e : d.exponent) {
        a(e);
    }
}

template<class A>
void fields(A& a, quantity& q)
{
    a(q.si, q.dim);
}

template<class A>
void fields(A& a, place& p)
{
    a(p.file, p.line, p.column);
}

template<class A>
void fields(A& a, citation& c)
{
    a(c.cite, c.clause, c.rests_on, c.at);
}

template<class A>
void fields(A& a, source& s)
{
    a(s.key, s.title, s.edition, s.year, s.seen, s.at);
}

template<class A>
void fields(A& a, table::column& c)
{
    a(c.name, c.unit, c.dim);
}

template<class A>
void fields(A& a, table::check& c)
{
    a(c.at, c.column, c.gives, c.where);
}

template<class A>
void fields(A& a, table& t)
{
    a(t.id, t.title, t.from, t.conditions, t.axis_name, t.axis_unit, t.axis_dim, t.by_choice, t.columns, t.between_rows, t.interpolation_source,
      t.open_low, t.open_high, t.printed, t.axis, t.choices, t.cells, t.checks, t.at);
}

template<class A>
void fields(A& a, field_spec& f)
{
    a(f.name, f.holds, f.dim, f.meaning, f.varies, f.positive, f.choices, f.from_table, f.by, f.column, f.limit_is_low, f.bounds, f.not_with,
      f.instead, f.per, f.at);
}

template<class A>
void fields(A& a, terminal_key& k)
{
    a(k.key, k.count, k.names, k.optional);
}

template<class A>
void fields(A& a, terminal_form& f)
{
    a(f.keys, f.polarised);
}

template<class A>
void fields(A& a, element_spec& e)
{
    a(e.from, e.to, e.forms, e.field, e.states, e.holds_charge_path, e.at);
}

template<class A>
void fields(A& a, failure_spec& f)
{
    a(f.mode, f.meaning, f.elements, f.from);
}

template<class A>
void fields(A& a, kind_spec& k)
{
    a(k.name, k.title, k.forms, k.fields, k.elements, k.failures, k.main_field, k.voltage_from, k.voltage_to, k.at);
}

template<class A>
void fields(A& a, class_text::step& s)
{
    a(s.name, s.holds, s.holds_at, s.basic_text);
}

template<class A>
void fields(A& a, class_text::example& e)
{
    a(e.name, e.name_due, e.missing, e.given, e.at);
}

template<class A>
void fields(A& a, class_text& c)
{
    a(c.id, c.title, c.subject, c.states, c.from, c.steps, c.examples, c.at);
}

template<class A>
void fields(A& a, limit_set& l)
{
    a(l.name, l.sources, l.settings, l.note, l.at);
}

/// Rule documents are not packed: they are packed as rules.
template<class A>
void fields(A& a, library& l)
{
    a(l.sources, l.tables, l.kinds, l.classes, l.limit_sets);
}

} // namespace onehand
