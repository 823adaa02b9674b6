#include "rule/rule_set.hpp"

#include "quantity/text.hpp"
#include "supply/supply.hpp"

#include <algorithm>
#include <cmath>
#include <tuple>

namespace onehand {

namespace {

using op = expression::op;

/// The message with its fields filled in.
std::string filled(const std::string& message, const subject& about, const finding& f, const surroundings& s)
{
    std::string out;
    std::size_t at = 0;
    for (std::size_t from = message.find('{'); from != std::string::npos; from = message.find('{', at)) {
        const std::size_t to = message.find('}', from);
        out += message.substr(at, from - at);
        const std::string name = message.substr(from + 1, to - from - 1);
        if (name == "ref") {
            out += about.name;
        } else if (name == "nets") {
            out += listed(about.nets, " to ");
        } else if (name == "state") {
            out += word_for(s.in);
        } else if (name == "value") {
            out += f.left ? in_words(*f.left) : "unknown";
        } else if (name == "limit") {
            out += f.limit ? in_words(*f.limit) : "unknown";
        } else {
            expression e;
            e.is = op::name;
            e.word = name;
            if (const auto spec = name_of_subject(*s.lib, about.kind, name)) {
                e.type = spec->type;
            }
            out += in_words(evaluate(e, s));
        }
        at = to + 1;
    }
    return out + message.substr(at);
}

std::vector<std::string> each_once(const std::vector<std::string>& names)
{
    std::vector<std::string> out;
    for (const std::string& name : names) {
        if (std::find(out.begin(), out.end(), name) == out.end()) {
            out.push_back(name);
        }
    }
    return out;
}

verdict verdict_for(const truth_outcome& t, bool person, std::string& marginal_by)
{
    const bool fails = person ? t.breached : t.breached_in_use;
    // A certain failure stays one whatever is missing; short of that, what is missing leaves it open.
    if (t.certain_fail && t.assumed.empty()) {
        return verdict::fail;
    }
    if (!t.missing.empty()) {
        return verdict::not_shown;
    }
    if (fails) {
        if (t.assumed.empty()) {
            return verdict::fail;
        }
        marginal_by = "assumption";
        return verdict::marginal;
    }
    if (t.whole == tri::yes) {
        if (t.assumed.empty()) {
            return verdict::pass;
        }
        marginal_by = "assumption";
        return verdict::marginal;
    }
    if (!person && t.in_use == tri::yes && t.breached) {
        marginal_by = t.assumed.empty() ? "tolerance" : "assumption";
        return verdict::marginal;
    }
    return verdict::not_shown; // one side is not known far enough
}

/// (limit - value)/limit at the worst ends; negative where exceeded.
std::optional<double> margin_of(const expression& e, const value& left, const value& right)
{
    if (left.numbers.empty() || right.numbers.empty() || e.is == op::equal) {
        return std::nullopt;
    }
    const bool upper = e.is == op::less || e.is == op::less_equal;
    double worst_left = upper ? -unbounded : unbounded;
    double worst_right = upper ? unbounded : -unbounded;
    for (const spread& s : left.numbers) {
        worst_left = upper ? std::max(worst_left, s.whole.high) : std::min(worst_left, s.whole.low);
    }
    for (const spread& s : right.numbers) {
        worst_right = upper ? std::min(worst_right, s.whole.low) : std::max(worst_right, s.whole.high);
    }
    if (!std::isfinite(worst_left) || !std::isfinite(worst_right) || worst_right == 0.0) {
        return std::nullopt;
    }
    return (upper ? worst_right - worst_left : worst_left - worst_right) / std::abs(worst_right);
}

std::string settling(const rule& r, const finding& f)
{
    if (f.judged == verdict::not_shown && !f.missing.empty()) {
        return "give " + listed(f.missing);
    }
    if (f.judged == verdict::not_shown) {
        return r.settles.empty() ? "give figures that are known on both sides" : r.settles;
    }
    if (f.judged == verdict::marginal && f.marginal_by == "assumption") {
        return "write a figure in place of what is assumed: " + listed(f.assumed);
    }
    if (f.judged != verdict::marginal) {
        return {};
    }
    if (!r.settles.empty()) {
        return r.settles;
    }
    std::vector<std::string> inputs;
    for (const evidence& e : f.shown) {
        for (const evidence::input& i : e.inputs) {
            if (i.figure.find("+-") != std::string::npos || i.figure.find("\u00b1") != std::string::npos) {
                inputs.push_back(i.name);
            }
        }
    }
    return inputs.empty() ? "measure it as built and write what was measured" : "measure and write as measured: " + listed(inputs);
}

bool advised(const rule& r, const surroundings& s)
{
    if (!r.advise) {
        return true;
    }
    const truth_outcome t = judge_truth(*r.advise, s);
    return !t.breached;
}

} // namespace

std::map<std::string, std::string> classes_of(const rule_set& set, const library& lib, const subject& about, state in, const fact_source& facts,
                                              std::vector<class_told>* told)
{
    std::map<std::string, std::string> names;
    for (const compiled_class& c : set.classes) {
        if (c.text.subject != about.kind || std::find(c.states.begin(), c.states.end(), in) == c.states.end()) {
            continue;
        }
        const surroundings s{&lib, &facts, &about, in, &names};
        class_told t{about, in, c.text.id, {}, {}};
        for (std::size_t i = 0; i < c.holds.size(); ++i) {
            const truth_outcome outcome = judge_truth(c.holds[i], s);
            if (outcome.whole == tri::yes && outcome.missing.empty()) {
                t.name = c.text.steps[i].name;
                t.missing.clear();
                break;
            }
            if (!outcome.missing.empty() && outcome.whole != tri::no) {
                t.missing.insert(t.missing.end(), outcome.missing.begin(), outcome.missing.end());
                // A lower class that is not shown leaves the class open.
                break;
            }
        }
        names[c.text.id] = t.name;
        if (told != nullptr) {
            told->push_back(std::move(t));
        }
    }
    return names;
}

finding judge_one(const rule& r, const library& lib, const subject& about, state in, const fact_source& facts,
                  const std::map<std::string, std::string>& classes)
{
    const surroundings s{&lib, &facts, &about, in, &classes};
    finding f;
    f.rule = r.shown.id;
    f.title = r.shown.title;
    f.limit_set = r.shown.limit_set;
    f.about = about;
    f.in = in;
    f.signal = r.shown.signal;
    f.bears_on = r.shown.bears_on;
    f.protects_person = r.shown.protects_person;
    f.from = r.shown.from;
    f.why = r.shown.why;
    f.remedy = r.shown.remedy;
    truth_outcome applies;
    applies.whole = tri::yes;
    if (r.when) {
        applies = judge_truth(*r.when, s);
    }
    if (applies.whole == tri::no && applies.missing.empty() && applies.assumed.empty()) {
        f.judged = verdict::not_applicable;
        return f;
    }
    const std::optional<expression>& asked = r.require ? r.require : r.advise;
    const bool comparison = asked->parts.size() == 2 && asked->is != op::call;
    if (comparison) {
        f.left = evaluate(asked->parts[0], s);
        f.limit = evaluate(asked->parts[1], s);
        f.comparison = sign_word(asked->is);
        f.margin = margin_of(*asked, *f.left, *f.limit);
        f.shown = {f.left->shown, f.limit->shown};
    } else {
        f.left = evaluate(*asked, s);
        f.shown = {f.left->shown};
    }
    if (r.require) {
        truth_outcome t = judge_truth(*r.require, s);
        if (applies.whole != tri::yes || !applies.missing.empty()) {
            // It may not apply at all: neither passed nor failed before that is known, unless everything needed is there and it is kept.
            t.missing.insert(t.missing.end(), applies.missing.begin(), applies.missing.end());
            if (applies.missing.empty() && applies.whole == tri::unknown) {
                // True for part of the spread: where it applies, the requirement counts in full.
            } else {
                t.certain_fail = t.certain_fail && applies.whole == tri::yes;
            }
        }
        f.judged = verdict_for(t, r.shown.protects_person, f.marginal_by);
        if (f.judged == verdict::fail && r.at_worst != verdict::fail) {
            f.judged = r.at_worst;
            f.marginal_by = r.at_worst == verdict::marginal ? "tolerance" : "";
        }
        f.missing = f.judged == verdict::fail ? std::vector<std::string>{} : each_once(t.missing);
        f.assumed = t.assumed;
    } else {
        f.judged = verdict::not_applicable; // advice is told, never judged
    }
    if (f.judged == verdict::pass || f.judged == verdict::marginal || !r.require) {
        if (applies.missing.empty() && !advised(r, s)) {
            f.advice = r.require ? r.shown.remedy : filled(r.shown.message, about, f, s) + "; " + r.shown.remedy;
        }
    }
    f.message = filled(r.shown.message, about, f, s);
    f.settles = settling(r, f);
    return f;
}

namespace {

bool graver(const finding& a, const finding& b)
{
    if (a.judged != b.judged) {
        return a.judged < b.judged;
    }
    if (a.signal != b.signal) {
        return a.signal < b.signal;
    }
    if (a.rule != b.rule) {
        return a.rule < b.rule;
    }
    if (a.about.name != b.about.name) {
        return natural_less(a.about.name, b.about.name);
    }
    return a.in < b.in;
}

/// One finding for all subjects of a gathering rule that are not kept, worst first.
void gather_into(std::vector<finding>& all, std::vector<finding> some)
{
    std::vector<finding> open;
    for (finding& f : some) {
        if (f.judged == verdict::pass || f.judged == verdict::not_applicable) {
            all.push_back(std::move(f));
        } else {
            open.push_back(std::move(f));
        }
    }
    if (open.empty()) {
        return;
    }
    finding f = open.front();
    for (const finding& o : open) {
        f.gathered.push_back(o.about);
        f.judged = std::min(f.judged, o.judged);
    }
    all.push_back(std::move(f));
}

/// The same rule and subject in several states: the gravest state speaks for all.
void keep_gravest(std::vector<finding>& list)
{
    std::vector<finding> kept;
    for (finding& f : list) {
        const auto same = std::find_if(kept.begin(), kept.end(), [&](const finding& k) { return k.rule == f.rule && k.about == f.about; });
        if (same == kept.end()) {
            kept.push_back(std::move(f));
            continue;
        }
        const bool worse = f.judged < same->judged || (f.judged == same->judged && f.margin.value_or(unbounded) < same->margin.value_or(unbounded));
        if (worse) {
            *same = std::move(f);
        }
    }
    list = std::move(kept);
}

void find_loosened(const rule_set& rules, std::vector<finding>& findings, std::vector<std::string>& loosened)
{
    for (const rule& r : rules.rules) {
        if (r.names.empty()) {
            continue;
        }
        for (const finding& f : findings) {
            if (f.rule != r.names) {
                continue;
            }
            const auto own =
                std::find_if(findings.begin(), findings.end(), [&](const finding& o) { return o.rule == r.shown.id && o.about == f.about; });
            if (own != findings.end() && own->judged > f.judged) {
                const std::string line = "shop rule " + r.shown.id + " is milder than " + r.names + " on " + f.about.name + ": " +
                                         word_for(own->judged) + " against " + word_for(f.judged) + "; the published rule counts";
                if (std::find(loosened.begin(), loosened.end(), line) == loosened.end()) {
                    loosened.push_back(line);
                }
            }
        }
    }
}

} // namespace

bool in_force(const rule& r, const std::vector<std::string>& limit_sets)
{
    return r.shown.limit_set == "practice" || std::find(limit_sets.begin(), limit_sets.end(), r.shown.limit_set) != limit_sets.end();
}

judgement judge(const rule_set& rules, const library& lib, const std::vector<subject>& subjects, const fact_source& facts,
                const judging_options& options, const std::string& changed, const std::string& change_kind)
{
    judgement out;
    std::map<std::tuple<std::string, std::string, state>, std::map<std::string, std::string>> classes;
    const auto classes_for = [&](const subject& s, state in) -> const std::map<std::string, std::string>& {
        const auto key = std::tuple(s.kind, s.name, in);
        const auto it = classes.find(key);
        return it != classes.end() ? it->second : classes.emplace(key, classes_of(rules, lib, s, in, facts, &out.classes)).first->second;
    };
    for (const compiled_class& c : rules.classes) {
        for (const subject& s : subjects) {
            if (s.kind == c.text.subject) {
                for (const state in : c.states) {
                    classes_for(s, in);
                }
            }
        }
    }
    for (const rule& r : rules.rules) {
        if (!in_force(r, options.limit_sets) || std::find(r.changes.begin(), r.changes.end(), change_kind) == r.changes.end()) {
            continue;
        }
        std::vector<finding> some;
        for (const subject& s : subjects) {
            if (s.kind != r.shown.subject) {
                continue;
            }
            for (const state in : r.states) {
                finding f = judge_one(r, lib, s, in, facts, classes_for(s, in));
                f.change = changed;
                some.push_back(std::move(f));
            }
        }
        keep_gravest(some);
        if (r.gather) {
            gather_into(out.findings, std::move(some));
        } else {
            std::move(some.begin(), some.end(), std::back_inserter(out.findings));
        }
    }
    for (finding& f : out.findings) {
        f.id = f.rule + ":" + f.about.name + ":" + word_for(f.in) + (changed == "none" ? "" : ":" + changed);
    }
    find_loosened(rules, out.findings, out.loosened);
    std::stable_sort(out.findings.begin(), out.findings.end(), graver);
    return out;
}

judgement together(judgement a, judgement b)
{
    std::move(b.findings.begin(), b.findings.end(), std::back_inserter(a.findings));
    for (std::string& line : b.loosened) {
        if (std::find(a.loosened.begin(), a.loosened.end(), line) == a.loosened.end()) {
            a.loosened.push_back(std::move(line));
        }
    }
    std::stable_sort(a.findings.begin(), a.findings.end(), graver);
    return a;
}

std::vector<rule_view> view_rules(const rule_set& rules, const library& lib)
{
    static_cast<void>(lib);
    std::vector<rule_view> list;
    for (const rule& r : rules.rules) {
        list.push_back(r.shown);
    }
    return list;
}

} // namespace onehand
