#include "report/text.hpp"

#include "quantity/text.hpp"
#include "report/words.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

namespace {

constexpr std::size_t width = 80;

class writer {
public:
    writer(const audit_result& r, const text_options& o) : r_(r), o_(o) {}

    std::string whole()
    {
        head();
        findings();
        stored();
        discharges();
        set_point();
        stage();
        spacings();
        if (o_.show_working) {
            nets();
            parts();
        }
        tail();
        return std::move(out_) + last_line();
    }

    std::string discharge_only()
    {
        line(r_.name);
        discharges();
        return std::move(out_) + closing_lines(r_);
    }

private:
    void line(const std::string& words = {})
    {
        const std::size_t end = words.find_last_not_of(' ');
        out_ += words.substr(0, end == std::string::npos ? 0 : end + 1) + '\n';
    }

    void text(const std::string& words, std::size_t indent = 0)
    {
        for (const std::string& l : wrapped(words, width, indent)) {
            line(l);
        }
    }

    void item(const std::string& lead, const std::string& words) { text(lead + words, columns_of(lead)); }

    std::string strong(const std::string& words, const char* code) const { return o_.colour ? fmt::format("\x1b[{}m{}\x1b[0m", code, words) : words; }

    void title(const std::string& words)
    {
        line();
        line(strong(words, "1"));
    }

    static bool waiting_known(const audit_result& r)
    {
        return r.label && r.label->wait.known() && !r.label->wait.never && !r.label->wait.numbers.empty();
    }

    /// A waiting time is told rounded up to what a person can count.
    static std::string waiting(const audit_result& r)
    {
        if (!waiting_known(r)) {
            return "no time can be told: measure";
        }
        const double t = r.label->wait.numbers.front().whole.high;
        if (t <= 0.0) {
            return "no time is asked for the charge that is there";
        }
        const double step = t < 10.0 ? 1.0 : t < 60.0 ? 5.0 : 60.0;
        return fmt::format("{:.0f} s", std::ceil(t / step) * step);
    }

    void head()
    {
        line(strong(r_.name.empty() ? r_.file : r_.name, "1"));
        const conclusions& c = r_.concluded;
        const std::string energise = c.energise == "hold" ? "HOLD" : c.energise == "conditional" ? "CONDITIONAL" : "NO OBJECTION FOUND";
        const char* red = "1;31";
        line();
        line("Energise:  " + strong(energise, c.energise == "hold" ? red : "1"));
        text(c.energise == "hold"          ? "  Do not power it as it stands: see below what fails."
             : c.energise == "conditional" ? "  Not before each condition below is settled."
                                           : "  Nothing was found against it in what the description says. This is no certificate.",
             2);
        if (c.reach_in == "hold") {
            line("Reach in:  " + strong("HOLD", red));
            text("  No hand goes inside on the strength of this description.", 2);
        } else {
            line("Reach in:  " + strong("ONLY AFTER", "1"));
            text("  isolate the input; wait: " + (c.time_known ? waiting(r_) : std::string("no time can be told: measure")) +
                     "; measure below 60 V on " + pairs() + "; short through a resistor and leave shorted.",
                 2);
        }
        if (r_.label) {
            text("Worst inside: " + greatest(r_.label->voltage) + ", " + greatest(r_.label->energy) + " stored. Waiting time: " + waiting(r_) + ".",
                 2);
        }
        if (const finding* f = worst()) {
            item("Worst found: ", word_for(f->signal) + ", " + word_for(f->judged) + " - " + f->message);
        }
        first_steps();
        conditions();
    }

    const finding* worst() const
    {
        const auto it = std::find_if(r_.judged.findings.begin(), r_.judged.findings.end(),
                                     [](const finding& f) { return f.judged != verdict::pass && f.judged != verdict::not_applicable; });
        return it == r_.judged.findings.end() ? nullptr : &*it;
    }

    std::string pairs() const
    {
        std::string names;
        for (const access_facts& a : r_.accesses) {
            const std::string name = a.about.name;
            if (names.find(name) == std::string::npos) {
                names += (names.empty() ? "" : ", ") + name;
            }
        }
        return names.empty() ? "every pair of nets" : names;
    }

