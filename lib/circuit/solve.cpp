#include "circuit/sweep.hpp"

#include <algorithm>
#include <cmath>

namespace onehand::circuit {

namespace {

using of = component_plan::figure::of;

constexpr double grid_margin = 0.01; // a track's dissipation between the places looked at

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

/// Everything solved, ready to answer for pairs.
class answers {
public:
    answers(const network& n, reduced& r) : net_(n), red_(r) {}

    solution run()
    {
        plans_.resize(red_.components.size());
        swept_.resize(red_.components.size());
        solution out;
        for (const bool sense : {true, false}) {
            for (std::size_t i = 0; i < red_.components.size(); ++i) {
                if (red_.components[i].has_sense == sense) {
                    plans_[i] = plan_for(net_, red_, red_.components[i]);
                    swept_[i] = sweep(plans_[i]);
                }
            }
            if (sense && net_.held) {
                take_output(out);
                if (out.feedback_lost) {
                    return out;
                }
            }
        }
        fill_branches(out);
        fill_nodes(out);
        return out;
    }

private:
    void take_output(solution& out)
    {
        const auto it = std::find_if(red_.components.begin(), red_.components.end(), [](const component& c) { return c.has_sense; });
        if (it == red_.components.end()) {
            out.feedback_lost = true; // the sense node is held by something else
            return;
        }
        const auto i = static_cast<std::size_t>(it - red_.components.begin());
        const sweep_result& s = swept_[i];
        out.feedback_lost = s.lost || !s.output_low.known;
        if (out.feedback_lost) {
            return;
        }
        const double room = s.searched ? s.margin * s.output_high.value : 0.0;
        out.output = {s.output_low.value - room, s.output_high.value + room, true, s.searched, s.margin};
        red_.sources[at(red_.output_column)] = {out.output.low, out.output.high};
        tell_ends(plans_[i], s, out);
    }

    static void tell_ends(const component_plan& p, const sweep_result& s, solution& out)
    {
        const auto end = [](double x, double low, double high) { return x <= low ? 'l' : x >= high ? 'h' : 'i'; };
        for (std::size_t b = 0; b < p.states.size(); ++b) {
            const char low = p.states[b][at(s.output_low.at[b])].end;
            const char high = p.states[b][at(s.output_high.at[b])].end;
            if (low != high) {
                out.set_by.push_back({output_end::of::branch, p.part->branches[b], low, high});
            }
        }
        for (std::size_t t = 0; t < p.track_ohms.size(); ++t) {
            const int low = s.output_low.at[p.states.size() + t];
            const int high = s.output_high.at[p.states.size() + t];
            if (low != high) {
                out.set_by.push_back({output_end::of::track, p.part->tracks[t], low == 0 ? 'l' : 'h', high == 0 ? 'l' : 'h'});
            }
            const box& travel = p.net->tracks[at(p.part->tracks[t])].position;
            if (t == 0 && !travel.point()) {
                out.set_by.push_back({output_end::of::track_position, p.part->tracks[t], end(s.output_low.place, travel.low, travel.high),
                                      end(s.output_high.place, travel.low, travel.high)});
            }
        }
        for (const int c : s.active) {
            const box& b = p.column_box[at(c)];
            const char low = end(s.output_low.columns[at(c)], b.low, b.high);
            const char high = end(s.output_high.columns[at(c)], b.low, b.high);
            if (low == high) {
                continue;
            }
            const auto what = c == p.threshold_column       ? output_end::of::threshold
                              : c == p.threshold_column + 1 ? output_end::of::bias
                                                            : output_end::of::source;
            if (what != output_end::of::source || at(c) < p.red->sources.size()) {
                out.set_by.push_back({what, c, low, high});
            }
        }
    }

    static extreme told(const figure_extreme& e, bool searched, double margin) { return {e.low, e.high, e.known, searched, margin}; }

