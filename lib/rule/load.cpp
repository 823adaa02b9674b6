// Rule files to compiled rules: every key, name, dimension, message field and example checked, each mistake at its place.
#include "rule/rule_set.hpp"

#include <algorithm>
#include <array>

namespace onehand {

namespace {

const std::vector<std::string> subject_words{"gap", "net-pair", "stored", "access", "converter", "supply"};
const std::vector<std::string> keys{"title",   "subject", "states", "changes", "protects", "bears-on", "signal", "when",  "require", "advise",
                                    "message", "why",     "remedy", "settles", "source",   "example",  "gather", "names", "at-worst"};

std::string stem(const std::string& file)
{
    const std::size_t slash = file.rfind('/');
    const std::string base = slash == std::string::npos ? file : file.substr(slash + 1);
    return base.substr(0, base.rfind('.'));
}

class rule_loader {
public:
    rule_loader(const library& lib, const document& doc, std::vector<complaint>& complaints) : lib_(lib), doc_(doc), complaints_(complaints) {}

    rule load()
    {
        r_.shown.id = stem(doc_.file);
        r_.shown.at = {doc_.file, 1, 1};
        r_.shown.shop = doc_.file.find('/') != std::string::npos;
        unknown_keys();
        r_.shown.title = text("title", true);
        read_subject();
        read_states();
        read_changes();
        read_weight();
        read_source();
        compile("when", r_.shown.when, r_.when);
        compile("require", r_.shown.require, r_.require);
        compile("advise", r_.shown.advise, r_.advise);
        if (doc_.root.find("require") == nullptr && doc_.root.find("advise") == nullptr) {
            complain(r_.shown.at, "a rule has 'require', 'advise' or both");
        }
        one_comparison("require", r_.require);
        one_comparison("advise", r_.advise);
        r_.shown.message = text("message", true);
        r_.shown.why = text("why", true);
        r_.shown.remedy = text("remedy", true);
        r_.settles = text("settles", false);
        r_.names = text("names", false);
        if (const entry* e = find("at-worst", node_kind::text, "marginal or not-shown")) {
            r_.at_worst = e->value.text == "marginal" ? verdict::marginal : verdict::not_shown;
            if (e->value.text != "marginal" && e->value.text != "not-shown") {
                complain(e->value.at, "'at-worst' is marginal or not-shown");
            }
        }
        if (const entry* e = find("gather", node_kind::truth, "true or false")) {
            r_.gather = e->value.truth;
        }
        check_message();
        read_examples();
        return std::move(r_);
    }

private:
    void complain(const place& at, std::string message) { complaints_.push_back(doc_.complain(at, std::move(message))); }

    const entry* find(const std::string& key, node_kind kind, const char* word, bool due = false)
    {
        const entry* e = doc_.root.find(key);
        if (e == nullptr) {
            if (due) {
                complain(r_.shown.at, "no '" + key + "' in this rule");
            }
            return nullptr;
        }
        if (e->value.kind != kind) {
            complain(e->value.at, "'" + key + "' is " + word);
            return nullptr;
        }
        return e;
    }

    std::string text(const std::string& key, bool due)
    {
        const entry* e = find(key, node_kind::text, "a text in quotes", due);
        return e == nullptr ? std::string{} : e->value.text;
    }

    void unknown_keys()
    {
        for (const entry& e : doc_.root.entries) {
            if (std::find(keys.begin(), keys.end(), e.key) == keys.end()) {
                const std::string near = nearest_name(e.key, keys);
                complain(e.key_at, "unknown key '" + e.key + "'" + (near.empty() ? "" : "; nearest known name: " + near));
            }
        }
    }

    void read_subject()
    {
        const entry* e = find("subject", node_kind::text, "a text in quotes", true);
        if (e == nullptr) {
            return;
        }
        r_.shown.subject = e->value.text;
        std::vector<std::string> known = subject_words;
        for (const kind_spec& k : lib_.kinds) {
            known.push_back(k.name);
        }
        if (std::find(known.begin(), known.end(), e->value.text) == known.end()) {
            const std::string near = nearest_name(e->value.text, known);
            complain(e->value.at, "no subject '" + e->value.text + "'" + (near.empty() ? "" : "; nearest known name: " + near));
        }
    }

