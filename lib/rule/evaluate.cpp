// Values of expressions over both ranges, and their truth: every alternative of an unknown choice, every known point.
#include "rule/expression.hpp"

#include <algorithm>
#include <cmath>
#include <functional>

namespace onehand {

namespace {

using op = expression::op;
using type = value::type;

void add_once(std::vector<std::string>& to, const std::vector<std::string>& from)
{
    for (const std::string& s : from) {
        if (std::find(to.begin(), to.end(), s) == to.end()) {
            to.push_back(s);
        }
    }
}

void gather_names(value& to, const value& from)
{
    add_once(to.missing, from.missing);
    add_once(to.assumed, from.assumed);
    for (const evidence::input& i : from.shown.inputs) {
        to.shown.inputs.push_back(i);
    }
    to.shown.searched |= from.shown.searched;
    to.shown.margin = std::max(to.shown.margin, from.shown.margin);
    if (to.shown.formula.empty()) {
        to.shown.formula = from.shown.formula;
    }
}

double tidy(double x, double otherwise)
{
    return std::isnan(x) ? otherwise : x;
}

range add(const range& a, const range& b)
{
    return {tidy(a.low + b.low, -unbounded), tidy(a.high + b.high, unbounded)};
}

range negate(const range& a)
{
    return {-a.high, -a.low};
}

range multiply(const range& a, const range& b)
{
    const double ends[] = {tidy(a.low * b.low, 0.0), tidy(a.low * b.high, 0.0), tidy(a.high * b.low, 0.0), tidy(a.high * b.high, 0.0)};
    return {*std::min_element(std::begin(ends), std::end(ends)), *std::max_element(std::begin(ends), std::end(ends))};
}

range divide(const range& a, const range& b)
{
    if (b.low <= 0.0 && b.high >= 0.0) {
        return {-unbounded, unbounded};
    }
    return multiply(a, {1.0 / b.high, 1.0 / b.low});
}

range raised(const range& a, int n)
{
    const double x = std::pow(a.low, n);
    const double y = std::pow(a.high, n);
    if (n % 2 != 0) {
        return {x, y};
    }
    return {a.contains(0.0) ? 0.0 : std::min(x, y), std::max(x, y)};
}

range magnitude_of(const range& a)
{
    return {a.contains(0.0) ? 0.0 : std::min(std::abs(a.low), std::abs(a.high)), std::max(std::abs(a.low), std::abs(a.high))};
}

using on_two = std::function<range(const range&, const range&)>;
using on_one = std::function<range(const range&)>;

value combine(const value& a, const value& b, const dimension& d, const on_two& f)
{
    value v;
    for (const spread& x : a.numbers) {
        for (const spread& y : b.numbers) {
            v.numbers.push_back({d, f(x.in_use, y.in_use), f(x.whole, y.whole), std::nullopt});
        }
    }
    v.never = a.never || b.never;
    gather_names(v, a);
    gather_names(v, b);
    return v;
}

value each(const value& a, const dimension& d, const on_one& f)
{
    value v;
    for (const spread& x : a.numbers) {
        v.numbers.push_back({d, f(x.in_use), f(x.whole), std::nullopt});
    }
    v.never = a.never;
    gather_names(v, a);
    return v;
}

value of_name(const expression& e, const surroundings& s)
{
    if (e.word == "true" || e.word == "false") {
        return truth_of(e.word == "true");
    }
    if (s.classes != nullptr) {
        if (const auto it = s.classes->find(e.word); it != s.classes->end()) {
            return it->second.empty() ? missing_value(type::choice, {"class " + e.word}) : choice_of(it->second);
        }
    }
    value v = s.facts->look_up(*s.about, e.other.value_or(s.in), e.word);
    v.holds = e.type;
    return v;
}

value of_table(const expression& e, const surroundings& s)
{
    const table* t = s.lib->find_table(e.parts[0].word);
    const value x = evaluate(e.parts[1], s);
    value v;
    gather_names(v, x);
    if (t->by_choice) {
        // An unknown choice may be any printed row.
        for (const std::string& choice : x.choice.empty() ? t->choices : std::vector<std::string>{x.choice}) {
            // Where a cell prints several figures its sources disagree: all of them count, so the stricter one judges.
            std::optional<spread> all;
            for (const spread& printed : look_up_choice(*t, e.column, choice)) {
                const range wide =
                    all ? range{std::min(all->whole.low, printed.whole.low), std::max(all->whole.high, printed.whole.high)} : printed.whole;
                all = spread{printed.dim, wide, wide, std::nullopt};
            }
            if (all) {
                v.numbers.push_back(*all);
            }
        }
        if (v.numbers.empty()) {
            v.missing.push_back("a row for '" + x.choice + "' in: " + t->title);
        }
        v.shown.inputs.push_back({t->title, x.choice.empty() ? "any row" : "row " + x.choice, t->at});
        return v;
    }
    for (const spread& at : x.numbers) {
        const table_answer a = look_up(*t, e.column, at);
        if (a.figure) {
            v.numbers.push_back(*a.figure);
            v.shown.inputs.push_back({t->title, a.rows, t->at});
        } else {
            v.missing.push_back(a.reason);
        }
    }
    return v;
}

value of_call(const expression& e, const surroundings& s)
{
    if (e.word == "table") {
        return of_table(e, s);
    }
    if (e.word == "time-to") {
        const value limit = evaluate(e.parts[0], s);
        return limit.numbers.empty() ? limit : s.facts->time_to(*s.about, {limit.numbers.front().whole.low, dim::voltage});
    }
    const value a = evaluate(e.parts[0], s);
    if (e.word == "min" || e.word == "max") {
        const value b = evaluate(e.parts[1], s);
        const bool least = e.word == "min";
        return combine(a, b, e.dim, [least](const range& x, const range& y) {
            return least ? range{std::min(x.low, y.low), std::min(x.high, y.high)} : range{std::max(x.low, y.low), std::max(x.high, y.high)};
        });
    }
    if (e.word == "abs") {
        return each(a, e.dim, magnitude_of);
    }
    if (e.word == "sqrt") {
        return each(a, e.dim, [](const range& x) { return range{std::sqrt(std::max(x.low, 0.0)), std::sqrt(std::max(x.high, 0.0))}; });
    }
    if (e.word == "ln") {
        return each(a, e.dim, [](const range& x) {
            return range{x.low > 0.0 ? std::log(x.low) : -unbounded, x.high > 0.0 ? std::log(x.high) : -unbounded};
        });
    }
    return each(a, e.dim, [](const range& x) { return range{std::exp(x.low), std::exp(x.high)}; });
}

value of_number(const expression& e, const surroundings& s)
{
    const value a = evaluate(e.parts[0], s);
    if (e.is == op::negate) {
        return each(a, e.dim, negate);
    }
    const value b = evaluate(e.parts[1], s);
    switch (e.is) {
    case op::add:
        return combine(a, b, e.dim, add);
    case op::subtract:
        return combine(a, b, e.dim, [](const range& x, const range& y) { return add(x, negate(y)); });
    case op::multiply:
        return combine(a, b, e.dim, multiply);
    case op::divide:
        return combine(a, b, e.dim, divide);
    default: {
        const int n = static_cast<int>(e.parts[1].constant.si);
        return each(a, e.dim, [n](const range& x) { return raised(x, n); });
    }
    }
}

/// One comparison over one range: true everywhere, false everywhere, a known point false.
struct compared {
    bool always = true;
    bool never = true;
    bool breached = false;
};

/// a <= b (or <) over two ranges; an infinite end is not known, so it breaches nothing.
compared below(const range& a, const range& b, bool strict)
{
    const auto holds = [strict](double x, double y) { return strict ? x < y : x <= y; };
    compared c;
    c.always = holds(a.high, b.low) && a.high < unbounded && b.low > -unbounded;
    c.never = !holds(a.low, b.high) && a.low > -unbounded && b.high < unbounded;
    // A point false: the greatest known of the left against the least known of the right.
    const double x = a.high < unbounded ? a.high : a.low;
    const double y = b.low > -unbounded ? b.low : b.high;
    c.breached = c.never || (std::isfinite(x) && std::isfinite(y) && !holds(x, y));
    return c;
}

compared same(const range& a, const range& b)
{
    compared c;
    c.always = a.low == a.high && b.low == b.high && a.low == b.low;
    c.never = a.high < b.low || b.high < a.low;
    c.breached = !c.always;
    return c;
}

compared compare(op is, const range& a, const range& b)
{
    switch (is) {
    case op::less:
        return below(a, b, true);
    case op::less_equal:
        return below(a, b, false);
    case op::greater:
        return below(b, a, true);
    case op::greater_equal:
        return below(b, a, false);
    default:
        return same(a, b);
    }
}

/// A time that never comes is longer than anything.
truth_outcome of_never(const expression& e, const value& a, const value& b)
{
    const bool left = a.never;
    const bool holds = left ? e.is == op::greater || e.is == op::greater_equal : e.is == op::less || e.is == op::less_equal;
    truth_outcome t;
    t.in_use = t.whole = holds ? tri::yes : tri::no;
    t.certain_fail = t.breached = t.breached_in_use = !holds;
    add_once(t.assumed, a.assumed);
    add_once(t.assumed, b.assumed);
    return t;
}

truth_outcome of_comparison(const expression& e, const surroundings& s)
{
    const value a = evaluate(e.parts[0], s);
    const value b = evaluate(e.parts[1], s);
    if (a.never || b.never) {
        return of_never(e, a, b);
    }
    truth_outcome t;
    add_once(t.missing, a.missing);
    add_once(t.missing, b.missing);
    add_once(t.assumed, a.assumed);
    add_once(t.assumed, b.assumed);
    const bool several = a.numbers.size() * b.numbers.size() > 1;
    bool all_yes = true;
    bool all_yes_in_use = true;
    bool all_breached = true;
    bool all_breached_in_use = true;
    bool all_never = true;
    bool any = false;
    for (const spread& x : a.numbers) {
        for (const spread& y : b.numbers) {
            const compared whole = compare(e.is, x.whole, y.whole);
            const compared use = compare(e.is, x.in_use, y.in_use);
            any = true;
            all_yes &= whole.always;
            all_yes_in_use &= use.always;
            all_breached &= whole.breached;
            all_breached_in_use &= use.breached;
            all_never &= whole.never;
        }
    }
    if (!any) {
        return t;
    }
    t.whole = all_yes ? tri::yes : all_never ? tri::no : tri::unknown;
    t.in_use = all_yes_in_use ? tri::yes : all_never ? tri::no : tri::unknown;
    t.certain_fail = all_never;
    t.breached = all_breached;
    t.breached_in_use = all_breached_in_use;
    // Every published value of an unknown choice agrees: the choice need not be known.
    if (several && (all_yes || all_breached_in_use)) {
        const auto only_choice = [](const value& v) { return v.numbers.size() <= 1 || v.missing.size() <= 1; };
        if (only_choice(a) && only_choice(b)) {
            t.missing.clear();
            for (const value* v : {&a, &b}) {
                if (v->numbers.size() <= 1) {
                    add_once(t.missing, v->missing);
                }
            }
        }
    }
    return t;
}

truth_outcome of_choice_equality(const expression& e, const surroundings& s)
{
    const value a = evaluate(e.parts[0], s);
    const value b = evaluate(e.parts[1], s);
    truth_outcome t;
    add_once(t.missing, a.missing);
    add_once(t.missing, b.missing);
    const bool known = a.holds == type::truth ? a.truth && b.truth : !a.choice.empty() && !b.choice.empty();
    if (known) {
        const bool equal = a.holds == type::truth ? *a.truth == *b.truth : a.choice == b.choice;
        t.in_use = t.whole = equal ? tri::yes : tri::no;
        t.certain_fail = t.breached = t.breached_in_use = !equal;
    }
    return t;
}

truth_outcome join(const truth_outcome& a, const truth_outcome& b, bool conjunction)
{
    truth_outcome t;
    t.in_use = conjunction ? both(a.in_use, b.in_use) : either(a.in_use, b.in_use);
    t.whole = conjunction ? both(a.whole, b.whole) : either(a.whole, b.whole);
    t.certain_fail = conjunction ? a.certain_fail || b.certain_fail : a.certain_fail && b.certain_fail;
    t.breached = conjunction ? a.breached || b.breached : a.breached && b.breached;
    t.breached_in_use = conjunction ? a.breached_in_use || b.breached_in_use : a.breached_in_use && b.breached_in_use;
    // What one side decides alone, the other's gaps cannot change.
    const bool decided_a = conjunction ? a.whole == tri::no : a.whole == tri::yes && a.missing.empty();
    const bool decided_b = conjunction ? b.whole == tri::no : b.whole == tri::yes && b.missing.empty();
    for (const truth_outcome* side : {&a, &b}) {
        const bool skipped = side == &a ? decided_b && !decided_a : decided_a && !decided_b;
        if (!skipped) {
            add_once(t.missing, side->missing);
            add_once(t.assumed, side->assumed);
        }
    }
    return t;
}

} // namespace

tri both(tri a, tri b)
{
    return a == tri::no || b == tri::no ? tri::no : a == tri::yes && b == tri::yes ? tri::yes : tri::unknown;
}

tri either(tri a, tri b)
{
    return a == tri::yes || b == tri::yes ? tri::yes : a == tri::no && b == tri::no ? tri::no : tri::unknown;
}

tri turned(tri a)
{
    return a == tri::yes ? tri::no : a == tri::no ? tri::yes : tri::unknown;
}

value evaluate(const expression& e, const surroundings& s)
{
    switch (e.is) {
    case op::constant:
        return number(exactly(e.constant));
    case op::choice:
        return choice_of(e.word);
    case op::name:
        return of_name(e, s);
    case op::call:
        return of_call(e, s);
    case op::negate:
    case op::add:
    case op::subtract:
    case op::multiply:
    case op::divide:
    case op::power:
        return of_number(e, s);
    default:
        break;
    }
    const truth_outcome t = judge_truth(e, s);
    value v;
    v.holds = type::truth;
    if (t.whole != tri::unknown && t.missing.empty()) {
        v.truth = t.whole == tri::yes;
    }
    v.missing = t.missing;
    v.assumed = t.assumed;
    return v;
}

truth_outcome judge_truth(const expression& e, const surroundings& s)
{
    switch (e.is) {
    case op::less:
    case op::less_equal:
    case op::greater:
    case op::greater_equal:
        return of_comparison(e, s);
    case op::equal:
        return e.parts[0].type == type::number ? of_comparison(e, s) : of_choice_equality(e, s);
    case op::logic_and:
        return join(judge_truth(e.parts[0], s), judge_truth(e.parts[1], s), true);
    case op::logic_or:
        return join(judge_truth(e.parts[0], s), judge_truth(e.parts[1], s), false);
    case op::logic_not: {
        truth_outcome t = judge_truth(e.parts[0], s);
        const truth_outcome was = t;
        t.in_use = turned(was.in_use);
        t.whole = turned(was.whole);
        t.certain_fail = was.whole == tri::yes;
        t.breached = was.whole != tri::no;
        t.breached_in_use = was.in_use != tri::no;
        return t;
    }
    default:
        break;
    }
    const value v = evaluate(e, s);
    truth_outcome t;
    t.missing = v.missing;
    t.assumed = v.assumed;
    if (v.truth) {
        t.in_use = t.whole = *v.truth ? tri::yes : tri::no;
        t.certain_fail = t.breached = t.breached_in_use = !*v.truth;
    }
    return t;
}

} // namespace onehand
