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

std::string cite_text(const library& lib, const rule_set& rules, const std::string& word, bool& found)
{
    const std::vector<rule_view> views = view_rules(rules, lib);
    std::vector<std::pair<bool, std::string>> hits; // exact id first
    for (const rule_view& r : views) {
        const source* s = lib.find_source(r.from.cite);
        if (has(r.id, word) || has(r.title, word) || has(r.limit_set, word) || (s != nullptr && has(s->title, word))) {
            hits.emplace_back(r.id == word, rule_whole(lib, r));
        }
    }
    for (const table& t : lib.tables) {
        if (has(t.id, word) || has(t.title, word)) {
            hits.emplace_back(t.id == word, table_whole(lib, t));
        }
    }
    for (const class_text& c : lib.classes) {
        if (has(c.id, word) || has(c.title, word)) {
            hits.emplace_back(c.id == word, class_whole(lib, c));
        }
    }
    for (const source& s : lib.sources) {
        if (has(s.key, word) || has(s.title, word)) {
            hits.emplace_back(s.key == word, source_whole(s));
        }
    }
    found = !hits.empty() && !word.empty();
    if (!found) {
        const std::string near = nearest_name(word, all_ids(lib, views));
        return "nothing is known by '" + word + "'" + (near.empty() ? "" : "; nearest known name: " + near) + '\n';
    }
    const bool exact = std::any_of(hits.begin(), hits.end(), [](const auto& h) { return h.first; });
    std::string out;
    for (const auto& [is_exact, text] : hits) {
        if (!exact || is_exact) {
            out += (out.empty() ? "" : "\n") + text;
        }
    }
    return out;
}

std::string rules_text(const library& lib, const rule_set& rules, const std::string& limit_set)
{
    std::string out;
    int count = 0;
    for (const rule_view& r : view_rules(rules, lib)) {
        if (limit_set.empty() || r.limit_set == limit_set) {
            out += padded(r.id, 34) + padded(word_for(r.signal), 9) + padded(word_for(r.from.rests_on), 11) + r.limit_set + '\n';
            ++count;
        }
    }
    return out + fmt::format("{} rules; cite ID prints one whole\n", count);
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