    void read_states()
    {
        const entry* e = find("states", node_kind::list, "a list", true);
        for (const node& n : e == nullptr ? std::vector<node>{} : e->value.items) {
            const auto s = state_named(n.text);
            if (!s) {
                complain(n.at, "no state '" + n.text + "': start-up, running, no-load, standby or switched-off");
                continue;
            }
            r_.states.push_back(*s);
            r_.shown.states.push_back(n.text);
        }
    }

    void read_changes()
    {
        const entry* e = doc_.root.find("changes");
        if (e == nullptr) {
            return;
        }
        static const std::vector<std::string> known{"none", "single-fault", "input-event", "unplugged"};
        r_.changes.clear();
        const auto add = [&](const node& n) {
            if (n.kind == node_kind::text && std::find(known.begin(), known.end(), n.text) != known.end()) {
                r_.changes.push_back(n.text);
            } else {
                complain(n.at, "changes are none, single-fault, input-event or unplugged");
            }
        };
        if (e->value.kind == node_kind::list) {
            std::for_each(e->value.items.begin(), e->value.items.end(), add);
        } else {
            add(e->value);
        }
    }

    void read_weight()
    {
        const std::string protects = text("protects", true);
        r_.shown.protects_person = protects == "person";
        if (protects != "person" && protects != "part" && !protects.empty()) {
            complain(doc_.root.find("protects")->value.at, "'protects' is part or person");
        }
        const entry* bears = find("bears-on", node_kind::list, "a list", true);
        for (const node& n : bears == nullptr ? std::vector<node>{} : bears->value.items) {
            if (n.text != "energise" && n.text != "reach-in") {
                complain(n.at, "a rule bears on energise, reach-in or both");
            }
            r_.shown.bears_on.push_back(n.text);
        }
        static const std::array<std::pair<const char*, signal_word>, 4> words{
            {{"DANGER", signal_word::danger}, {"WARNING", signal_word::warning}, {"CAUTION", signal_word::caution}, {"NOTICE", signal_word::notice}}};
        const std::string word = text("signal", true);
        bool known = word.empty();
        for (const auto& [name, s] : words) {
            if (word == name) {
                r_.shown.signal = s;
                known = true;
            }
        }
        if (!known) {
            complain(doc_.root.find("signal")->value.at, "'signal' is DANGER, WARNING, CAUTION or NOTICE");
        }
    }

    void read_source()
    {
        const entry* e = find("source", node_kind::table, "a table in braces", true);
        if (e == nullptr) {
            return;
        }
        citation& c = r_.shown.from;
        c.at = e->value.at;
        for (const entry& k : e->value.entries) {
            if (k.key == "cite") {
                c.cite = k.value.text;
            } else if (k.key == "clause") {
                c.clause = k.value.text;
            } else if (k.key == "basis" && (k.value.text == "confirmed" || k.value.text == "memory" || k.value.text == "practice")) {
                c.rests_on = k.value.text == "confirmed" ? basis::confirmed : k.value.text == "memory" ? basis::memory : basis::practice;
            } else {
                complain(k.key_at, k.key == "basis" ? "basis is confirmed, memory or practice" : "unknown key '" + k.key + "' in source");
            }
        }
        if (lib_.find_source(c.cite) == nullptr) {
            std::vector<std::string> known;
            for (const source& s : lib_.sources) {
                known.push_back(s.key);
            }
            const std::string near = nearest_name(c.cite, known);
            complain(c.at, "no source '" + c.cite + "' in sources.toml" + (near.empty() ? "" : "; nearest known name: " + near));
        }
        const limit_set* set = lib_.limit_set_of(c.cite);
        r_.shown.limit_set = set == nullptr ? "practice" : set->name;
    }

    void compile(const char* key, std::string& shown, std::optional<expression>& into)
    {
        const entry* e = find(key, node_kind::text, "an expression in quotes");
        if (e == nullptr) {
            return;
        }
        shown = e->value.text;
        const expression_place where{&doc_, e->value.at, e->value.basic_text};
        into = parse_expression(e->value.text, where, complaints_);
        if (!into) {
            return;
        }
        if (!check_expression(*into, lib_, r_.shown.subject, where, complaints_)) {
            into.reset();
        } else if (into->type != value::type::truth) {
            complain(e->value.at, std::string("'") + key + "' is neither true nor false: compare something");
            into.reset();
        }
    }