    void fill_branches(solution& out) const
    {
        out.current.resize(net_.branches.size());
        out.power.resize(net_.branches.size());
        out.track_current.resize(net_.tracks.size());
        out.track_power.resize(net_.tracks.size());
        for (std::size_t i = 0; i < plans_.size(); ++i) {
            const component_plan& p = plans_[i];
            const sweep_result& s = swept_[i];
            for (std::size_t f = 0; f < p.figures.size(); ++f) {
                if (p.figures[f].what == of::through) {
                    out.current[at(p.part->branches[at(p.figures[f].a)])] = told(overall(s, f), s.searched, s.margin);
                }
                if (p.figures[f].what == of::section_1) {
                    const figure_extreme one = overall(s, f);
                    const figure_extreme two = overall(s, f + 1);
                    const double most = std::max({std::abs(one.low), std::abs(one.high), std::abs(two.low), std::abs(two.high)});
                    out.track_current[at(p.part->tracks[at(p.figures[f].a)])] = {0.0, most, one.known && two.known, s.searched, s.margin};
                }
            }
            for (std::size_t b = 0; b < p.part->branches.size(); ++b) {
                extreme e = told(s.power[b], s.searched, s.margin);
                e.high *= 1.0 + s.margin * 2.0;
                e.low *= s.searched ? 0.0 : 1.0;
                out.power[at(p.part->branches[b])] = e;
            }
            for (std::size_t t = 0; t < p.part->tracks.size(); ++t) {
                const double margin = grid_margin + s.margin * 2.0;
                extreme e = told(s.track_power[t], true, margin);
                e.high *= 1.0 + margin;
                e.low = 0.0;
                out.track_power[at(p.part->tracks[t])] = e;
            }
        }
    }

    void fill_nodes(solution& out) const
    {
        out.floating.assign(at(net_.nodes), false);
        out.together.assign(at(net_.nodes), std::vector<bool>(at(net_.nodes), true));
        out.voltage.assign(at(net_.nodes), std::vector<extreme>(at(net_.nodes)));
        for (int a = 0; a < net_.nodes; ++a) {
            const int c = red_.cluster_of[at(a)];
            if (const int owner = red_.component_of[at(c)]; owner >= 0) {
                const auto& list = red_.components[at(owner)].clusters;
                out.floating[at(a)] = swept_[at(owner)].floating[static_cast<std::size_t>(std::find(list.begin(), list.end(), c) - list.begin())];
            }
            for (int b = 0; b < a; ++b) {
                const extreme e = pair(red_.cluster_of[at(a)], red_.cluster_of[at(b)]);
                out.voltage[at(a)][at(b)] = e;
                out.voltage[at(b)][at(a)] = {-e.high, -e.low, e.known, e.searched, e.margin};
            }
            for (int b = 0; b < net_.nodes; ++b) {
                out.together[at(a)][at(b)] = together(red_.cluster_of[at(a)], red_.cluster_of[at(b)]);
            }
            out.voltage[at(a)][at(a)].known = true;
        }
    }

    bool together(int a, int b) const
    {
        const auto floats = [&](int c) {
            const int owner = red_.component_of[at(c)];
            if (owner < 0) {
                return false;
            }
            const auto& list = red_.components[at(owner)].clusters;
            return static_cast<bool>(swept_[at(owner)].floating[static_cast<std::size_t>(std::find(list.begin(), list.end(), c) - list.begin())]);
        };
        if (a == b || (!floats(a) && !floats(b))) {
            return true;
        }
        const int owner = red_.component_of[at(a)];
        return owner >= 0 && owner == red_.component_of[at(b)] && !swept_[at(owner)].apart.contains(std::minmax(a, b));
    }

