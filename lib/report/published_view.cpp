#include "report/published_view.hpp"

#include "quantity/text.hpp"
#include "report/words.hpp"

#include <algorithm>
#include <cctype>
#include <fmt/format.h>

namespace onehand {

namespace {

constexpr std::size_t width = 80;

std::string lower(std::string text)
{
    // "IEC 60664-1" and "iec-60664-1" are the same word.
    std::transform(text.begin(), text.end(), text.begin(), [](unsigned char c) { return c == ' ' ? '-' : static_cast<char>(std::tolower(c)); });
    return text;
}

bool has(const std::string& text, const std::string& word)
{
    return lower(text).find(lower(word)) != std::string::npos;
}

std::string item(const std::string& lead, const std::string& words)
{
    std::string out;
    for (const std::string& l : wrapped(lead + words, width, columns_of(lead))) {
        out += l + '\n';
    }
    return out;
}

std::string seen_words(const library& lib, const citation& c)
{
    const source* s = lib.find_source(c.cite);
    std::string out = item("  source   ", source_words(&lib, c));
    if (s != nullptr) {
        out += item("  edition  ", s->edition + ", " + s->year);
        out += item("  seen     ", s->seen);
    }
    return out;
}

std::string rule_whole(const library& lib, const rule_view& r)
{
    std::string out = "rule " + r.id + '\n' + item("  ", r.title);
    out += item("  about    ", r.subject + ", in: " + listed(r.states));
    if (!r.when.empty()) {
        out += item("  when     ", r.when);
    }
    if (!r.require.empty()) {
        out += item("  require  ", r.require);
    }
    if (!r.advise.empty()) {
        out += item("  advise   ", r.advise + " (told, never judged)");
    }
    out += item("  protects ",
                std::string(r.protects_person ? "a person: judged over the whole spread" : "a part: judged in use, marginal over its tolerances") +
                    "; " + word_for(r.signal) + "; bears on " + listed(r.bears_on));
    out += item("  why      ", r.why) + item("  change   ", r.remedy) + item("  set      ", r.limit_set) + seen_words(lib, r.from);
    for (const auto& e : r.examples) {
        std::string given;
        for (const auto& [name, text] : e.given) {
            given += (given.empty() ? "" : ", ") + name + " " + text;
        }
        out += item("  example  ", e.name + ": " + e.verdict + (given.empty() ? "" : " - " + given));
    }
    return out;
}

std::string table_whole(const library& lib, const table& t)
{
    std::string out = "table " + t.id + '\n' + item("  ", t.title);
    out += item("  holds    ", t.conditions);
    const std::string how = t.between_rows == interpolation::linear    ? "linear between rows"
                            : t.between_rows == interpolation::step_up ? "the next row up"
                                                                       : "printed rows only";
    out += item("  between  ", how + (t.interpolation_source.empty() ? "" : ": " + t.interpolation_source));
    if (t.open_low || t.open_high) {
        out += item("  open     ", std::string(t.open_low ? "low " : "") + (t.open_high ? "high" : ""));
    }
    out += seen_words(lib, t.from);
    std::vector<std::string> head{t.axis_name + (t.axis_unit.empty() ? "" : " " + t.axis_unit)};
    for (const table::column& c : t.columns) {
        head.push_back(c.name + (c.unit.empty() ? "" : " " + c.unit));
    }
    std::vector<std::size_t> widths;
    for (std::size_t i = 0; i < head.size(); ++i) {
        std::size_t w = columns_of(head[i]);
        for (const auto& row : t.printed) {
            w = std::max(w, columns_of(row[i]));
        }
        widths.push_back(w + 2);
    }
    const auto row_line = [&](const std::vector<std::string>& cells) {
        std::string line = "  ";
        for (std::size_t i = 0; i < cells.size(); ++i) {
            line += i + 1 < cells.size() ? padded(cells[i], widths[i]) : cells[i];
        }
        return line + '\n';
    };
    out += row_line(head);
    for (const auto& row : t.printed) {
        out += row_line(row);
    }
    return out;
}

std::string class_whole(const library& lib, const class_text& c)
{
    std::string out = "class " + c.id + '\n' + item("  ", c.title + ", about: " + c.subject + ", in: " + listed(c.states));
    for (const class_text::step& s : c.steps) {
        out += item("  " + padded(s.name, 9), s.holds);
    }
    return out + seen_words(lib, c.from);
}

std::string source_whole(const source& s)
{
    return "source " + s.key + '\n' + item("  ", s.title) + item("  edition  ", s.edition + ", " + s.year) + item("  seen     ", s.seen);
}

std::vector<std::string> all_ids(const library& lib, const std::vector<rule_view>& rules)
{
    std::vector<std::string> ids;
    for (const rule_view& r : rules) {
        ids.push_back(r.id);
    }
    for (const table& t : lib.tables) {
        ids.push_back(t.id);
    }
    for (const class_text& c : lib.classes) {
        ids.push_back(c.id);
    }
    for (const source& s : lib.sources) {
        ids.push_back(s.key);
    }
    return ids;
}

std::string type_words(const field_spec& f)
{
    switch (f.holds) {
    case field_spec::type::truth:
        return "true or false";
    case field_spec::type::choice:
        return "one of: " + listed(f.choices);
    case field_spec::type::text:
        return "text";
    case field_spec::type::count:
        return "a whole number";
    default:
        return name_of(f.dim);
    }
}

std::string kind_whole(const kind_spec& k)
{
    std::string out = "kind " + k.name + '\n' + item("  ", k.title);
    for (const terminal_form& form : k.forms) {
        std::string keys;
        for (const terminal_key& key : form.keys) {
            keys += (keys.empty() ? "" : ", ") + key.key + (key.optional ? " (may be left out)" : "");
        }
        out += item("  nets     ", keys + (form.polarised ? ": polarised" : ""));
    }
    for (const field_spec& f : k.fields) {
        out += item("  " + padded(f.name, 28), type_words(f) + "; " + f.meaning + (f.varies ? "; its range is use, not tolerance" : "") +
                                                   (f.from_table.empty() ? "" : "; if unsaid, from table " + f.from_table + " by " + f.by));
    }
    std::string modes;
    for (const failure_spec& f : k.failures) {
        modes += (modes.empty() ? "" : ", ") + f.mode;
    }
    return out + item("  fails    ", modes.empty() ? "in no mode told here" : modes);
}

} // namespace

namespace {

struct hit {
    bool exact = false;
    std::string line; // "table resistor-body: Resistor bodies ..."
    std::string whole;
};

std::vector<hit> hits_of(const library& lib, const rule_set& rules, const std::string& word)
{
    std::vector<hit> hits;
    const auto add = [&](const char* sort, const std::string& id, const std::string& title, std::string whole) {
        hits.push_back({id == word, std::string(sort) + ' ' + id + ": " + title, std::move(whole)});
    };
    const auto standard = [&](const citation& c) {
        const source* s = lib.find_source(c.cite);
        return has(c.cite, word) || has(c.clause, word) || (s != nullptr && has(s->title, word));
    };
    for (const rule_view& r : view_rules(rules, lib)) {
        if (has(r.id, word) || has(r.title, word) || has(r.limit_set, word) || has(r.why, word) || standard(r.from)) {
            add("rule", r.id, r.title, rule_whole(lib, r));
        }
    }
    for (const table& t : lib.tables) {
        if (has(t.id, word) || has(t.title, word) || has(t.conditions, word) || standard(t.from)) {
            add("table", t.id, t.title, table_whole(lib, t));
        }
    }
    for (const class_text& c : lib.classes) {
        if (has(c.id, word) || has(c.title, word) || standard(c.from)) {
            add("class", c.id, c.title, class_whole(lib, c));
        }
    }
    for (const source& s : lib.sources) {
        if (has(s.key, word) || has(s.title, word)) {
            add("source", s.key, s.title, source_whole(s));
        }
    }
    return hits;
}

} // namespace

std::string cite_text(const library& lib, const rule_set& rules, const std::string& word, bool& found)
{
    constexpr std::size_t printed_whole = 3;
    const std::vector<hit> hits = hits_of(lib, rules, word);
    found = !hits.empty() && !word.empty();
    if (!found) {
        const std::string near = nearest_name(word, all_ids(lib, view_rules(rules, lib)));
        return "nothing is known by '" + word + "'" + (near.empty() ? "" : "; nearest known name: " + near) + '\n';
    }
    const bool exact = std::any_of(hits.begin(), hits.end(), [](const hit& h) { return h.exact; });
    std::string out;
    for (const hit& h : hits) {
        if (exact ? h.exact : hits.size() <= printed_whole) {
            out += (out.empty() ? "" : "\n") + h.whole;
        }
    }
    if (exact && hits.size() > 1) {
        out += "\nHave it in them too:\n";
    }
    if (out.empty() || (exact && hits.size() > 1)) {
        for (const hit& h : hits) {
            out += h.exact ? "" : item("", h.line);
        }
        out += fmt::format("{} have '{}' in them; cite ID prints one whole\n", hits.size(), word);
    }
    return out;
}

namespace {

std::string set_lines(const library& lib, const std::vector<rule_view>& views, const limit_set& set, const set_counts& counts)
{
    std::string out = item("", set.name + ": " + set.note);
    out += item("  used for  ", set.settings.empty() ? "what names it: no setting picks it" : listed(set.settings));
    for (const rule_view& r : views) {
        if (std::find(counts.rules.begin(), counts.rules.end(), r.id) != counts.rules.end()) {
            out += "  rule   " + padded(r.id, 36) + ' ' + padded(word_for(r.signal), 9) + word_for(r.from.rests_on) + '\n';
        }
    }
    for (const std::string& id : counts.classes) {
        out += "  class  " + padded(id, 46) + word_for(lib.find_class(id)->from.rests_on) + '\n';
    }
    for (const std::string& id : counts.tables) {
        out += "  table  " + padded(id, 46) + word_for(lib.find_table(id)->from.rests_on) + '\n';
    }
    return out;
}

/// Rules of no set are in force always.
std::string practice_lines(const std::vector<rule_view>& views)
{
    std::string out;
    for (const rule_view& r : views) {
        if (r.limit_set == "practice") {
            out += "  rule   " + padded(r.id, 36) + ' ' + padded(word_for(r.signal), 9) + word_for(r.from.rests_on) + '\n';
        }
    }
    return out.empty() ? out : item("", "Of no set, always in force:") + out;
}

} // namespace

std::string rules_text(const library& lib, const rule_set& rules, const std::vector<std::string>& limit_sets, bool& found)
{
    found = true;
    std::vector<std::string> known;
    for (const limit_set& l : lib.limit_sets) {
        known.push_back(l.name);
    }
    for (const std::string& asked : limit_sets) {
        if (lib.find_limit_set(asked) == nullptr) {
            found = false;
            const std::string near = nearest_name(asked, known);
            return "no limit set '" + asked + "'" + (near.empty() ? "" : "; nearest known name: " + near) + "; there are: " + listed(known) + '\n';
        }
    }
    const std::vector<rule_view> views = view_rules(rules, lib);
    const std::vector<set_counts> counts = count_by_set(rules, lib);
    std::string out;
    for (std::size_t i = 0; i < lib.limit_sets.size(); ++i) {
        const limit_set& set = lib.limit_sets[i];
        if (limit_sets.empty() || std::find(limit_sets.begin(), limit_sets.end(), set.name) != limit_sets.end()) {
            out += (out.empty() ? "" : "\n") + set_lines(lib, views, set, counts[i]);
        }
    }
    if (limit_sets.empty()) {
        out += '\n' + practice_lines(views) + fmt::format("\n{} rules; cite ID prints one whole\n", views.size());
    }
    return out;
}

std::string limit_set_table(const library& lib, const rule_set& rules)
{
    std::string out = "| limit set | picked by setting | rules | figures confirmed | from memory | practice |\n|---|---|---|---|---|---|\n";
    const std::vector<set_counts> counts = count_by_set(rules, lib);
    for (std::size_t i = 0; i < lib.limit_sets.size(); ++i) {
        const limit_set& set = lib.limit_sets[i];
        const set_counts& c = counts[i];
        out += fmt::format("| {} | {} | {} | {} | {} | {} |\n", set.name, set.settings.empty() ? "when named" : listed(set.settings), c.rules.size(),
                           c.confirmed, c.memory, c.practice);
    }
    return out;
}

std::string kinds_text(const library& lib, const std::string& kind, bool& found)
{
    found = true;
    if (kind.empty()) {
        std::string out;
        for (const kind_spec& k : lib.kinds) {
            out += padded(k.name, 18) + k.title + '\n';
        }
        return out + "kinds NAME prints its fields\n";
    }
    if (const kind_spec* k = lib.find_kind(kind)) {
        return kind_whole(*k);
    }
    found = false;
    std::vector<std::string> known;
    for (const kind_spec& k : lib.kinds) {
        known.push_back(k.name);
    }
    const std::string near = nearest_name(kind, known);
    return "no kind '" + kind + "'" + (near.empty() ? "" : "; nearest known name: " + near) + '\n';
}

} // namespace onehand