    void one_comparison(const char* key, const std::optional<expression>& e)
    {
        using op = expression::op;
        if (e && (e->is == op::logic_and || e->is == op::logic_or)) {
            complain(doc_.root.find(key)->value.at, std::string("'") + key + "' is one comparison: the value left, its limit right");
        }
    }

    void check_message()
    {
        const entry* e = doc_.root.find("message");
        if (e == nullptr || e->value.kind != node_kind::text) {
            return;
        }
        const std::string& m = e->value.text;
        for (std::size_t from = m.find('{'); from != std::string::npos; from = m.find('{', from + 1)) {
            const std::size_t to = m.find('}', from);
            if (to == std::string::npos) {
                complain(inside(e->value, from), "a brace is left open");
                return;
            }
            const std::string name = m.substr(from + 1, to - from - 1);
            static const std::vector<std::string> own{"ref", "value", "limit", "nets", "state"};
            const bool known = std::find(own.begin(), own.end(), name) != own.end() || name_of_subject(lib_, r_.shown.subject, name).has_value();
            if (!known) {
                complain(inside(e->value, from + 1), "a " + r_.shown.subject + " has no '" + name + "'");
            }
        }
    }

    void read_examples()
    {
        const entry* e = find("example", node_kind::list, "[[example]]", true);
        for (const node& n : e == nullptr ? std::vector<node>{} : e->value.items) {
            rule_example x;
            x.at = n.at;
            for (const entry& k : n.entries) {
                if (k.key == "name") {
                    x.name = k.value.text;
                } else if (k.key == "verdict") {
                    x.verdict = k.value.text;
                } else if (k.key == "advice") {
                    x.advice = k.value.truth;
                } else if (k.key == "missing") {
                    for (const node& m : k.value.items) {
                        x.missing.push_back(m.text);
                    }
                } else if (k.key == "given") {
                    x.given = given_of(k.value);
                } else {
                    complain(k.key_at, "unknown key '" + k.key + "' in an example");
                }
            }
            r_.shown.examples.push_back({x.name, x.verdict, x.given});
            r_.examples.push_back(std::move(x));
        }
    }

    const library& lib_;
    const document& doc_;
    std::vector<complaint>& complaints_;
    rule r_;
};

compiled_class compile_class(const library& lib, const class_text& text, std::vector<complaint>& complaints)
{
    compiled_class c;
    c.text = text;
    document doc;
    doc.file = text.at.file;
    for (const std::string& word : text.states) {
        if (const auto s = state_named(word)) {
            c.states.push_back(*s);
        } else {
            complaints.push_back(doc.complain(text.at, "no state '" + word + "' in class '" + text.id + "'"));
        }
    }
    for (const class_text::step& step : text.steps) {
        const expression_place where{&doc, step.holds_at, step.basic_text};
        auto e = parse_expression(step.holds, where, complaints);
        if (e && check_expression(*e, lib, text.subject, where, complaints)) {
            c.holds.push_back(std::move(*e));
        }
    }
    return c;
}

} // namespace

rules_result compile_rules(const library& lib)
{
    rules_result result;
    auto set = std::make_shared<rule_set>();
    for (const class_text& c : lib.classes) {
        set->classes.push_back(compile_class(lib, c, result.complaints));
    }
    for (const document& doc : lib.rule_documents) {
        set->rules.push_back(rule_loader(lib, doc, result.complaints).load());
    }
    std::sort(set->rules.begin(), set->rules.end(), [](const rule& a, const rule& b) { return a.shown.id < b.shown.id; });
    for (const rule& r : set->rules) {
        const bool there = r.names.empty() || std::any_of(set->rules.begin(), set->rules.end(), [&](const rule& o) { return o.shown.id == r.names; });
        if (!there) {
            complaint c;
            c.at = r.shown.at;
            c.message = "'names' speaks of a rule that is not there: " + r.names;
            result.complaints.push_back(std::move(c));
        }
    }
    sort_by_place(result.complaints);
    if (result.complaints.empty()) {
        result.rules = std::move(set);
    }
    return result;
}

} // namespace onehand
