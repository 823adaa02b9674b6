#include "published/reader.hpp"

#include <algorithm>

namespace onehand {

namespace {

std::optional<element_spec::form> form_named(const std::string& word)
{
    using form = element_spec::form;
    static const std::pair<const char*, form> words[] = {
        {"open", form::open},       {"closed", form::closed},           {"resistance", form::resistance}, {"clamp", form::clamp},
        {"current", form::current}, {"capacitance", form::capacitance}, {"inductance", form::inductance}, {"track", form::track}};
    for (const auto& [known, f] : words) {
        if (word == known) {
            return f;
        }
    }
    return std::nullopt;
}

element_spec read_element(const document& doc, const node& n, std::vector<complaint>& complaints)
{
    element_spec e;
    e.at = n.at;
    table_reader r(doc, n, n.at, complaints);
    const auto between = r.texts("between", true);
    if (between.size() == 2) {
        e.from = between[0];
        e.to = between[1];
    } else {
        r.complain(r.place_of("between"), "an element stands between two terminals");
    }
    for (const std::string& word : r.texts("forms", true)) {
        const auto f = form_named(word);
        if (!f) {
            r.complain(r.place_of("forms"), "no form '" + word + "': open, closed, resistance, clamp, current, capacitance, inductance or track");
            continue;
        }
        e.forms.push_back(*f);
        const bool valued = *f != element_spec::form::open && *f != element_spec::form::closed;
        if (valued) {
            e.field[word] = r.text(word, true);
        }
    }
    e.states = r.texts("in", false);
    e.holds_charge_path = r.truth("soldered", false);
    r.finish();
    return e;
}

void read_written(const document& doc, const node& n, kind_spec& kind, std::vector<complaint>& complaints)
{
    terminal_form form;
    std::vector<std::string> optional;
    for (const entry& e : n.entries) {
        if (e.key == "polarised") {
            form.polarised = e.value.truth;
        } else if (e.key == "optional") {
            optional = texts_of(doc, e.value, complaints);
        } else if (e.value.kind == node_kind::text) {
            form.keys.push_back({e.key, 1, {e.value.text}, false});
        } else if (e.value.kind == node_kind::list && !e.value.items.empty() && e.value.items[0].kind == node_kind::list) {
            form.keys.push_back({e.key, -1, texts_of(doc, e.value.items[0], complaints), false});
        } else if (e.value.kind == node_kind::list) {
            auto names = texts_of(doc, e.value, complaints);
            const bool starred = names.size() == 1 && names[0].find('*') != std::string::npos;
            form.keys.push_back({e.key, starred ? 0 : static_cast<int>(names.size()), std::move(names), false});
        } else {
            complaints.push_back(doc.complain(e.value.at, "a terminal is written as text, a list, or a list of pairs"));
        }
    }
    for (terminal_key& k : form.keys) {
        k.optional = std::find(optional.begin(), optional.end(), k.key) != optional.end();
    }
    kind.forms.push_back(std::move(form));
}

void read_value_source(table_reader& r, field_spec& f)
{
    const node* from = r.table("from", false);
    if (from == nullptr) {
        return;
    }
    table_reader one(r.doc(), *from, r.place_of("from"), r.complaints());
    f.from_table = one.text("table", true);
    f.by = one.text("by", true);
    f.column = one.text("column", true);
    const std::string worst = one.text("worst", false);
    f.limit_is_low = worst != "high";
    one.finish();
}

field_spec read_field(const document& doc, const entry& e, const library& lib, std::vector<complaint>& complaints)
{
    field_spec f;
    f.name = e.key;
    f.at = e.key_at;
    table_reader r(doc, e.value, e.key_at, complaints);
    const std::string word = r.text("dimension", true);
    static const std::pair<const char*, field_spec::type> types[] = {{"truth", field_spec::type::truth},
                                                                     {"choice", field_spec::type::choice},
                                                                     {"text", field_spec::type::text},
                                                                     {"count", field_spec::type::count}};
    for (const auto& [name, type] : types) {
        f.holds = word == name ? type : f.holds;
    }
    if (f.holds == field_spec::type::quantity) {
        const auto d = dimension_named(word);
        if (!d && !word.empty()) {
            r.complain(r.place_of("dimension"), "no dimension '" + word + "'");
        }
        f.dim = d.value_or(dim::none);
    }
    f.meaning = r.text("meaning", true);
    f.varies = r.truth("varies", false);
    f.positive = r.truth("positive", true);
    f.choices = r.texts("choices", false);
    f.bounds = r.text("bounds", false);
    f.not_with = r.text("not-with", false);
    f.instead = r.text("instead", !f.not_with.empty());
    f.per = r.text("per", false);
    const std::string of = r.text("choices-of", false);
    if (!of.empty()) {
        if (const table* t = lib.find_table(of)) {
            f.choices = t->choices;
        } else {
            r.complain(r.place_of("choices-of"), "no table '" + of + "'");
        }
    }
    read_value_source(r, f);
    r.finish();
    return f;
}

} // namespace

kind_spec read_kind(const document& doc, const std::string& name, const library& lib, std::vector<complaint>& complaints)
{
    kind_spec kind;
    kind.name = name;
    kind.at = {doc.file, 1, 1};
    table_reader r(doc, doc.root, kind.at, complaints);
    kind.title = r.text("title", true);
    if (const auto voltage = r.texts("voltage", true); voltage.size() == 2) {
        kind.voltage_from = voltage[0];
        kind.voltage_to = voltage[1];
    }
    if (const node* written = r.list("written", true)) {
        for (const node& n : written->items) {
            read_written(doc, n, kind, complaints);
        }
    }
    if (const node* elements = r.list("element", false)) {
        for (const node& n : elements->items) {
            kind.elements.push_back(read_element(doc, n, complaints));
        }
    }
    if (const node* fields = r.table("field", false)) {
        for (const entry& e : fields->entries) {
            kind.fields.push_back(read_field(doc, e, lib, complaints));
            const bool first = kind.main_field.empty() && kind.fields.back().holds == field_spec::type::quantity;
            kind.main_field = first ? e.key : kind.main_field;
        }
    }
    if (const node* failures = r.list("failure", false)) {
        for (const node& n : failures->items) {
            table_reader one(doc, n, n.at, complaints);
            failure_spec f{one.text("mode", true), one.text("meaning", true), {}, one.source("source", true)};
            if (const node* elements = one.list("elements", true)) {
                for (const node& e : elements->items) {
                    f.elements.push_back(read_element(doc, e, complaints));
                }
            }
            one.finish();
            kind.failures.push_back(std::move(f));
        }
    }
    r.finish();
    for (const element_spec& e : kind.elements) {
        for (const auto& [form, field] : e.field) {
            if (kind.find(field) == nullptr) {
                complaints.push_back(doc.complain(e.at, "no field '" + field + "' in this kind for " + form));
            }
        }
    }
    return kind;
}

} // namespace onehand
