// A rule's own examples: facts as given, everything else missing.
#include "rule/rule_set.hpp"

#include "quantity/text.hpp"

#include <algorithm>

namespace onehand {

namespace {

class given_facts final : public fact_source {
public:
    given_facts(const library& lib, const rule& r, const rule_example& e) : lib_(lib), rule_(r)
    {
        for (const auto& [name, figure] : e.given) {
            given_[name] = figure;
        }
    }

    value look_up(const subject& s, state in, const std::string& name) const override
    {
        auto it = given_.find(word_for(in) + "." + name);
        if (it == given_.end()) {
            it = given_.find(name);
        }
        const auto spec = name_of_subject(lib_, rule_.shown.subject, name);
        const value::type type = spec ? spec->type : value::type::number;
        if (it == given_.end()) {
            return missing_value(type, {name});
        }
        static_cast<void>(s);
        return read(it->second, type, spec ? spec->dim : dim::none);
    }

    value time_to(const subject&, const quantity& limit) const override
    {
        const auto it = given_.find("time-to(" + format_quantity(limit) + ")");
        if (it == given_.end()) {
            return missing_value(value::type::number, {"time-to(" + format_quantity(limit) + ")"});
        }
        return read(it->second, value::type::number, dim::time);
    }

    std::map<std::string, std::string> classes() const
    {
        std::map<std::string, std::string> out;
        for (const class_text& c : lib_.classes) {
            if (const auto it = given_.find(c.id); it != given_.end()) {
                out[c.id] = it->second;
            }
        }
        return out;
    }

private:
    static value read(const std::string& figure, value::type type, const dimension& d)
    {
        if (type == value::type::truth) {
            return truth_of(figure == "true");
        }
        if (type == value::type::choice) {
            return choice_of(figure);
        }
        value v;
        if (figure == "never") {
            v.never = true;
            v.reason = "never";
            return v;
        }
        // "assumed 240 V": a figure that rests on an assumption.
        const bool assumed = figure.starts_with("assumed ");
        const auto parsed_figure = parse_spread(assumed ? figure.substr(8) : figure, d);
        if (const auto* s = std::get_if<spread>(&parsed_figure)) {
            v = number(*s);
            if (assumed) {
                v.assumed.push_back("assumed in the example");
            }
            return v;
        }
        return missing_value(type, {"a readable figure in the example: " + figure});
    }

    const library& lib_;
    const rule& rule_;
    std::map<std::string, std::string> given_;
};

} // namespace

std::vector<example_result> run_examples(const rule_set& rules, const library& lib)
{
    std::vector<example_result> list;
    for (const rule& r : rules.rules) {
        for (const rule_example& e : r.examples) {
            const given_facts facts(lib, r, e);
            const subject about{r.shown.subject, "X", {"HT", "0V"}, {}};
            const finding f = judge_one(r, lib, about, r.states.empty() ? state::running : r.states.front(), facts, facts.classes(), "none");
            std::string got = word_for(f.judged);
            std::string expected = e.verdict;
            for (const std::string& name : e.missing) {
                expected += " without " + name;
                got += std::find(f.missing.begin(), f.missing.end(), name) != f.missing.end() ? " without " + name : "";
            }
            list.push_back({r.shown.id, e.name, expected, got, expected == got});
        }
    }
    return list;
}

} // namespace onehand
