#include "stress/fields.hpp"

#include "quantity/text.hpp"

#include <algorithm>

namespace onehand {

namespace {

value::type type_of(const field_spec& spec)
{
    switch (spec.holds) {
    case field_spec::type::truth:
        return value::type::truth;
    case field_spec::type::choice:
    case field_spec::type::text:
        return value::type::choice;
    default:
        return value::type::number;
    }
}

value written(const std::string& name, const field& f)
{
    value v;
    if (const spread* s = f.number()) {
        v = number(*s);
    } else if (const bool* t = f.truth()) {
        v = truth_of(*t);
    } else {
        v = choice_of(*f.text());
    }
    v.shown.formula = "as written";
    v.shown.inputs.push_back(input_of(name, f));
    return v;
}

spread worst_of(const std::vector<spread>& published, bool lowest)
{
    const auto order = [](const spread& a, const spread& b) { return a.whole.low < b.whole.low; };
    return lowest ? *std::min_element(published.begin(), published.end(), order) : *std::max_element(published.begin(), published.end(), order);
}

/// Every printed value of the column, row by row at its worst end: what an unknown choice leaves possible.
value all_choices(const table& t, const field_spec& spec, const std::string& choice_name)
{
    value v;
    for (const std::string& choice : t.choices) {
        if (const auto published = look_up_choice(t, spec.column, choice); !published.empty()) {
            v.numbers.push_back(worst_of(published, spec.limit_is_low));
        }
    }
    v.missing.push_back(choice_name);
    v.shown.formula = "any published value: " + t.title;
    return v;
}

value from_table(const part& p, const field_spec& spec, const library& lib)
{
    const std::string choice_name = p.ref + "." + spec.by;
    const table* t = lib.find_table(spec.from_table);
    if (t == nullptr) {
        return missing_value(value::type::number, {p.ref + "." + spec.name});
    }
    const field* choice = p.find(spec.by);
    if (choice == nullptr || choice->text() == nullptr) {
        return all_choices(*t, spec, choice_name);
    }
    const auto published = look_up_choice(*t, spec.column, *choice->text());
    if (published.empty()) {
        return missing_value(value::type::number, {p.ref + "." + spec.name});
    }
    value v = number(worst_of(published, spec.limit_is_low));
    v.shown.formula = (published.size() > 1 ? "strictest published value: " : "published value: ") + t->title;
    v.shown.inputs.push_back(input_of(choice_name, *choice));
    return v;
}

} // namespace

evidence::input input_of(const std::string& name, const field& f)
{
    return {name, f.written, f.at};
}

value field_value(const part& p, const kind_spec& kind, const library& lib, const std::string& name)
{
    const field_spec* spec = kind.find(name);
    if (const field* f = p.find(name)) {
        return written(p.ref + "." + name, *f);
    }
    if (spec != nullptr && !spec->from_table.empty()) {
        return from_table(p, *spec, lib);
    }
    return missing_value(spec == nullptr ? value::type::number : type_of(*spec), {p.ref + "." + name});
}

value written_value(const std::optional<field>& f, value::type type, const std::string& name)
{
    return f ? written(name, *f) : missing_value(type, {name});
}

value inside_temperature(const use& u)
{
    value v;
    if (!u.ambient || u.ambient->number() == nullptr) {
        v.missing.push_back("use.ambient");
    }
    if (!u.inside_rise || u.inside_rise->number() == nullptr) {
        v.missing.push_back("use.inside-rise");
    }
    if (!v.missing.empty()) {
        return v;
    }
    const spread& a = *u.ambient->number();
    const spread& r = *u.inside_rise->number();
    // The rise builds up from none when the supply has just been switched on.
    v.numbers.push_back({dim::temperature, {a.in_use.low, a.in_use.high + r.in_use.high}, {a.whole.low, a.whole.high + r.whole.high}, std::nullopt});
    v.shown.formula = "ambient + inside-rise";
    v.shown.inputs = {input_of("use.ambient", *u.ambient), input_of("use.inside-rise", *u.inside_rise)};
    return v;
}

} // namespace onehand
