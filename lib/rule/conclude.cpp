// The two conclusions, from what was found (design section 3).
#include "rule/rules.hpp"

#include <algorithm>

namespace onehand {

namespace {

bool bears(const finding& f, const std::string& on)
{
    return std::find(f.bears_on.begin(), f.bears_on.end(), on) != f.bears_on.end();
}

bool grave(signal_word s)
{
    return s == signal_word::danger || s == signal_word::warning;
}

bool after_fault(const finding& f)
{
    return f.change != "none" && !f.change.empty();
}

/// Missing capacitance, energy or time leave reach-in without a time, but do not hold it.
bool only_time_missing(const finding& f)
{
    return f.judged == verdict::not_shown && !f.missing.empty() && std::all_of(f.missing.begin(), f.missing.end(), [](const std::string& name) {
               return name.find("capacitance") != std::string::npos || name.find("\"capacitors\"") != std::string::npos ||
                      name.find("after switch-off") != std::string::npos;
           });
}

bool holds(const finding& f, const std::string& on)
{
    if (!bears(f, on)) {
        return false;
    }
    if (f.judged == verdict::fail) {
        return !after_fault(f) || grave(f.signal);
    }
    const bool open = f.judged == verdict::not_shown || f.judged == verdict::marginal;
    return open && grave(f.signal) && !(on == "reach-in" && only_time_missing(f));
}

bool conditional(const finding& f, const std::string& on)
{
    if (!bears(f, on) || holds(f, on)) {
        return false;
    }
    return f.judged == verdict::not_shown || f.judged == verdict::marginal || (f.judged == verdict::fail && after_fault(f));
}

std::string named(const finding& f)
{
    return f.about.kind == "supply" ? f.title : f.about.name + ", " + f.title;
}

/// One line a thing to settle: findings that the same measurement or datum settles stand together.
class condition_list {
public:
    void add(const finding& f)
    {
        const std::string how = f.settles.empty() ? f.remedy : f.settles;
        for (auto& [settles, about] : lines_) {
            if (settles == how) {
                add_once(about, named(f));
                return;
            }
        }
        lines_.push_back({how, {named(f)}});
    }

    std::vector<std::string> lines() const
    {
        std::vector<std::string> out;
        for (const auto& [settles, about] : lines_) {
            std::string line = settles + " (" + about.front();
            for (std::size_t i = 1; i < about.size() && i < 3; ++i) {
                line += "; " + about[i];
            }
            out.push_back(line + (about.size() > 3 ? "; and " + std::to_string(about.size() - 3) + " more)" : ")"));
        }
        return out;
    }

private:
    static void add_once(std::vector<std::string>& list, std::string line)
    {
        if (std::find(list.begin(), list.end(), line) == list.end()) {
            list.push_back(std::move(line));
        }
    }

    std::vector<std::pair<std::string, std::vector<std::string>>> lines_;
};

void add_once(std::vector<std::string>& list, std::string line)
{
    if (std::find(list.begin(), list.end(), line) == list.end()) {
        list.push_back(std::move(line));
    }
}

/// What to do first: the remedies of what holds, gravest first, at most five.
std::vector<std::string> first_steps(const std::vector<finding>& findings, const conclusions& c)
{
    std::vector<std::string> steps;
    for (const finding& f : findings) {
        const bool counts = std::find(c.because.begin(), c.because.end(), f.id) != c.because.end();
        if (counts && steps.size() < 5) {
            const std::string what = f.judged == verdict::fail ? f.remedy : f.settles.empty() ? f.remedy : f.settles;
            add_once(steps, (f.about.kind == "supply" ? "" : f.about.name + ": ") + what);
        }
    }
    for (const std::string& line : c.conditions) {
        if (steps.size() < 5) {
            add_once(steps, line);
        }
    }
    return steps;
}

} // namespace

conclusions conclude(const std::vector<finding>& findings, bool waiting_time_known)
{
    conclusions c;
    c.energise = "no-objection";
    c.reach_in = "only-after";
    c.time_known = waiting_time_known;
    condition_list conditions;
    for (const finding& f : findings) {
        const bool energise = holds(f, "energise");
        const bool reach_in = holds(f, "reach-in");
        if (energise) {
            c.energise = "hold";
        }
        if (reach_in) {
            c.reach_in = "hold";
        }
        if (energise || reach_in) {
            add_once(c.because, f.id);
        } else if (conditional(f, "energise")) {
            c.energise = c.energise == "hold" ? "hold" : "conditional";
            conditions.add(f);
        } else if (conditional(f, "reach-in")) {
            conditions.add(f);
        }
        if (bears(f, "reach-in") && only_time_missing(f)) {
            c.time_known = false;
        }
    }
    c.conditions = conditions.lines();
    c.first = first_steps(findings, c);
    return c;
}

} // namespace onehand
