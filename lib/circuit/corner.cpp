#include "circuit/corner.hpp"

#include <Eigen/Dense>
#include <algorithm>
#include <array>
#include <cmath>
#include <limits>

namespace onehand::circuit {

namespace {

constexpr double closed_ohms = 1e-6; // a closed alternative
constexpr std::array<double, 3> places{0.25, 0.5, 0.75};

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

/// The linear system of one corner at one wiper position.
class system {
public:
    system(const component_plan& p, const choice& chosen, double place) : p_(p), chosen_(chosen), place_(place) { build(); }

    bool floating(int cluster) const { return floats_[at(cluster)]; }
    int island(int cluster) const { return floats_[at(cluster)] ? island_[at(cluster)] : -1; }
    double weight() const { return lu_.determinant(); }

    std::vector<double> node(int cluster) const
    {
        std::vector<double> form(at(p_.columns), 0.0);
        if (const auto& held = p_.red->potential[at(cluster)]) {
            std::copy(held->begin(), held->end(), form.begin());
        } else {
            const int row = row_of_[at(cluster)];
            for (int c = 0; c < p_.columns; ++c) {
                form[at(c)] = x_(row, c);
            }
        }
        return form;
    }

    std::vector<double> difference(int a, int b) const
    {
        std::vector<double> form = node(a);
        const std::vector<double> other = node(b);
        for (std::size_t i = 0; i < form.size(); ++i) {
            form[i] -= other[i];
        }
        return form;
    }

    /// Current from -> to of a branch as a form.
    std::vector<double> through(int position) const
    {
        const branch& b = p_.net->branches[at(p_.part->branches[at(position)])];
        std::vector<double> told(at(p_.columns), 0.0);
        switch (state(at(position)).is) {
        case form::resistance:
            told = difference(cluster(b.from), cluster(b.to));
            for (double& c : told) {
                c /= state(at(position)).ohms;
            }
            break;
        case form::current:
            told[p_.red->sources.size() + at(position)] = 1.0;
            break;
        case form::clamp:
        case form::fixed:
        case form::closed:
            for (int c = 0; c < p_.columns; ++c) {
                told[at(c)] = x_(extra_of_[at(position)], c);
            }
            break;
        default:
            break;
        }
        return told;
    }

    int cluster(int net_node) const { return p_.red->cluster_of[at(net_node)]; }

    double section_ohms(int position, bool first) const
    {
        const double share = place_of(position);
        const double ohms = p_.track_ohms[at(position)][at(chosen_[p_.states.size() + at(position)])];
        return usable(ohms * (first ? share : 1.0 - share));
    }

private:
    double place_of(int position) const
    {
        if (position == 0) {
            return place_;
        }
        const std::size_t digit = p_.states.size() + p_.track_ohms.size() + at(position - 1);
        return p_.track_places[at(position - 1)][at(chosen_[digit])];
    }

    const branch_state& state(std::size_t i) const { return p_.states[i][at(chosen_[i])]; }

    void build()
    {
        find_floating();
        number_islands();
        row_of_.assign(at(p_.red->clusters), -1);
        int rows = 0;
        for (const int c : p_.part->clusters) {
            row_of_[at(c)] = rows++;
        }
        const int nodes = rows;
        for (std::size_t i = 0; i < p_.states.size(); ++i) {
            rows += state(i).is == form::clamp || state(i).is == form::closed || state(i).is == form::fixed ? 1 : 0;
        }
        a_ = Eigen::MatrixXd::Zero(rows, rows);
        b_ = Eigen::MatrixXd::Zero(rows, p_.columns);
        int extra = nodes;
        extra_of_.assign(p_.states.size(), -1);
        for (std::size_t i = 0; i < p_.states.size(); ++i) {
            extra = stamp(i, extra);
        }
        for (std::size_t i = 0; i < p_.part->tracks.size(); ++i) {
            const track& t = p_.net->tracks[at(p_.part->tracks[i])];
            conductance(cluster(t.end_1), cluster(t.wiper), 1.0 / section_ohms(static_cast<int>(i), true));
            conductance(cluster(t.wiper), cluster(t.end_2), 1.0 / section_ohms(static_cast<int>(i), false));
        }
        if (p_.part->has_sense) {
            inject(cluster(p_.net->held->sense), p_.threshold_column + 1, -1.0);
        }
        for (const int c : p_.part->clusters) {
            if (floats_[at(c)] && island_[at(c)] == c) {
                a_(row_of_[at(c)], row_of_[at(c)]) +=
                    1.0; // an island is tied down at one node: no current flows there, its inner differences are true
            }
        }
        if (rows > 0) {
            lu_.compute(a_);
            x_ = lu_.solve(b_);
        }
    }