    extreme pair(int a, int b) const
    {
        if (a == b) {
            return {0.0, 0.0, true, false, 0.0};
        }
        for (const int owner : {red_.component_of[at(a)], red_.component_of[at(b)]}) {
            if (owner < 0) {
                continue;
            }
            const component_plan& p = plans_[at(owner)];
            for (std::size_t f = 0; f < p.figures.size(); ++f) {
                if (p.figures[f].what != of::pair) {
                    continue;
                }
                const bool same = p.figures[f].a == a && p.figures[f].b == b;
                const bool turned = p.figures[f].a == b && p.figures[f].b == a;
                if (same || turned) {
                    const figure_extreme e = overall(swept_[at(owner)], f);
                    return told(turned ? figure_extreme{-e.high, -e.low, e.known} : e, swept_[at(owner)].searched, swept_[at(owner)].margin);
                }
            }
        }
        return across_components(a, b);
    }

    /// Both move with the same sources: at each corner of those the two are independent.
    extreme across_components(int a, int b) const
    {
        std::vector<int> shared;
        const auto add = [&](int c) {
            if (std::find(shared.begin(), shared.end(), c) == shared.end() && !red_.sources[at(c)].point()) {
                shared.push_back(c);
            }
        };
        for (const int cluster : {a, b}) {
            if (const auto& held = red_.potential[at(cluster)]) {
                for (std::size_t c = 0; c < held->size(); ++c) {
                    if ((*held)[c] != 0.0) {
                        add(static_cast<int>(c));
                    }
                }
            } else {
                const sweep_result& s = swept_[at(red_.component_of[at(cluster)])];
                std::for_each(s.active.begin(), s.active.begin() + s.global_active, add);
            }
        }
        extreme out;
        for (std::size_t k = 0; k < (std::size_t{1} << shared.size()); ++k) {
            const figure_extreme x = at_globals(a, shared, k);
            const figure_extreme y = at_globals(b, shared, k);
            if (x.known && y.known) {
                out.low = out.known ? std::min(out.low, x.low - y.high) : x.low - y.high;
                out.high = out.known ? std::max(out.high, x.high - y.low) : x.high - y.low;
                out.known = true;
            }
        }
        for (const int cluster : {a, b}) {
            if (const int owner = red_.component_of[at(cluster)]; owner >= 0 && swept_[at(owner)].searched) {
                const double room = swept_[at(owner)].margin * std::max(std::abs(out.low), std::abs(out.high));
                out = {out.low - room, out.high + room, out.known, true, swept_[at(owner)].margin};
            }
        }
        return out;
    }

    figure_extreme at_globals(int cluster, const std::vector<int>& shared, std::size_t corner_number) const
    {
        const auto bit = [&](int column) {
            const auto it = std::find(shared.begin(), shared.end(), column);
            return it != shared.end() && (corner_number >> static_cast<std::size_t>(it - shared.begin()) & 1U) != 0U;
        };
        if (const auto& held = red_.potential[at(cluster)]) {
            double v = 0.0;
            for (std::size_t c = 0; c < held->size(); ++c) {
                const box& b = red_.sources[c];
                v += (*held)[c] * (bit(static_cast<int>(c)) ? b.high : b.low);
            }
            return {v, v, true};
        }
        const int owner = red_.component_of[at(cluster)];
        const component_plan& p = plans_[at(owner)];
        const sweep_result& s = swept_[at(owner)];
        std::size_t number = 0;
        for (int i = 0; i < s.global_active; ++i) {
            number |= bit(s.active[at(i)]) ? std::size_t{1} << at(i) : 0U;
        }
        for (std::size_t f = 0; f < p.figures.size(); ++f) {
            if (p.figures[f].what == of::node && p.figures[f].a == cluster) {
                return s.by_globals[f][number];
            }
        }
        return {};
    }