    void first_steps()
    {
        if (r_.concluded.first.empty()) {
            return;
        }
        title("First");
        for (std::size_t i = 0; i < r_.concluded.first.size(); ++i) {
            item(fmt::format("  {}. ", i + 1), r_.concluded.first[i]);
        }
    }

    void conditions()
    {
        if (r_.concluded.conditions.empty()) {
            return;
        }
        title("Conditions");
        for (const std::string& c : r_.concluded.conditions) {
            item("  [ ] ", c);
        }
    }

    void findings()
    {
        std::map<verdict, int> counts;
        for (const finding& f : r_.judged.findings) {
            ++counts[f.judged];
        }
        title(fmt::format("Findings: {} fail, {} not-shown, {} marginal, {} pass, {} not-applicable", counts[verdict::fail],
                          counts[verdict::not_shown], counts[verdict::marginal], counts[verdict::pass], counts[verdict::not_applicable]));
        const finding* last = nullptr;
        for (const finding& f : r_.judged.findings) {
            const bool told = f.judged <= verdict::marginal || (o_.show_working && f.judged == verdict::pass);
            if (!told) {
                continue;
            }
            const bool again = last != nullptr && last->rule == f.rule && last->judged == f.judged && last->settles == f.settles;
            again && !o_.show_working ? once_more(f) : one(f);
            last = &f;
        }
        advice();
    }

    void one(const finding& f)
    {
        line();
        text(strong(word_for(f.judged), f.judged == verdict::fail ? "1;31" : "1") + ", " + word_for(f.signal) + ": " + f.title, 2);
        item("  ", f.message);
        gathered(f);
        value_line(f);
        if (f.judged != verdict::pass) {
            item("  why    ", f.why);
            item("  change ", f.judged == verdict::fail ? f.remedy : f.settles.empty() ? f.remedy : f.settles);
        }
        for (const std::string& a : f.assumed) {
            item("  assumes ", a);
        }
        item("  source ", f.limit_set + ": " + source_words(o_.lib, f.from));
        if (f.about.at.line != 0) {
            item("  at     ", at_place(f.about.at));
        }
        if (o_.show_working) {
            for (const evidence& e : f.shown) {
                working(e);
            }
        }
    }

    /// The same rule on another subject: only what differs.
    void once_more(const finding& f)
    {
        item("  ", f.message);
        value_line(f);
        if (f.about.at.line != 0) {
            item("  at     ", at_place(f.about.at));
        }
    }

    void value_line(const finding& f)
    {
        if (f.left && f.limit && f.left->holds == value::type::number) {
            const std::string margin = f.margin ? fmt::format(", margin {:+.0f} %", *f.margin * 100.0) : "";
            item("  value  ", figure(*f.left) + " " + f.comparison + " " + figure(*f.limit) + margin);
        }
    }

    void gathered(const finding& f)
    {
        constexpr std::size_t most = 12;
        std::string names;
        for (std::size_t i = 0; i < f.gathered.size() && (i < most || o_.show_working); ++i) {
            names += (i == 0 ? "" : ", ") + f.gathered[i].name;
        }
        if (f.gathered.size() > most && !o_.show_working) {
            names += fmt::format(" and {} more", f.gathered.size() - most);
        }
        if (f.gathered.size() > 1) {
            item("  all of ", names);
        }
    }

    void working(const evidence& e)
    {
        if (e.formula.empty() && e.inputs.empty()) {
            return;
        }
        const std::string how = e.searched ? fmt::format(" [searched, widened by {:.0f} %]", e.margin * 100.0) : " [proved]";
        item("    = ", e.formula + how);
        for (const evidence::input& i : e.inputs) {
            item("      ", i.name + ": " + i.figure + (i.at.line == 0 ? "" : ", " + at_place(i.at)));
        }
    }

