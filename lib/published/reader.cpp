#include "published/reader.hpp"

#include <algorithm>

namespace onehand {

const node* table_reader::any(const std::string& key, node_kind kind, const char* kind_word, bool due)
{
    asked_.push_back(key);
    const entry* e = table_.find(key);
    if (e == nullptr) {
        if (due) {
            complain(at_, "no '" + key + "' here");
        }
        return nullptr;
    }
    if (e->value.kind != kind) {
        complain(e->value.at, "'" + key + "' is " + kind_word);
        return nullptr;
    }
    return &e->value;
}

std::string table_reader::text(const std::string& key, bool due)
{
    const node* n = any(key, node_kind::text, "a text in quotes", due);
    return n == nullptr ? std::string{} : n->text;
}

bool table_reader::truth(const std::string& key, bool otherwise)
{
    const node* n = any(key, node_kind::truth, "true or false", false);
    return n == nullptr ? otherwise : n->truth;
}

std::vector<std::string> table_reader::texts(const std::string& key, bool due)
{
    const node* n = list(key, due);
    return n == nullptr ? std::vector<std::string>{} : texts_of(doc_, *n, complaints_);
}

const node* table_reader::list(const std::string& key, bool due)
{
    return any(key, node_kind::list, "a list in square brackets", due);
}

const node* table_reader::table(const std::string& key, bool due)
{
    return any(key, node_kind::table, "a table", due);
}

place table_reader::place_of(const std::string& key) const
{
    const entry* e = table_.find(key);
    return e == nullptr ? at_ : e->value.at;
}

citation table_reader::source(const std::string& key, bool due)
{
    citation c;
    c.at = place_of(key);
    const node* n = table(key, due);
    if (n == nullptr) {
        return c;
    }
    table_reader inner(doc_, *n, c.at, complaints_);
    c.cite = inner.text("cite", true);
    c.clause = inner.text("clause", true);
    const std::string word = inner.text("basis", true);
    if (word == "confirmed") {
        c.rests_on = basis::confirmed;
    } else if (word == "memory") {
        c.rests_on = basis::memory;
    } else if (word != "practice" && !word.empty()) {
        complain(inner.place_of("basis"), "basis is confirmed, memory or practice");
    }
    inner.finish();
    return c;
}

void table_reader::finish()
{
    for (const entry& e : table_.entries) {
        if (std::find(asked_.begin(), asked_.end(), e.key) == asked_.end()) {
            const std::string near = nearest_name(e.key, asked_);
            complain(e.key_at, "unknown key '" + e.key + "'" + (near.empty() ? "" : "; nearest known name: " + near));
        }
    }
}

std::vector<std::string> texts_of(const document& doc, const node& list, std::vector<complaint>& complaints)
{
    std::vector<std::string> out;
    for (const node& item : list.items) {
        if (item.kind == node_kind::text) {
            out.push_back(item.text);
        } else {
            complaints.push_back(doc.complain(item.at, "a text in quotes is due here"));
        }
    }
    return out;
}

void read_sources(const document& doc, library& lib, std::vector<complaint>& complaints)
{
    for (const entry& e : doc.root.entries) {
        if (e.value.kind != node_kind::table) {
            complaints.push_back(doc.complain(e.key_at, "a source is a table: [" + e.key + "]"));
            continue;
        }
        table_reader r(doc, e.value, e.key_at, complaints);
        source s{e.key, r.text("title", true), r.text("edition", true), r.text("year", true), r.text("seen", true), e.key_at};
        r.finish();
        if (lib.find_source(e.key) != nullptr) {
            complaints.push_back(doc.contradict(e.key_at, "source '" + e.key + "' is there already", lib.find_source(e.key)->at));
            continue;
        }
        lib.sources.push_back(std::move(s));
    }
}

void read_limit_sets(const document& doc, library& lib, std::vector<complaint>& complaints)
{
    for (const entry& e : doc.root.entries) {
        if (e.value.kind != node_kind::table) {
            complaints.push_back(doc.complain(e.key_at, "a limit set is a table: [\"" + e.key + "\"]"));
            continue;
        }
        table_reader r(doc, e.value, e.key_at, complaints);
        limit_set s{e.key, r.texts("sources", true), r.texts("settings", true), r.text("note", false), e.key_at};
        r.finish();
        if (const limit_set* there = lib.find_limit_set(e.key)) {
            complaints.push_back(doc.contradict(e.key_at, "limit set '" + e.key + "' is there already", there->at));
            continue;
        }
        static const std::vector<std::string> known{"teaching lab", "repair bench", "display equipment"};
        for (const std::string& setting : s.settings) {
            if (std::find(known.begin(), known.end(), setting) == known.end()) {
                const std::string near = nearest_name(setting, known);
                complaints.push_back(doc.complain(r.place_of("settings"), "no setting '" + setting +
                                                                              "': " + (near.empty() ? "" : "nearest known name: " + near + "; ") +
                                                                              "teaching lab, repair bench or display equipment"));
            }
        }
        for (const std::string& key : s.sources) {
            if (lib.find_source(key) == nullptr) {
                complaints.push_back(doc.complain(r.place_of("sources"), "no source '" + key + "' in sources.toml"));
            }
        }
        lib.limit_sets.push_back(std::move(s));
    }
}

class_text read_class(const document& doc, const std::string& id, std::vector<complaint>& complaints)
{
    class_text c;
    c.id = id;
    c.at = {doc.file, 1, 1};
    table_reader r(doc, doc.root, c.at, complaints);
    c.title = r.text("title", true);
    c.subject = r.text("subject", true);
    c.states = r.texts("states", true);
    c.from = r.source("source", true);
    if (const node* steps = r.list("class", true)) {
        for (const node& step : steps->items) {
            table_reader one(doc, step, step.at, complaints);
            class_text::step s;
            s.name = one.text("name", true);
            s.holds = one.text("holds", true);
            s.holds_at = one.place_of("holds");
            const entry* e = step.find("holds");
            s.basic_text = e == nullptr || e->value.basic_text;
            one.finish();
            c.steps.push_back(std::move(s));
        }
    }
    if (const node* examples = r.list("example", true)) {
        for (const node& n : examples->items) {
            table_reader one(doc, n, n.at, complaints);
            class_text::example x;
            x.at = n.at;
            x.name = one.text("name", true);
            x.name_due = one.text("class", true);
            x.missing = one.texts("missing", false);
            if (const node* given = one.table("given", true)) {
                x.given = given_of(*given);
            }
            one.finish();
            c.examples.push_back(std::move(x));
        }
    }
    r.finish();
    return c;
}

given_figures given_of(const node& table)
{
    given_figures given;
    for (const entry& g : table.entries) {
        given.emplace_back(g.key, g.value.kind == node_kind::truth ? (g.value.truth ? "true" : "false") : g.value.text);
    }
    return given;
}

} // namespace onehand