    int stamp(std::size_t i, int extra)
    {
        const int index = p_.part->branches[i];
        const branch& b = p_.net->branches[at(index)];
        const int from = cluster(b.from);
        const int to = cluster(b.to);
        const int column = static_cast<int>(p_.red->sources.size() + i);
        switch (state(i).is) {
        case form::resistance:
            conductance(from, to, 1.0 / state(i).ohms);
            return extra;
        case form::current:
            inject(from, column, -1.0);
            inject(to, column, 1.0);
            return extra;
        case form::clamp:
        case form::fixed:
        case form::closed:
            extra_of_[i] = extra;
            tie(from, to, extra, state(i).is == form::closed ? -1 : column);
            return extra + 1;
        default:
            return extra;
        }
    }

    void conductance(int a, int b, double g)
    {
        for (const auto& [here, there] : {std::pair(a, b), std::pair(b, a)}) {
            const int row = row_of_[at(here)];
            if (row < 0) {
                continue;
            }
            a_(row, row) += g;
            if (row_of_[at(there)] >= 0) {
                a_(row, row_of_[at(there)]) -= g;
            } else {
                add_potential(row, there, g);
            }
        }
    }

    void add_potential(int row, int cluster_held, double factor)
    {
        const combination& held = *p_.red->potential[at(cluster_held)];
        for (std::size_t c = 0; c < held.size(); ++c) {
            b_(row, static_cast<Eigen::Index>(c)) += factor * held[c];
        }
    }

    void inject(int cluster_in, int column, double amount)
    {
        if (const int row = row_of_[at(cluster_in)]; row >= 0) {
            b_(row, column) += amount;
        }
    }

    /// va - vb - r i = e with a small r, so that parallel ties stay solvable.
    void tie(int a, int b, int extra, int column)
    {
        const double r = closed_ohms;
        for (const auto& [node, sign] : {std::pair(a, 1.0), std::pair(b, -1.0)}) {
            if (const int row = row_of_[at(node)]; row >= 0) {
                a_(row, extra) += sign;
                a_(extra, row) += sign;
            } else {
                add_potential(extra, node, -sign);
            }
        }
        a_(extra, extra) = -r;
        if (column >= 0) {
            b_(extra, column) += 1.0;
        }
    }

    void find_floating()
    {
        floats_.assign(at(p_.red->clusters), true);
        for (int c = 0; c < p_.red->clusters; ++c) {
            floats_[at(c)] = !p_.red->potential[at(c)];
        }
        const auto spread_over = [&](int a, int b, bool& grew) {
            if (floats_[at(a)] != floats_[at(b)]) {
                floats_[at(a)] = floats_[at(b)] = false;
                grew = true;
            }
        };
        for (bool grew = true; grew;) {
            grew = false;
            for (std::size_t i = 0; i < p_.states.size(); ++i) {
                const branch& b = p_.net->branches[at(p_.part->branches[i])];
                const form is = state(i).is;
                const bool open_end = is == form::resistance && state(i).ohms >= most_ohms;
                if (is != form::open && is != form::current && !open_end) {
                    spread_over(cluster(b.from), cluster(b.to), grew);
                }
            }
            for (const int t : p_.part->tracks) {
                spread_over(cluster(p_.net->tracks[at(t)].end_1), cluster(p_.net->tracks[at(t)].wiper), grew);
                spread_over(cluster(p_.net->tracks[at(t)].wiper), cluster(p_.net->tracks[at(t)].end_2), grew);
            }
        }
    }

