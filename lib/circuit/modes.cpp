#include "circuit/modes.hpp"

#include <Eigen/Dense>
#include <algorithm>
#include <cmath>
#include <limits>
#include <numeric>

namespace onehand::circuit {

namespace {

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

class union_find {
public:
    explicit union_find(int count) : parent_(at(count)) { std::iota(parent_.begin(), parent_.end(), 0); }
    int root(int i)
    {
        while (parent_[at(i)] != i) {
            i = parent_[at(i)];
        }
        return i;
    }
    void join(int a, int b) { parent_[at(root(b))] = root(a); }

private:
    std::vector<int> parent_;
};

bool present(double ohms)
{
    return std::isfinite(ohms);
}

constexpr double least_ohms = 1e-6;

/// Matrices over the island's nodes, the reference node left out.
struct matrices {
    Eigen::MatrixXd incidence_r; // nodes x resistances, scaled by sqrt(g)
    Eigen::MatrixXd incidence_c; // nodes x capacitors
    Eigen::VectorXd farads;
    std::vector<int> row_of; // -1: reference or not in the island
    int zero_modes = 0;
};

matrices build(const rc_network& n, const rc_point& p, int reference)
{
    matrices m;
    union_find by_r(n.nodes);
    std::vector<bool> used(at(n.nodes), false);
    for (std::size_t i = 0; i < n.resistances.size(); ++i) {
        if (present(p.ohms[i])) {
            by_r.join(n.resistances[i].a, n.resistances[i].b);
        }
        used[at(n.resistances[i].a)] = used[at(n.resistances[i].b)] = true;
    }
    union_find by_all = by_r;
    for (const rc_capacitor& c : n.capacitors) {
        by_all.join(c.plus, c.minus);
        used[at(c.plus)] = used[at(c.minus)] = true;
    }
    used[at(reference)] = true;
    m.row_of.assign(at(n.nodes), -1);
    int rows = 0;
    std::vector<int> roots_r;
    std::vector<int> roots_all;
    for (int i = 0; i < n.nodes; ++i) {
        if (!used[at(i)]) {
            continue;
        }
        roots_r.push_back(by_r.root(i));
        roots_all.push_back(by_all.root(i));
        if (i != reference) {
            m.row_of[at(i)] = rows++;
        }
    }
    for (auto* roots : {&roots_r, &roots_all}) {
        std::sort(roots->begin(), roots->end());
        roots->erase(std::unique(roots->begin(), roots->end()), roots->end());
    }
    // Groups that resistances join, less groups that anything joins: so many combinations of charge have nowhere to go.
    m.zero_modes = static_cast<int>(roots_r.size()) - static_cast<int>(roots_all.size());
    // At least as many columns as nodes, so that the singular vectors span all modes even with few resistances.
    m.incidence_r = Eigen::MatrixXd::Zero(rows, std::max<Eigen::Index>(rows, static_cast<Eigen::Index>(n.resistances.size())));
    m.incidence_c = Eigen::MatrixXd::Zero(rows, static_cast<Eigen::Index>(n.capacitors.size()));
    m.farads.resize(static_cast<Eigen::Index>(n.capacitors.size()));
    const auto stamp = [&](Eigen::MatrixXd& to, std::size_t column, int plus, int minus, double weight) {
        if (m.row_of[at(plus)] >= 0) {
            to(m.row_of[at(plus)], static_cast<Eigen::Index>(column)) += weight;
        }
        if (m.row_of[at(minus)] >= 0) {
            to(m.row_of[at(minus)], static_cast<Eigen::Index>(column)) -= weight;
        }
    };
    for (std::size_t i = 0; i < n.resistances.size(); ++i) {
        if (present(p.ohms[i])) {
            stamp(m.incidence_r, i, n.resistances[i].a, n.resistances[i].b, std::sqrt(1.0 / std::max(p.ohms[i], least_ohms)));
        }
    }
    for (std::size_t i = 0; i < n.capacitors.size(); ++i) {
        stamp(m.incidence_c, i, n.capacitors[i].plus, n.capacitors[i].minus, 1.0);
        m.farads(static_cast<Eigen::Index>(i)) = p.farads[i];
    }
    return m;
}

bool tied(const rc_network& n, const rc_point& p, int a, int b)
{
    union_find joined(n.nodes);
    for (std::size_t i = 0; i < n.resistances.size(); ++i) {
        if (present(p.ohms[i])) {
            joined.join(n.resistances[i].a, n.resistances[i].b);
        }
    }
    for (const rc_capacitor& c : n.capacitors) {
        joined.join(c.plus, c.minus);
    }
    return joined.root(a) == joined.root(b);
}

} // namespace

rc_modes modes_of(const rc_network& n, const rc_point& p, int a, int b)
{
    rc_modes out;
    if (a == b) {
        return out;
    }
    if (!tied(n, p, a, b)) {
        out.floating = true;
        return out;
    }
    const matrices m = build(n, p, b);
    const Eigen::Index rows = m.incidence_c.rows();
    // C = Q diag(c) Q^T; columns of c = 0 carry no charge and follow the rest at once.
    const Eigen::MatrixXd cap = m.incidence_c * m.farads.asDiagonal() * m.incidence_c.transpose();
    const Eigen::SelfAdjointEigenSolver<Eigen::MatrixXd> by_c(cap);
    const double largest = rows > 0 ? by_c.eigenvalues()(rows - 1) : 0.0;
    if (!(largest > 0.0)) {
        return out; // nothing stored: nothing there
    }
    Eigen::Index empty = 0;
    while (empty < rows && by_c.eigenvalues()(empty) < 1e-13 * largest) {
        ++empty;
    }
    const Eigen::MatrixXd q0 = by_c.eigenvectors().leftCols(empty);
    const Eigen::MatrixXd q1 = by_c.eigenvectors().rightCols(rows - empty);
    const Eigen::VectorXd root_c = by_c.eigenvalues().tail(rows - empty).cwiseSqrt();
    const Eigen::MatrixXd half_g = m.incidence_r.transpose(); // sqrt(g) A^T
    Eigen::MatrixXd carry = q1;
    if (empty > 0) {
        const Eigen::MatrixXd lone = half_g * q0;
        carry -= q0 * lone.completeOrthogonalDecomposition().solve(half_g * q1);
    }
    const Eigen::MatrixXd one_sided = half_g * carry * root_c.cwiseInverse().asDiagonal();
    const Eigen::JacobiSVD<Eigen::MatrixXd> svd(one_sided, Eigen::ComputeFullV);
    const Eigen::Index modes = rows - empty;
    const Eigen::MatrixXd v = svd.matrixV();
    // z(0) = c^-1/2 Q1^T q with the charges q = A_c C u put on the nodes.
    const Eigen::MatrixXd start = root_c.cwiseInverse().asDiagonal() * q1.transpose() * m.incidence_c * m.farads.asDiagonal();
    const Eigen::RowVectorXd read = (carry * root_c.cwiseInverse().asDiagonal()).row(m.row_of[at(a)]);
    for (Eigen::Index k = 0; k < modes; ++k) {
        const double sigma = k < svd.singularValues().size() ? svd.singularValues()(k) : 0.0;
        const bool kept = k >= modes - m.zero_modes;
        out.rate.push_back(kept ? 0.0 : sigma * sigma);
        const double reading = read * v.col(k);
        const Eigen::RowVectorXd by_capacitor = reading * (v.col(k).transpose() * start);
        out.share.emplace_back(by_capacitor.data(), by_capacitor.data() + by_capacitor.size());
    }
    return out;
}

double rc_modes::envelope(const std::vector<rc_capacitor>& capacitors, double seconds) const
{
    double high = 0.0;
    double low = 0.0;
    for (std::size_t c = 0; c < capacitors.size(); ++c) {
        double factor = 0.0;
        for (std::size_t k = 0; k < rate.size(); ++k) {
            const double left = rate[k] == 0.0 ? 1.0 : std::isinf(seconds) ? 0.0 : std::exp(-rate[k] * seconds);
            factor += share[k][c] * left;
        }
        const double x = factor * capacitors[c].volts.low;
        const double y = factor * capacitors[c].volts.high;
        high += std::max(x, y);
        low += std::min(x, y);
    }
    return std::max(std::abs(high), std::abs(low));
}

namespace {

/// Nodes that can be reached from `start` without passing `cut`, over all elements and a link from a to b.
std::vector<bool> reached(const rc_network& n, int a, int b, int start, int cut)
{
    std::vector<bool> seen(at(n.nodes), false);
    std::vector<int> todo{start};
    seen[at(start)] = true;
    const auto link = [&](int x, int y, int here) {
        for (const auto& [from, to] : {std::pair(x, y), std::pair(y, x)}) {
            if (from == here && to != cut && !seen[at(to)]) {
                seen[at(to)] = true;
                todo.push_back(to);
            }
        }
    };
    while (!todo.empty()) {
        const int here = todo.back();
        todo.pop_back();
        link(a, b, here);
        for (const rc_resistance& r : n.resistances) {
            link(r.a, r.b, here);
        }
        for (const rc_capacitor& c : n.capacitors) {
            link(c.plus, c.minus, here);
        }
    }
    return seen;
}

box sum_of(const box& x, const box& y)
{
    return {x.low + y.low, x.high + y.high};
}

/// Resistances side by side: conductances add.
box beside(const box& x, const box& y)
{
    const auto both = [](double p, double q) {
        if (!std::isfinite(p)) {
            return q;
        }
        return std::isfinite(q) ? p * q / std::max(p + q, 1e-300) : p;
    };
    return {both(x.low, y.low), both(x.high, y.high)};
}

bool same_ends(int a, int b, int c, int d)
{
    return (a == c && b == d) || (a == d && b == c);
}

/// Strings and parallels of independent resistances are one resistance whose box is exact; capacitors side by side are one.
class merger {
public:
    merger(rc_network& n, int a, int b) : n_(n), a_(a), b_(b) {}

