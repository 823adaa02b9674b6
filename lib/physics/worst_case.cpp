#include "physics/worst_case.hpp"

#include <limits>
#include <queue>

namespace onehand::physics {

namespace {

constexpr double infinite = std::numeric_limits<double>::infinity();
constexpr int most_boxes = 300;    // beyond them the bound stands as it is: farther from what is taken, never short of it
constexpr double rounding = 1e-12; // more than an interval without directed rounding can lose

struct cell {
    std::vector<interval> at;
    double bound = 0.0;

    bool operator<(const cell& o) const { return bound < o.bound; }
};

/// One end of the form: the greatest of `sign` times it.
class search {
public:
    search(const on_intervals& form, double sign, double closeness) : form_(form), sign_(sign), closeness_(closeness) {}

    double run(std::vector<interval> box)
    {
        try_corner(box);
        push(std::move(box));
        for (int i = 0; i < most_boxes && !todo_.empty(); ++i) {
            const cell top = todo_.top();
            if (top.bound <= best_ + closeness_ * std::max(std::abs(best_), 1e-30)) {
                break;
            }
            todo_.pop();
            split(top);
        }
        return todo_.empty() ? best_ : std::max(best_, todo_.top().bound);
    }

private:
    double upper(const std::vector<interval>& at) const
    {
        const interval v = form_(at);
        const double high = sign_ > 0.0 ? v.upper() : -v.lower();
        if (std::isnan(high)) {
            return infinite;
        }
        return high;
    }

    double taken(const std::vector<interval>& point) const
    {
        const interval v = form_(point);
        const double low = sign_ > 0.0 ? v.lower() : -v.upper();
        return std::isnan(low) ? -infinite : low;
    }

    /// The corner that one side after the other leads to: the right one at once where the form is monotone.
    void try_corner(const std::vector<interval>& box)
    {
        std::vector<interval> point;
        for (const interval& x : box) {
            point.emplace_back(middle(x));
        }
        for (int pass = 0; pass < 2; ++pass) {
            for (std::size_t i = 0; i < box.size(); ++i) {
                point[i] = interval(box[i].lower());
                const double at_low = taken(point);
                point[i] = interval(box[i].upper());
                const double at_high = taken(point);
                point[i] = interval(at_low > at_high ? box[i].lower() : box[i].upper());
                best_ = std::max({best_, at_low, at_high});
            }
        }
    }

    void push(std::vector<interval> at)
    {
        const double bound = upper(at);
        // A value that is taken: at the corner or the middle that the box has.
        for (const int where : {0, 1, 2}) {
            std::vector<interval> point;
            for (const interval& x : at) {
                const double p = where == 0 ? x.lower() : where == 1 ? x.upper() : middle(x);
                point.emplace_back(p);
            }
            best_ = std::max(best_, taken(point));
        }
        todo_.push({std::move(at), bound});
    }

    static double middle(const interval& x)
    {
        if (std::isfinite(x.lower()) && std::isfinite(x.upper())) {
            return 0.5 * (x.lower() + x.upper());
        }
        return std::isfinite(x.lower()) ? 2.0 * std::abs(x.lower()) + 1.0 : std::isfinite(x.upper()) ? -2.0 * std::abs(x.upper()) - 1.0 : 0.0;
    }

    /// Along the side whose halves narrow the form most.
    void split(const cell& c)
    {
        std::size_t side = c.at.size();
        double least_sum = infinite;
        for (std::size_t i = 0; i < c.at.size(); ++i) {
            if (!(c.at[i].lower() < c.at[i].upper())) {
                continue;
            }
            std::vector<interval> half = c.at;
            half[i] = {c.at[i].lower(), middle(c.at[i])};
            const double a = upper(half);
            half[i] = {middle(c.at[i]), c.at[i].upper()};
            const double sum = std::max(a, upper(half)) + 1e-3 * std::min(a, upper(half));
            if (side == c.at.size() || sum < least_sum) {
                least_sum = sum;
                side = i;
            }
        }
        if (side == c.at.size()) {
            best_ = std::max(best_, c.bound); // a point: nothing to split
            return;
        }
        std::vector<interval> half = c.at;
        half[side] = {c.at[side].lower(), middle(c.at[side])};
        push(half);
        half[side] = {middle(c.at[side]), c.at[side].upper()};
        push(std::move(half));
    }

    const on_intervals& form_;
    double sign_;
    double closeness_;
    double best_ = -infinite;
    std::priority_queue<cell> todo_;
};

double widened(double x, double by)
{
    return std::isfinite(x) ? x + by * std::abs(x) : x;
}

} // namespace

span_of extremes(const on_intervals& form, const std::vector<span_of>& box, double closeness)
{
    std::vector<interval> whole;
    bool point = true;
    for (const span_of& s : box) {
        whole.emplace_back(s.low, s.high);
        point = point && s.low == s.high;
    }
    if (point) {
        const interval v = form(whole);
        return {v.lower(), v.upper()};
    }
    const double high = search(form, 1.0, closeness).run(whole);
    const double low = -search(form, -1.0, closeness).run(whole);
    return {widened(low, -rounding), widened(high, rounding)};
}

} // namespace onehand::physics