    /// Nodes that float as one share the number of their first.
    void number_islands()
    {
        island_.resize(floats_.size());
        for (std::size_t c = 0; c < island_.size(); ++c) {
            island_[c] = static_cast<int>(c);
        }
        const auto join = [&](int a, int b) {
            if (!floats_[at(a)] || !floats_[at(b)]) {
                return false;
            }
            const int low = std::min(island_[at(a)], island_[at(b)]);
            const bool grew = island_[at(a)] != low || island_[at(b)] != low;
            island_[at(a)] = island_[at(b)] = low;
            return grew;
        };
        for (bool grew = true; grew;) {
            grew = false;
            for (std::size_t i = 0; i < p_.states.size(); ++i) {
                const branch& b = p_.net->branches[at(p_.part->branches[i])];
                const form is = state(i).is;
                if (is != form::open && is != form::current && !(is == form::resistance && state(i).ohms >= most_ohms)) {
                    grew = join(cluster(b.from), cluster(b.to)) || grew;
                }
            }
            for (const int t : p_.part->tracks) {
                const track& k = p_.net->tracks[at(t)];
                grew = join(cluster(k.end_1), cluster(k.wiper)) || grew;
                grew = join(cluster(k.wiper), cluster(k.end_2)) || grew;
            }
        }
    }