    const network& net_;
    reduced& red_;
    std::vector<component_plan> plans_;
    std::vector<sweep_result> swept_;
};

} // namespace

namespace {

solution solve_tracks(const network& n)
{
    reduced r = reduce(n);
    if (r.unheld.empty()) {
        return answers(n, r).run();
    }
    // A source that hangs on nothing holds no node: it fixes the difference of two.
    network hung = n;
    hung.sources.clear();
    for (std::size_t i = 0; i < n.sources.size(); ++i) {
        if (std::find(r.unheld.begin(), r.unheld.end(), static_cast<int>(i)) == r.unheld.end()) {
            hung.sources.push_back(n.sources[i]);
        } else {
            hung.branches.push_back({n.sources[i].plus, n.sources[i].minus, {{form::fixed, n.sources[i].volts}}});
        }
    }
    if (n.held && std::find(r.unheld.begin(), r.unheld.end(), static_cast<int>(n.sources.size())) != r.unheld.end()) {
        solution lost;
        lost.feedback_lost = true; // an output that hangs on nothing cannot be sensed against the return
        return lost;
    }
    reduced again = reduce(hung);
    solution out = answers(hung, again).run();
    out.current.resize(n.branches.size());
    out.power.resize(n.branches.size());
    return out;
}

/// A track whose wiper is tied to one of its ends is one resistance: what the other end sees of it.
struct untied {
    network net;
    std::vector<int> track_at;  // per track of the original: its number here, or -1
    std::vector<int> branch_at; // per track of the original: the branch it has become, or -1
};

untied without_tied_tracks(const network& n)
{
    untied u;
    u.net = n;
    u.net.tracks.clear();
    for (const track& t : n.tracks) {
        const bool at_end_1 = t.wiper == t.end_1;
        const bool tied = at_end_1 != (t.wiper == t.end_2);
        u.track_at.push_back(tied ? -1 : static_cast<int>(u.net.tracks.size()));
        u.branch_at.push_back(tied ? static_cast<int>(u.net.branches.size()) : -1);
        if (!tied) {
            u.net.tracks.push_back(t);
            continue;
        }
        const box share = at_end_1 ? box{1.0 - t.position.high, 1.0 - t.position.low} : t.position;
        u.net.branches.push_back({t.end_1, t.end_2, {{form::resistance, {t.resistance.low * share.low, t.resistance.high * share.high}}}});
    }
    return u;
}

} // namespace

solution solve(const network& n)
{
    const untied u = without_tied_tracks(n);
    if (u.net.tracks.size() == n.tracks.size()) {
        return solve_tracks(n);
    }
    const solution inner = solve_tracks(u.net);
    solution out = inner;
    out.current.resize(n.branches.size());
    out.power.resize(n.branches.size());
    out.track_current.assign(n.tracks.size(), {});
    out.track_power.assign(n.tracks.size(), {});
    for (std::size_t i = 0; i < n.tracks.size(); ++i) {
        if (const int b = u.branch_at[i]; b >= 0 && !inner.current.empty()) {
            const extreme& amps = inner.current[at(b)];
            out.track_current[i] = {0.0, std::max(std::abs(amps.low), std::abs(amps.high)), amps.known, amps.searched, amps.margin};
            out.track_power[i] = inner.power[at(b)];
        } else if (!inner.track_current.empty()) {
            out.track_current[i] = inner.track_current[at(u.track_at[i])];
            out.track_power[i] = inner.track_power[at(u.track_at[i])];
        }
    }
    for (output_end& e : out.set_by) {
        for (std::size_t i = 0; i < n.tracks.size(); ++i) {
            const bool became = e.what == output_end::of::branch && e.index == u.branch_at[i];
            const bool kept = (e.what == output_end::of::track || e.what == output_end::of::track_position) && e.index == u.track_at[i];
            if (became || kept) {
                // Tied to its first end the resistance falls as the wiper moves on.
                if (became && n.tracks[i].wiper == n.tracks[i].end_1) {
                    const auto turned = [](char c) { return c == 'l' ? 'h' : c == 'h' ? 'l' : c; };
                    e.at_low = turned(e.at_low);
                    e.at_high = turned(e.at_high);
                }
                e.what = became ? output_end::of::track_position : e.what;
                e.index = static_cast<int>(i);
                break;
            }
        }
    }
    return out;
}

} // namespace onehand::circuit