    void run()
    {
        while (merge_parallel() || merge_series()) {
        }
        merge_capacitors();
    }

private:
    bool merge_parallel()
    {
        auto& list = n_.resistances;
        for (std::size_t i = 0; i < list.size(); ++i) {
            for (std::size_t j = i + 1; j < list.size(); ++j) {
                if (same_ends(list[i].a, list[i].b, list[j].a, list[j].b)) {
                    list[i].ohms = beside(list[i].ohms, list[j].ohms);
                    list.erase(list.begin() + static_cast<std::ptrdiff_t>(j));
                    return true;
                }
            }
        }
        return false;
    }

    bool merge_series()
    {
        auto& list = n_.resistances;
        for (int node = 0; node < n_.nodes; ++node) {
            std::vector<std::size_t> here;
            for (std::size_t i = 0; i < list.size(); ++i) {
                if (list[i].a == node || list[i].b == node) {
                    here.push_back(i);
                }
            }
            const bool stored =
                std::any_of(n_.capacitors.begin(), n_.capacitors.end(), [&](const rc_capacitor& c) { return c.plus == node || c.minus == node; });
            if (here.size() != 2 || stored || node == a_ || node == b_) {
                continue;
            }
            const rc_resistance x = list[here[0]];
            const rc_resistance y = list[here[1]];
            list[here[0]] = {x.a == node ? x.b : x.a, y.a == node ? y.b : y.a, sum_of(x.ohms, y.ohms)};
            list.erase(list.begin() + static_cast<std::ptrdiff_t>(here[1]));
            return true;
        }
        return false;
    }

