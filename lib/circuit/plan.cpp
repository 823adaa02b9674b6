// What a component can be in: its choices, its columns, the figures asked of it.
#include "circuit/corner.hpp"

#include <algorithm>

namespace onehand::circuit {

namespace {

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

std::vector<branch_state> states_of(const branch& b)
{
    std::vector<branch_state> list;
    for (const option& o : b.options) {
        if (o.is != form::resistance || o.at.point()) {
            list.push_back({o.is, usable(o.at.low), o.at, ' '});
            continue;
        }
        list.push_back({o.is, usable(o.at.low), o.at, 'l'});
        list.push_back({o.is, usable(o.at.high), o.at, 'h'});
    }
    if (list.empty()) {
        list.push_back({form::open, 0.0, {}, ' '});
    }
    return list;
}

/// Where a further track's wiper is looked at: close towards both ends, since what its sections match may be a small share of it.
std::vector<double> places_of(const track& t)
{
    constexpr double nearest = 1e-9; // to an end: a wiper on it would short its section
    const double low = std::clamp(t.position.low, nearest, 1.0 - nearest);
    const double high = std::clamp(t.position.high, nearest, 1.0 - nearest);
    std::vector<double> list{low};
    for (double p = nearest; p < 0.5; p *= 1.5) {
        for (const double place : {p, 1.0 - p}) {
            if (place > low && place < high) {
                list.push_back(place);
            }
        }
    }
    if (high > low) {
        list.push_back(high);
    }
    std::sort(list.begin(), list.end());
    return list;
}

void list_figures(component_plan& p)
{
    using of = component_plan::figure::of;
    const auto& clusters = p.part->clusters;
    for (std::size_t i = 0; i < clusters.size(); ++i) {
        p.figures.push_back({of::node, clusters[i], 0});
        for (std::size_t j = i + 1; j < clusters.size(); ++j) {
            p.figures.push_back({of::pair, clusters[i], clusters[j]});
        }
        if (p.part->has_sense) {
            for (int h = 0; h < p.red->clusters; ++h) {
                if (p.red->potential[at(h)]) {
                    p.figures.push_back({of::pair, h, clusters[i]});
                }
            }
        }
    }
    for (std::size_t i = 0; i < p.part->branches.size(); ++i) {
        p.figures.push_back({of::across, static_cast<int>(i), 0});
        p.figures.push_back({of::through, static_cast<int>(i), 0});
    }
    for (std::size_t i = 0; i < p.part->tracks.size(); ++i) {
        p.figures.push_back({of::section_1, static_cast<int>(i), 0});
        p.figures.push_back({of::section_2, static_cast<int>(i), 0});
    }
}

} // namespace

component_plan plan_for(const network& n, const reduced& r, const component& c)
{
    component_plan p;
    p.net = &n;
    p.red = &r;
    p.part = &c;
    p.column_box = r.sources;
    for (const int b : c.branches) {
        p.states.push_back(states_of(n.branches[at(b)]));
        box span; // hull over the clamp and current options
        bool any = false;
        for (const option& o : n.branches[at(b)].options) {
            if (o.is == form::clamp || o.is == form::current || o.is == form::fixed) {
                span = any ? box{std::min(span.low, o.at.low), std::max(span.high, o.at.high)} : o.at;
                any = true;
            }
        }
        p.column_box.push_back(span);
    }
    for (std::size_t i = 0; i < c.tracks.size(); ++i) {
        const track& t = n.tracks[at(c.tracks[i])];
        p.track_ohms.push_back(t.resistance.point() ? std::vector<double>{usable(t.resistance.low)}
                                                    : std::vector<double>{usable(t.resistance.low), usable(t.resistance.high)});
        if (i > 0) {
            p.track_places.push_back(places_of(t));
        }
    }
    p.threshold_column = static_cast<int>(p.column_box.size());
    p.column_box.push_back(n.held ? n.held->threshold : box{});
    p.column_box.push_back(n.held ? n.held->bias : box{});
    p.columns = static_cast<int>(p.column_box.size());
    list_figures(p);
    return p;
}

std::vector<int> radices(const component_plan& p)
{
    std::vector<int> list;
    for (const auto& s : p.states) {
        list.push_back(static_cast<int>(s.size()));
    }
    for (const auto& o : p.track_ohms) {
        list.push_back(static_cast<int>(o.size()));
    }
    for (const auto& o : p.track_places) {
        list.push_back(static_cast<int>(o.size()));
    }
    return list;
}

std::size_t component_plan::corners() const
{
    std::size_t product = 1;
    for (const int r : radices(*this)) {
        product = product > (std::size_t{1} << 40U) ? product : product * at(r);
    }
    return product;
}

choice choice_at(const component_plan& p, std::size_t number)
{
    choice c;
    for (const int r : radices(p)) {
        c.push_back(static_cast<int>(number % at(r)));
        number /= at(r);
    }
    return c;
}

} // namespace onehand::circuit