    void advice()
    {
        bool any = false;
        for (const finding& f : r_.judged.findings) {
            if (f.advice.empty()) {
                continue;
            }
            if (!any) {
                title("Advice: beyond good practice, within limits; told, never judged");
            }
            any = true;
            item("  ", f.about.name + ": " + f.advice + " - " + source_words(o_.lib, f.from));
        }
    }

    void stored()
    {
        title("Stored, at its worst");
        line("  " + padded("what", 18) + padded("voltage", 11) + padded("energy", 11) + padded("charge", 11) + padded("at once", 11) + "class");
        for (const stored_facts& s : r_.stored) {
            std::string first;
            std::string others;
            for (const class_told& c : s.classes) {
                const std::string name = c.name.empty() ? std::string("unknown") : c.name;
                if (first.empty()) {
                    first = name; // the charged capacitor's
                } else {
                    others += (others.empty() ? "" : "; ") + c.id + ": " + name;
                }
            }
            line("  " + padded(s.about.name, 18) + padded(greatest(s.voltage), 11) + padded(greatest(s.energy), 11) + padded(greatest(s.charge), 11) +
                 padded(s.is_pair ? greatest(s.at_once_charge) : "-", 11) + first);
            if (s.is_pair && !others.empty()) {
                item("      ", others);
            }
        }
    }

    void discharges()
    {
        title("After switch-off: last time above, and what is left, at its worst");
        line("  " + padded("pair", 14) + padded("input", 9) + padded("output", 11) + padded("60 V", 10) + padded("1 s", 9) + padded("5 s", 9) +
             padded("10 s", 9) + "5 min");
        for (const discharge_facts& d : r_.discharges) {
            std::string row = "  " + padded(d.nets[0] + " to " + d.nets[1], 14) + padded(d.input_end, 9) + padded(d.output_end, 11);
            row += padded(d.limits.empty() ? "-" : greatest(d.limits.front().time, 3), 10);
            for (const auto& left : d.left) {
                if (left.after_s != 60.0) {
                    row += padded(greatest(left.voltage, 3), 9);
                }
            }
            line(row);
            notes(d);
        }
    }

    /// "60 V in 5 s (IEC 60204-1): takes 4 s" for every time asked of the pair, the governing one first.
    void asked_times(const discharge_facts& d)
    {
        std::vector<std::string> told;
        for (const bool governing : {true, false}) {
            for (const auto& l : d.limits) {
                if (!l.within_s || l.exempt || l.governs != governing) {
                    continue;
                }
                const std::string words = format_quantity(l.to) + " in " + format_quantity({*l.within_s, dim::time}) + " (" + l.limit_set +
                                          "): takes " + greatest(l.time, 3) + (governing ? ", governs" : "");
                if (std::find(told.begin(), told.end(), words) == told.end()) {
                    told.push_back(words);
                }
            }
        }
        if (!told.empty()) {
            item("      ", "asked: " + listed(told, "; "));
        }
    }

    void notes(const discharge_facts& d)
    {
        asked_times(d);
        if (!d.limits.empty() && d.limits.front().time.never) {
            item("      ", d.limits.front().time.reason);
        }
        if (!d.limits.empty() && !d.limits.front().time.missing.empty()) {
            item("      ", figure(d.limits.front().time));
        }
        if (!d.only_path.empty()) {
            item("      ", "only path: " + d.only_path + "; open, it leaves the charge where it is");
        }
        if (!d.measured.empty()) {
            item("      ", d.measured);
        }
        if (o_.show_working && !d.limits.empty()) {
            working(d.limits.front().time.shown);
        }
    }

    void set_point()
    {
        if (!r_.set_point) {
            return;
        }
        title("Set point");
        item("  ", figure(r_.set_point->output) + (r_.set_point->basis.empty() ? "" : ", " + r_.set_point->basis));
        for (const set_point_facts::end& e : r_.set_point->set_by) {
            line("    " + padded(e.part, 16) + "lowest with it " + padded(e.at_low, 8) + "highest with it " + e.at_high);
        }
        if (o_.show_working) {
            working(r_.set_point->output.shown);
        }
    }