    void merge_capacitors()
    {
        auto& list = n_.capacitors;
        for (std::size_t i = 0; i < list.size(); ++i) {
            for (std::size_t j = i + 1; j < list.size();) {
                if (!same_ends(list[i].plus, list[i].minus, list[j].plus, list[j].minus)) {
                    ++j;
                    continue;
                }
                const box volts = list[j].plus == list[i].plus ? list[j].volts : box{-list[j].volts.high, -list[j].volts.low};
                list[i].farads = sum_of(list[i].farads, list[j].farads);
                list[i].volts = {std::min(list[i].volts.low, volts.low), std::max(list[i].volts.high, volts.high)};
                list.erase(list.begin() + static_cast<std::ptrdiff_t>(j));
                n_.original.erase(n_.original.begin() + static_cast<std::ptrdiff_t>(j));
            }
        }
    }

    rc_network& n_;
    int a_;
    int b_;
};

} // namespace

rc_network island_of(const rc_network& n, int a, int b)
{
    // What hangs on the rest by one node alone cannot influence the pair: for every node taken out, only what still joins a or b counts.
    std::vector<bool> counts_r(n.resistances.size(), true);
    std::vector<bool> counts_c(n.capacitors.size(), true);
    for (int cut = 0; cut < n.nodes; ++cut) {
        const std::vector<bool> seen = reached(n, a, b, cut == a ? b : a, cut);
        const auto near = [&](int x, int y) { return (x == cut || seen[at(x)]) && (y == cut || seen[at(y)]); };
        for (std::size_t i = 0; i < n.resistances.size(); ++i) {
            counts_r[i] = counts_r[i] && near(n.resistances[i].a, n.resistances[i].b);
        }
        for (std::size_t i = 0; i < n.capacitors.size(); ++i) {
            counts_c[i] = counts_c[i] && near(n.capacitors[i].plus, n.capacitors[i].minus);
        }
    }
    rc_network out;
    out.nodes = n.nodes;
    for (std::size_t i = 0; i < n.resistances.size(); ++i) {
        if (counts_r[i] && n.resistances[i].a != n.resistances[i].b) {
            out.resistances.push_back(n.resistances[i]);
        }
    }
    for (std::size_t i = 0; i < n.capacitors.size(); ++i) {
        if (counts_c[i] && n.capacitors[i].plus != n.capacitors[i].minus) {
            out.capacitors.push_back(n.capacitors[i]);
            out.original.push_back(static_cast<int>(i));
        }
    }
    merger(out, a, b).run();
    return out;
}

int keeper_of(const rc_network& n, const rc_point& p)
{
    union_find joined(n.nodes);
    for (std::size_t i = 0; i < n.resistances.size(); ++i) {
        if (present(p.ohms[i])) {
            joined.join(n.resistances[i].a, n.resistances[i].b);
        }
    }
    for (std::size_t i = 0; i < n.capacitors.size(); ++i) {
        if (joined.root(n.capacitors[i].plus) != joined.root(n.capacitors[i].minus)) {
            return static_cast<int>(i);
        }
    }
    return -1;
}

namespace {

/// The turning point of the envelope between two times, by bisection on its slope's sign.
double turning_point(const rc_modes& m, const std::vector<rc_capacitor>& capacitors, double from, double to)
{
    for (int i = 0; i < 60; ++i) {
        const double one = from + (to - from) / 3.0;
        const double two = to - (to - from) / 3.0;
        (m.envelope(capacitors, one) < m.envelope(capacitors, two) ? from : to) =
            m.envelope(capacitors, one) < m.envelope(capacitors, two) ? one : two;
    }
    return 0.5 * (from + to);
}

double crossing(const rc_modes& m, const std::vector<rc_capacitor>& capacitors, double limit, double above, double below)
{
    for (int i = 0; i < 200 && below - above > 1e-14 * below; ++i) {
        const double middle = 0.5 * (above + below);
        (m.envelope(capacitors, middle) > limit ? above : below) = middle;
    }
    return below;
}

} // namespace

double last_time(const rc_modes& m, const std::vector<rc_capacitor>& capacitors, double limit)
{
    if (m.envelope(capacitors, std::numeric_limits<double>::infinity()) > limit) {
        return std::numeric_limits<double>::infinity();
    }
    double slow = std::numeric_limits<double>::infinity();
    double fast = 0.0;
    for (const double r : m.rate) {
        if (r > 0.0) {
            slow = std::min(slow, r);
            fast = std::max(fast, r);
        }
    }
    if (fast == 0.0) {
        return 0.0;
    }
    // Beyond this the slowest mode alone, with all amplitudes added up, is below the limit.
    double all = 0.0;
    for (const std::vector<double>& by_capacitor : m.share) {
        for (std::size_t c = 0; c < by_capacitor.size(); ++c) {
            all += std::abs(by_capacitor[c]) * std::max(std::abs(capacitors[c].volts.low), std::abs(capacitors[c].volts.high));
        }
    }
    if (all <= limit) {
        return 0.0;
    }
    constexpr int steps = 160;
    const double first = 1e-3 / fast;
    const double end = std::max(2.0 * first, 1.01 * std::log(all / std::max(limit, 1e-300)) / slow);
    const double factor = std::pow(end / first, 1.0 / steps);
    std::vector<double> times{0.0};
    for (int i = 0; i <= steps; ++i) {
        times.push_back(first * std::pow(factor, i));
    }
    // From the far end back: the first sample, or hump between samples, above the limit.
    for (std::size_t i = times.size() - 1; i-- > 0;) {
        if (m.envelope(capacitors, times[i]) > limit) {
            return crossing(m, capacitors, limit, times[i], times[i + 1]);
        }
        const bool hump = i > 0 && m.envelope(capacitors, times[i]) >= m.envelope(capacitors, times[i - 1]) &&
                          m.envelope(capacitors, times[i]) >= m.envelope(capacitors, times[i + 1]);
        if (hump) {
            const double top = turning_point(m, capacitors, times[i - 1], times[i + 1]);
            if (m.envelope(capacitors, top) > limit) {
                return crossing(m, capacitors, limit, top, times[i + 1]);
            }
        }
    }
    return 0.0;
}

} // namespace onehand::circuit