    const component_plan& p_;
    const choice& chosen_;
    double place_;
    std::vector<int> row_of_;
    std::vector<int> extra_of_; // per branch: row of its own current
    std::vector<bool> floats_;
    std::vector<int> island_; // per cluster, of those that float
    Eigen::MatrixXd a_, b_, x_;
    Eigen::PartialPivLU<Eigen::MatrixXd> lu_;
};

/// The form of a figure before the output's own column is resolved; empty if it floats or its branch has no voltage to tell.
std::vector<double> raw_form(const component_plan& p, const system& s, const component_plan::figure& f)
{
    using of = component_plan::figure::of;
    const auto between = [&](int a, int b) { return s.island(a) != s.island(b) ? std::vector<double>{} : s.difference(a, b); };
    switch (f.what) {
    case of::node:
        return s.floating(f.a) ? std::vector<double>{} : s.node(f.a);
    case of::pair:
        return between(f.a, f.b);
    case of::across: {
        const branch& b = p.net->branches[at(p.part->branches[at(f.a)])];
        return between(s.cluster(b.from), s.cluster(b.to));
    }
    case of::through: {
        const branch& b = p.net->branches[at(p.part->branches[at(f.a)])];
        return s.island(s.cluster(b.from)) != s.island(s.cluster(b.to)) ? std::vector<double>{} : s.through(f.a);
    }
    default:
        break;
    }
    const track& t = p.net->tracks[at(p.part->tracks[at(f.a)])];
    const bool first = f.what == of::section_1;
    std::vector<double> form = first ? between(s.cluster(t.end_1), s.cluster(t.wiper)) : between(s.cluster(t.wiper), s.cluster(t.end_2));
    for (double& c : form) {
        c /= s.section_ohms(f.a, first);
    }
    return form;
}

/// Puts the output as a form of threshold and the other sources into the figures: V = (threshold - rest)/share.
bool resolve_output(const component_plan& p, const system& s, corner_sample& sample)
{
    const held_output& held = *p.net->held;
    const std::vector<double> sense = s.difference(s.cluster(held.sense), s.cluster(held.reference));
    const std::size_t column = at(p.red->output_column);
    const double share = sense[column];
    if (!(std::abs(share) > 1e-12)) {
        return false;
    }
    sample.weight *= share;
    sample.output.assign(at(p.columns), 0.0);
    for (std::size_t c = 0; c < sense.size(); ++c) {
        sample.output[c] = c == column ? 0.0 : -sense[c] / share;
    }
    sample.output[at(p.threshold_column)] += 1.0 / share;
    for (std::vector<double>& form : sample.form) {
        if (form.empty()) {
            continue;
        }
        const double by_output = form[column];
        form[column] = 0.0;
        for (std::size_t c = 0; c < form.size(); ++c) {
            form[c] += by_output * sample.output[c];
        }
    }
    return true;
}

} // namespace

corner solve_corner(const component_plan& p, const choice& chosen)
{
    corner out;
    const bool tracked = !p.part->tracks.empty();
    for (std::size_t i = 0; i < (tracked ? places.size() : 1U); ++i) {
        const system s(p, chosen, places[i]);
        corner_sample sample;
        sample.weight = p.part->clusters.empty() ? 1.0 : s.weight();
        sample.weight *= tracked ? places[i] * (1.0 - places[i]) : 1.0;
        for (const auto& f : p.figures) {
            sample.form.push_back(raw_form(p, s, f));
        }
        if (p.part->has_sense && !resolve_output(p, s, sample)) {
            out.lost = true;
        }
        if (i == 0) {
            for (const int c : p.part->clusters) {
                out.floating.push_back(s.floating(c));
                out.island.push_back(s.island(c));
            }
        }
        out.samples.push_back(std::move(sample));
    }
    return out;
}

travel_form::travel_form(const std::vector<corner_sample>& samples, const std::vector<const std::vector<double>*>& forms,
                         const std::vector<double>& columns)
{
    std::array<double, 3> value{};
    for (std::size_t i = 0; i < samples.size(); ++i) {
        for (std::size_t c = 0; c < columns.size(); ++c) {
            value[i] += (*forms[i])[c] * columns[c];
        }
    }
    if (samples.size() == 1) {
        numerator_ = {value[0], 0.0, 0.0};
        return;
    }
    const auto quadratic = [](double y0, double y1, double y2) {
        // through (1/4, y0), (1/2, y1), (3/4, y2), Lagrange
        const double c2 = 8.0 * (y0 - 2.0 * y1 + y2);
        const double c1 = 2.0 * (y2 - y0) - c2;
        return std::array<double, 3>{y1 - 0.5 * c1 - 0.25 * c2, c1, c2};
    };
    const double scale = 1.0 / samples[1].weight;
    denominator_ = quadratic(samples[0].weight * scale, 1.0, samples[2].weight * scale);
    numerator_ = quadratic(value[0] * samples[0].weight * scale, value[1], value[2] * samples[2].weight * scale);
    moves_ = true;
}

double travel_form::at(double place) const
{
    const auto eval = [place](const std::array<double, 3>& q) { return q[0] + place * (q[1] + place * q[2]); };
    const double below = eval(denominator_);
    // At a pole the figure has no bound; the caller is told of the pole apart.
    return below == 0.0 ? std::copysign(std::numeric_limits<double>::infinity(), eval(numerator_)) : eval(numerator_) / below;
}

travel_extreme travel_form::over(double from, double to) const
{
    if (!moves_) {
        return {numerator_[0], numerator_[0], from, from, false};
    }
    const auto& n = numerator_;
    const auto& d = denominator_;
    std::array<double, 4> candidates{from, to, from, from};
    std::size_t count = 2;
    // N'D = N D'
    const double a = n[2] * d[1] - n[1] * d[2];
    const double b = 2.0 * (n[2] * d[0] - n[0] * d[2]);
    const double c = n[1] * d[0] - n[0] * d[1];
    const double disc = b * b - 4.0 * a * c;
    if (disc >= 0.0) {
        const double q = -0.5 * (b + std::copysign(std::sqrt(disc), b));
        for (const double x : {a != 0.0 ? q / a : from, q != 0.0 ? c / q : from}) {
            if (x > from && x < to) {
                candidates[count++] = x;
            }
        }
    }
    travel_extreme out{std::numeric_limits<double>::infinity(), -std::numeric_limits<double>::infinity(), from, from, false};
    // A root of the denominator inside the travel is a pole: for the held output, feedback lost.
    const auto below = [&d](double x) { return d[0] + x * (d[1] + x * d[2]); };
    const double turn = d[2] != 0.0 ? -0.5 * d[1] / d[2] : from;
    const double d_turn = turn > from && turn < to ? below(turn) : below(from);
    out.pole = std::min({below(from), below(to), d_turn}) <= 1e-12;
    for (std::size_t i = 0; i < count; ++i) {
        const double y = at(candidates[i]);
        if (y < out.low) {
            out.low = y;
            out.at_low = candidates[i];
        }
        if (y > out.high) {
            out.high = y;
            out.at_high = candidates[i];
        }
    }
    return out;
}

} // namespace onehand::circuit