    void stage()
    {
        if (!r_.converter) {
            return;
        }
        const converter_facts& c = *r_.converter;
        title("Converter, at its worst");
        if (!c.mode.empty() || !c.mode_missing.empty()) {
            line("  " + padded("coil current", 34) + (c.mode.empty() ? "mode unknown: needs " + listed(c.mode_missing) : c.mode));
        }
        for (const converter_facts::figure& f : c.figures) {
            if (f.told.numbers.empty() && f.told.missing.empty()) {
                continue;
            }
            item("  " + padded(f.words, 34), f.told.numbers.empty() ? "unknown: needs " + listed(f.told.missing) : figure(f.told));
            if (o_.show_working) {
                working(f.told.shown);
            }
        }
        item("  " + padded("output shorted, what limits it", 34), c.shorted);
        if (!c.runaway_story.empty()) {
            line("  with feedback lost:");
        }
        for (const std::string& l : c.runaway_story) {
            item("    - ", l);
        }
    }

    void spacings()
    {
        if (r_.spacings.empty()) {
            return;
        }
        title("Spacings, highest voltage first: the most that any set asks");
        line("  " + padded("pair", 16) + padded("voltage", 10) + padded("creepage asked", 15) + padded("measured", 13) +
             padded("clearance asked", 16) + "measured");
        std::size_t shown = 0;
        for (const spacing_facts& s : r_.spacings) {
            if (!o_.show_working && shown >= 12 && s.covered != "none") {
                continue;
            }
            if (!o_.show_working && shown >= 24) {
                break;
            }
            ++shown;
            const std::string mark = s.covered == "floor" ? " floor" : "";
            const bool there = !s.measured.empty();
            line("  " + padded(s.about.name, 16) + padded(greatest(s.working_voltage), 10) + padded(most_asked(s, s.creepage_governs, true), 15) +
                 padded(there ? greatest(s.measured.front().creepage, 3) + mark : "none", 13) +
                 padded(most_asked(s, s.clearance_governs, false), 16) + (there ? greatest(s.measured.front().clearance, 3) + mark : "none"));
        }
        if (shown < r_.spacings.size()) {
            line(fmt::format("  and {} more pairs: --show-working lists them all", r_.spacings.size() - shown));
        }
        line("  the command spacing tells each set's figures side by side");
    }

    static std::string most_asked(const spacing_facts& s, const std::string& governs, bool creepage)
    {
        for (const auto& asked : s.asked) {
            if (asked.limit_set == governs) {
                return greatest(creepage ? asked.creepage : asked.clearance, 3);
            }
        }
        return s.asked.empty() ? "-" : "unknown";
    }

    void nets()
    {
        title("Nets, against the return");
        for (const net_facts& n : r_.nets) {
            std::string words = n.floating ? "nothing holds it in some case; " : "";
            for (const auto& [in, v] : n.potential) {
                words += word_for(in) + " " + figure(v) + "; ";
            }
            item("  " + padded(n.net, 8), words);
        }
    }

    void parts()
    {
        title("Parts");
        for (const part_facts& p : r_.parts) {
            for (const part_facts::in_state& s : p.states) {
                if (s.in == state::running) {
                    item("  " + padded(p.ref, 8), figure(s.voltage) + "; " + figure(s.current) + "; " + figure(s.power));
                }
            }
        }
    }

    void tail()
    {
        if (!r_.assumptions.empty()) {
            title("Assumed");
            for (const std::string& a : r_.assumptions) {
                item("  ", a);
            }
        }
        out_ += limit_set_lines(r_);
        title("Not looked at");
        for (const std::string& s : r_.not_seen) {
            item("  ", s);
        }
        title("Cautions");
        for (const std::string& s : r_.cautions) {
            item("  ", s);
        }
    }

    const audit_result& r_;
    const text_options& o_;
    std::string out_;
};

} // namespace

std::string text_report(const audit_result& r, const text_options& options)
{
    return writer(r, options).whole();
}

std::string discharge_report(const audit_result& r, const text_options& options)
{
    return writer(r, options).discharge_only();
}

} // namespace onehand
