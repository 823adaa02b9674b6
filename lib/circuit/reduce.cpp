#include "circuit/reduced.hpp"

#include <algorithm>
#include <numeric>

namespace onehand::circuit {

namespace {

class union_find {
public:
    explicit union_find(int count) : parent_(static_cast<std::size_t>(count)) { std::iota(parent_.begin(), parent_.end(), 0); }

    int root(int i)
    {
        while (parent_[static_cast<std::size_t>(i)] != i) {
            i = parent_[static_cast<std::size_t>(i)];
        }
        return i;
    }

    void join(int a, int b) { parent_[static_cast<std::size_t>(root(b))] = root(a); }

private:
    std::vector<int> parent_;
};

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

void merge_closed(const network& n, reduced& r)
{
    union_find joined(n.nodes);
    for (const branch& b : n.branches) {
        const bool always =
            !b.options.empty() && std::all_of(b.options.begin(), b.options.end(), [](const option& o) { return o.is == form::closed; });
        if (always) {
            joined.join(b.from, b.to);
        }
    }
    r.cluster_of.assign(at(n.nodes), -1);
    for (int i = 0; i < n.nodes; ++i) {
        const int root = joined.root(i);
        if (r.cluster_of[at(root)] < 0) {
            r.cluster_of[at(root)] = r.clusters++;
        }
        r.cluster_of[at(i)] = r.cluster_of[at(root)];
    }
}

box hull_of(const reduced& r, const combination& a, const combination& b)
{
    box out;
    bool first = true;
    for (const combination* c : {&a, &b}) {
        box one;
        for (std::size_t i = 0; i < c->size() && i < r.sources.size(); ++i) {
            const double x = (*c)[i] * r.sources[i].low;
            const double y = (*c)[i] * r.sources[i].high;
            one.low += std::min(x, y);
            one.high += std::max(x, y);
        }
        out = first ? one : box{std::min(out.low, one.low), std::max(out.high, one.high)};
        first = false;
    }
    return out;
}

/// Spreads known potentials over the sources until nothing changes. Two different potentials on one cluster (a bridge between held nets) leave it
/// anywhere between.
void hold(const network& n, reduced& r)
{
    struct link {
        int plus, minus;
        std::size_t column;
    };
    std::vector<link> links;
    for (std::size_t i = 0; i < n.sources.size(); ++i) {
        r.sources.push_back(n.sources[i].volts);
        links.push_back({r.cluster_of[at(n.sources[i].plus)], r.cluster_of[at(n.sources[i].minus)], i});
    }
    if (n.held) {
        r.output_column = static_cast<int>(r.sources.size());
        links.push_back({r.cluster_of[at(n.held->plus)], r.cluster_of[at(n.held->minus)], r.sources.size()});
        r.sources.push_back({});
    }
    const std::size_t columns = r.sources.size();
    r.potential.assign(at(r.clusters), std::nullopt);
    r.potential[at(r.cluster_of[0])] = combination(columns, 0.0);
    std::vector<bool> used(links.size(), false);
    for (bool grew = true; grew;) {
        grew = false;
        for (std::size_t i = 0; i < links.size(); ++i) {
            const link& l = links[i];
            auto& high = r.potential[at(l.plus)];
            auto& low = r.potential[at(l.minus)];
            if (used[i] || l.plus == l.minus || (!high && !low)) {
                continue;
            }
            used[i] = true;
            grew = true;
            auto& unknown = high ? low : high;
            combination told = high ? *high : *low;
            told.resize(columns, 0.0);
            told[l.column] += high ? -1.0 : 1.0;
            if (!unknown) {
                unknown = std::move(told);
            } else if (*unknown != told && r.cluster_of[0] != (high ? l.minus : l.plus)) {
                r.sources.push_back(hull_of(r, *unknown, told));
                *unknown = combination(r.sources.size(), 0.0);
                unknown->back() = 1.0;
            }
        }
    }
    for (auto& p : r.potential) {
        if (p) {
            p->resize(r.sources.size(), 0.0);
        }
    }
    for (std::size_t i = 0; i < links.size(); ++i) {
        if (!used[i] && links[i].plus != links[i].minus) {
            r.unheld.push_back(static_cast<int>(i));
        }
    }
}

void split(const network& n, reduced& r)
{
    union_find joined(r.clusters);
    const auto unknown = [&](int node) { return !r.potential[at(r.cluster_of[at(node)])]; };
    const auto join = [&](int a, int b) {
        if (unknown(a) && unknown(b)) {
            joined.join(r.cluster_of[at(a)], r.cluster_of[at(b)]);
        }
    };
    for (const branch& b : n.branches) {
        if (may_conduct(b)) {
            join(b.from, b.to);
        }
    }
    for (const track& t : n.tracks) {
        join(t.end_1, t.wiper);
        join(t.wiper, t.end_2);
    }
    if (n.held) {
        join(n.held->sense, n.held->reference);
    }
    r.component_of.assign(at(r.clusters), -1);
    std::vector<int> number(at(r.clusters), -1);
    for (int c = 0; c < r.clusters; ++c) {
        if (r.potential[at(c)]) {
            continue;
        }
        int& index = number[at(joined.root(c))];
        if (index < 0) {
            index = static_cast<int>(r.components.size());
            r.components.emplace_back();
        }
        r.component_of[at(c)] = index;
        r.components[at(index)].clusters.push_back(c);
    }
}

/// A branch or track belongs to the component of its unknown ends; between held nodes it makes one of its own, without unknowns.
int owner(const reduced& r, std::initializer_list<int> nodes)
{
    for (const int node : nodes) {
        if (const int c = r.component_of[at(r.cluster_of[at(node)])]; c >= 0) {
            return c;
        }
    }
    return -1;
}

void assign(const network& n, reduced& r)
{
    const auto own = [&](int index) -> component& {
        if (index < 0) {
            r.components.emplace_back();
            return r.components.back();
        }
        return r.components[at(index)];
    };
    for (std::size_t i = 0; i < n.branches.size(); ++i) {
        own(owner(r, {n.branches[i].from, n.branches[i].to})).branches.push_back(static_cast<int>(i));
    }
    for (std::size_t i = 0; i < n.tracks.size(); ++i) {
        own(owner(r, {n.tracks[i].end_1, n.tracks[i].wiper, n.tracks[i].end_2})).tracks.push_back(static_cast<int>(i));
    }
    if (n.held) {
        if (const int c = owner(r, {n.held->sense, n.held->reference}); c >= 0) {
            r.components[at(c)].has_sense = true;
        }
    }
}

} // namespace

bool may_conduct(const branch& b)
{
    return std::any_of(b.options.begin(), b.options.end(), [](const option& o) { return o.is != form::open; });
}

reduced reduce(const network& n)
{
    reduced r;
    merge_closed(n, r);
    hold(n, r);
    split(n, r);
    assign(n, r);
    return r;
}

} // namespace onehand::circuit
