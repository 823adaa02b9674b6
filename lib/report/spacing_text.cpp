// `spacing`: pair by pair what every set in force asks, what was measured and which set asks most.
#include "report/text.hpp"
#include "report/words.hpp"

#include <algorithm>
#include <fmt/format.h>
#include <utility>

namespace onehand {

namespace {

constexpr std::size_t width = 80;

std::string kept_words(verdict v)
{
    switch (v) {
    case verdict::pass:
        return "kept";
    case verdict::fail:
        return "NOT KEPT";
    case verdict::marginal:
        return "not kept inside one circuit: what a bridge does is judged apart";
    default:
        return "not shown";
    }
}

std::string short_figure(const value& v)
{
    return v.numbers.empty() && v.missing.empty() ? "-" : v.numbers.empty() ? "unknown" : greatest(v, 3);
}

std::string words_for(basis b)
{
    return b == basis::confirmed ? "confirmed" : b == basis::memory ? "from memory" : "practice";
}

/// The least measured figure: what counts.
std::string least_figure(const value& v)
{
    if (v.numbers.empty()) {
        return "unknown";
    }
    spread s = v.numbers.front();
    s = exactly({s.whole.low, s.dim});
    return figure(number(s), 3);
}

class spacing_writer {
public:
    spacing_writer(const audit_result& r, const text_options& o) : r_(r), o_(o) {}

    std::string whole()
    {
        line(r_.name);
        line("Spacings, highest voltage first; the strictest figure governs, marked *");
        for (const block& b : blocks()) {
            line();
            const std::string head = b.pairs + "  " + b.judged;
            item("", o_.colour ? "\x1b[1m" + head + "\x1b[0m" : head);
            out_ += b.rows;
        }
        if (r_.spacings.empty()) {
            line();
            line("No pair of nets stands above 60 V, and no gap is written.");
        }
        return std::move(out_) + closing_lines(r_);
    }

private:
    void line(const std::string& words = {}) { out_ += words.substr(0, words.find_last_not_of(' ') + 1) + '\n'; }

    void item(const std::string& lead, const std::string& words)
    {
        for (const std::string& l : wrapped(lead + words, width, columns_of(lead))) {
            line(l);
        }
    }

    void row(const std::string& name, const std::string& clearance, const std::string& creepage, const std::string& more = {})
    {
        line("  " + padded(name, 16) + padded(clearance, 14) + padded(creepage, 14) + more);
    }

    /// Pairs of which the same is told stand in one block, where the first of them is due.
    struct block {
        std::string pairs;
        std::string judged;
        std::string rows;
    };

    std::vector<block> blocks()
    {
        std::vector<block> list;
        for (const spacing_facts& s : r_.spacings) {
            block b{s.about.name, greatest(s.working_voltage) + ", " + s.insulation + ": " + kept_words(s.kept), rows_of(s)};
            const auto alike = [&](const block& other) { return other.judged == b.judged && other.rows == b.rows; };
            const auto it = std::find_if(list.begin(), list.end(), alike);
            if (it == list.end()) {
                list.push_back(std::move(b));
            } else {
                it->pairs += ", " + b.pairs;
            }
        }
        return list;
    }

    std::string rows_of(const spacing_facts& s)
    {
        std::string before = std::exchange(out_, {});
        rows(s);
        return std::exchange(out_, std::move(before));
    }

    void rows(const spacing_facts& s)
    {
        row("", "clearance", "creepage");
        for (const auto& asked : s.asked) {
            const auto marked = [&](const value& v, const std::string& governs) {
                return short_figure(v) + (asked.limit_set == governs ? " *" : "");
            };
            row(asked.limit_set, marked(asked.clearance, s.clearance_governs), marked(asked.creepage, s.creepage_governs),
                asked.rests_on ? words_for(*asked.rests_on) : "");
            if (o_.show_working) {
                working(asked);
            }
        }
        for (const auto& m : s.measured) {
            const std::string where = m.floor ? "  least anywhere" : m.where.empty() ? "" : "  " + m.where;
            line("  " + padded("measured", 16) + padded(least_figure(m.clearance), 14) + padded(least_figure(m.creepage), 12) + where);
        }
        if (s.measured.empty()) {
            line("  measured        none: write a gap for it");
        }
        for (const std::string& name : missing_of(s)) {
            item("  needs           ", name);
        }
    }

    void working(const spacing_facts::required& asked)
    {
        std::vector<std::string> told;
        for (const value* v : {&asked.clearance, &asked.creepage}) {
            for (const evidence::input& i : v->shown.inputs) {
                const std::string words = i.name + ": " + i.figure;
                if (std::find(told.begin(), told.end(), words) == told.end()) {
                    told.push_back(words);
                    item("    ", words);
                }
            }
        }
    }

    static std::vector<std::string> missing_of(const spacing_facts& s)
    {
        std::vector<std::string> names;
        for (const auto& asked : s.asked) {
            for (const value* v : {&asked.clearance, &asked.creepage}) {
                for (const std::string& name : v->missing) {
                    if (std::find(names.begin(), names.end(), name) == names.end()) {
                        names.push_back(name);
                    }
                }
            }
        }
        return names;
    }

    const audit_result& r_;
    const text_options& o_;
    std::string out_;
};

} // namespace

std::string spacing_report(const audit_result& r, const text_options& options)
{
    return spacing_writer(r, options).whole();
}

} // namespace onehand
