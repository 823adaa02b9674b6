#include "circuit/sweep.hpp"

#include <algorithm>
#include <cmath>
#include <map>
#include <set>

namespace onehand::circuit {

namespace {

constexpr std::size_t most_corners = 16384; // enumerated up to here, searched beyond
constexpr double search_margin = 0.03;

std::size_t at(int i)
{
    return static_cast<std::size_t>(i);
}

void widen(figure_extreme& e, double low, double high)
{
    e.low = e.known ? std::min(e.low, low) : low;
    e.high = e.known ? std::max(e.high, high) : high;
    e.known = true;
}

/// Globals that a held net at the component's edge rests on.
void add_globals(const component_plan& p, std::set<int>& used)
{
    const auto touch = [&](int cluster) {
        if (const auto& held = p.red->potential[at(cluster)]) {
            for (std::size_t c = 0; c < held->size(); ++c) {
                if ((*held)[c] != 0.0) {
                    used.insert(static_cast<int>(c));
                }
            }
        }
    };
    for (const int b : p.part->branches) {
        touch(p.red->cluster_of[at(p.net->branches[at(b)].from)]);
        touch(p.red->cluster_of[at(p.net->branches[at(b)].to)]);
    }
    for (const int t : p.part->tracks) {
        for (const int node : {p.net->tracks[at(t)].end_1, p.net->tracks[at(t)].wiper, p.net->tracks[at(t)].end_2}) {
            touch(p.red->cluster_of[at(node)]);
        }
    }
    if (p.part->has_sense) {
        for (int c = 0; c < p.red->clusters; ++c) {
            touch(c);
        }
        used.erase(p.red->output_column);
    }
}

/// Walks the corners of one component and collects.
class walker {
public:
    explicit walker(const component_plan& p) : p_(p)
    {
        list_active();
        out_.by_globals.assign(p.figures.size(), std::vector<figure_extreme>(std::size_t{1} << at(out_.global_active)));
        out_.power.resize(p.part->branches.size());
        out_.track_power.resize(p.part->tracks.size());
        out_.floating.assign(p.part->clusters.size(), false);
        const bool tracked = !p.part->tracks.empty();
        from_ = tracked ? p.net->tracks[at(p.part->tracks[0])].position.low : 0.0;
        to_ = tracked ? p.net->tracks[at(p.part->tracks[0])].position.high : 0.0;
        places_ = tracked ? places() : std::vector<double>{};
        out_.searched = p.part->tracks.size() > 1 || p.corners() > most_corners;
        out_.margin = out_.searched ? search_margin : 0.0;
    }

    sweep_result run()
    {
        const std::size_t count = p_.corners();
        if (count <= most_corners) {
            voltages_.resize(count);
            for (std::size_t i = 0; i < count; ++i) {
                visit(choice_at(p_, i), &voltages_[i]);
            }
            add_matches(count);
        } else {
            search();
        }
        return std::move(out_);
    }

private:
    struct at_corner {
        std::vector<std::vector<double>> volts; // [column corner][branch], track free only
    };

    void list_active()
    {
        std::set<int> used;
        add_globals(p_, used);
        for (const int c : used) {
            if (!p_.column_box[at(c)].point()) {
                out_.active.push_back(c);
            }
        }
        out_.global_active = static_cast<int>(out_.active.size());
        for (int c = static_cast<int>(p_.red->sources.size()); c < p_.columns; ++c) {
            const bool feedback = c >= p_.threshold_column;
            if (!p_.column_box[at(c)].point() && (!feedback || p_.part->has_sense)) {
                out_.active.push_back(c);
            }
        }
    }

    std::vector<double> columns_at(std::size_t corner_number) const
    {
        std::vector<double> values;
        for (const box& b : p_.column_box) {
            values.push_back(b.low);
        }
        for (std::size_t i = 0; i < out_.active.size(); ++i) {
            const box& b = p_.column_box[at(out_.active[i])];
            values[at(out_.active[i])] = (corner_number >> i & 1U) != 0U ? b.high : b.low;
        }
        return values;
    }

    travel_extreme extreme_of(const corner& c, std::size_t figure, const std::vector<double>& columns) const
    {
        std::vector<const std::vector<double>*> forms;
        for (const corner_sample& s : c.samples) {
            forms.push_back(&s.form[figure]);
        }
        return travel_form(c.samples, forms, columns).over(from_, to_);
    }

    void visit(const choice& chosen, at_corner* keep)
    {
        const corner c = solve_corner(p_, chosen);
        for (std::size_t i = 0; i < c.floating.size(); ++i) {
            out_.floating[i] = out_.floating[i] || c.floating[i];
        }
        for (std::size_t i = 0; i < c.island.size(); ++i) {
            for (std::size_t j = i + 1; j < c.island.size(); ++j) {
                if (c.island[i] != c.island[j]) {
                    out_.apart.insert(std::minmax(p_.part->clusters[i], p_.part->clusters[j]));
                }
            }
        }
        if (c.lost) {
            out_.lost = true;
            return;
        }
        const std::size_t column_corners = std::size_t{1} << out_.active.size();
        for (std::size_t k = 0; k < column_corners; ++k) {
            const std::vector<double> columns = columns_at(k);
            if (p_.part->has_sense) {
                note_output(c, chosen, columns);
            }
            const std::size_t globals = k & ((std::size_t{1} << at(out_.global_active)) - 1U);
            std::vector<travel_extreme> told(p_.figures.size());
            for (std::size_t f = 0; f < p_.figures.size(); ++f) {
                if (!c.samples[0].form[f].empty()) {
                    told[f] = extreme_of(c, f, columns);
                }
            }
            if (against_a_clamp(chosen, told)) {
                if (keep != nullptr) {
                    keep->volts.emplace_back(p_.part->branches.size(), 0.0);
                }
                continue;
            }
            for (std::size_t f = 0; f < p_.figures.size(); ++f) {
                if (!c.samples[0].form[f].empty()) {
                    widen(out_.by_globals[f][globals], told[f].low, told[f].high);
                    note_best(f, told[f]);
                }
            }
            note_power(c, chosen, told, keep);
            note_track_power(c, chosen, columns);
        }
    }

    /// A clamp conducts one way only. Where its current would run backwards it is open; the boundary between the two is a point of the open case,
    /// which is visited as such.
    bool against_a_clamp(const choice& chosen, const std::vector<travel_extreme>& told) const
    {
        for (std::size_t f = 0; f < p_.figures.size(); ++f) {
            if (p_.figures[f].what == component_plan::figure::of::through) {
                const auto b = at(p_.figures[f].a);
                if (p_.states[b][at(chosen[b])].is == form::clamp && told[f].high < 0.0) {
                    return true;
                }
            }
        }
        return false;
    }

    void note_output(const corner& c, const choice& chosen, const std::vector<double>& columns)
    {
        std::vector<const std::vector<double>*> forms;
        for (const corner_sample& s : c.samples) {
            forms.push_back(&s.output);
        }
        const travel_extreme e = travel_form(c.samples, forms, columns).over(from_, to_);
        if (e.pole || !(e.low > 0.0) || !std::isfinite(e.high)) {
            out_.lost = true;
            return;
        }
        if (!out_.output_low.known || e.low < out_.output_low.value) {
            out_.output_low = {chosen, columns, e.at_low, e.low, true};
        }
        if (!out_.output_high.known || e.high > out_.output_high.value) {
            out_.output_high = {chosen, columns, e.at_high, e.high, true};
        }
    }

    /// Figures are listed across, through for each branch in turn.
    void note_power(const corner& c, const choice& chosen, const std::vector<travel_extreme>& told, at_corner* keep)
    {
        using of = component_plan::figure::of;
        std::vector<double> volts(p_.part->branches.size(), 0.0);
        for (std::size_t f = 0; f < p_.figures.size(); ++f) {
            if (p_.figures[f].what != of::across || c.samples[0].form[f].empty()) {
                continue;
            }
            const auto branch_at = at(p_.figures[f].a);
            const travel_extreme& v = told[f];
            const travel_extreme& i = told[f + 1];
            const double high = std::max(std::abs(v.low), std::abs(v.high)) * std::max(std::abs(i.low), std::abs(i.high));
            const bool crosses = v.low * v.high <= 0.0 || i.low * i.high <= 0.0;
            const double low = crosses ? 0.0 : std::min(std::abs(v.low), std::abs(v.high)) * std::min(std::abs(i.low), std::abs(i.high));
            widen(out_.power[branch_at], low, high);
            const double signed_volts = std::abs(v.high) >= std::abs(v.low) ? v.high : v.low;
            volts[branch_at] = signed_volts;
            // The voltage's sign over all corners decides whether the power may come down to nothing.
            sign_seen(branch_at, v.low, v.high);
            static_cast<void>(chosen);
        }
        if (keep != nullptr) {
            keep->volts.push_back(std::move(volts));
        }
    }

    void sign_seen(std::size_t branch_at, double low, double high)
    {
        if (signs_.size() <= branch_at) {
            signs_.resize(branch_at + 1);
        }
        widen(signs_[branch_at], low, high);
        if (signs_[branch_at].low <= 0.0 && signs_[branch_at].high >= 0.0) {
            out_.power[branch_at].low = 0.0;
        }
    }

    /// Places along the travel, closer towards both ends: a section's power peaks where its resistance matches what feeds it, which may be a small
    /// share of the track. Neighbours differ by a quarter, so the peak of p/(p + a)^2 lies at most 0.4 % above the best of them.
    std::vector<double> places() const
    {
        std::vector<double> list{from_, to_};
        for (double p = 1e-6; p < 0.5; p *= 1.25) {
            for (const double place : {p, 1.0 - p}) {
                if (place > from_ && place < to_) {
                    list.push_back(place);
                }
            }
        }
        return list;
    }

    /// The whole track's dissipation peaks inside its travel: searched, a stated margin added by the caller.
    void note_track_power(const corner& c, const choice& chosen, const std::vector<double>& columns)
    {
        using of = component_plan::figure::of;
        for (std::size_t f = 0; f < p_.figures.size(); ++f) {
            if (p_.figures[f].what != of::section_1 || c.samples[0].form[f].empty()) {
                continue;
            }
            const auto track_at = at(p_.figures[f].a);
            const double ohms = p_.track_ohms[track_at][at(chosen[p_.states.size() + track_at])];
            std::vector<const std::vector<double>*> one;
            std::vector<const std::vector<double>*> two;
            for (const corner_sample& s : c.samples) {
                one.push_back(&s.form[f]);
                two.push_back(&s.form[f + 1]);
            }
            const travel_form first(c.samples, one, columns);
            const travel_form second(c.samples, two, columns);
            for (const double place : places_) {
                const double share = track_at == 0 ? place : share_of(chosen, track_at);
                const double watts = ohms * (std::pow(first.at(place), 2) * share + std::pow(second.at(place), 2) * (1.0 - share));
                widen(out_.track_power[track_at], watts, watts);
            }
        }
    }

    /// Where a further track's wiper stands at this corner.
    double share_of(const choice& chosen, std::size_t track_at) const
    {
        const std::size_t digit = p_.states.size() + p_.track_ohms.size() + track_at - 1;
        return p_.track_places[track_at - 1][at(chosen[digit])];
    }

    /// A resistance's own power peaks where it matches what feeds it: 1/V is affine in its conductance, so the peak follows from both ends of its
    /// box.
    void add_matches(std::size_t count)
    {
        const std::vector<int> base = radices(p_);
        std::size_t stride = 1;
        for (std::size_t b = 0; b < p_.states.size(); ++b) {
            for (std::size_t s = 0; s + 1 < p_.states[b].size(); ++s) {
                const branch_state& low = p_.states[b][s];
                const branch_state& high = p_.states[b][s + 1];
                if (low.end == 'l' && high.end == 'h') {
                    for (std::size_t i = 0; i < count; ++i) {
                        if (i / stride % at(base[b]) == s) {
                            match(b, low.ohms, high.ohms, voltages_[i], voltages_[i + stride]);
                        }
                    }
                }
            }
            stride *= at(base[b]);
        }
    }

    void match(std::size_t b, double low_ohms, double high_ohms, const at_corner& low, const at_corner& high)
    {
        const bool tracked = !p_.part->tracks.empty();
        for (std::size_t k = 0; k < low.volts.size() && k < high.volts.size(); ++k) {
            const double v1 = std::abs(low.volts[k][b]);
            const double v2 = std::abs(high.volts[k][b]);
            if (v1 <= 0.0 || v2 <= v1) {
                continue;
            }
            const double g1 = 1.0 / low_ohms;
            const double g2 = 1.0 / high_ohms;
            const double slope = (1.0 / v1 - 1.0 / v2) / (g1 - g2);
            if (!(slope > 0.0)) {
                continue;
            }
            const double start = 1.0 / v1 - slope * g1;
            const double peak_at = start / slope;
            if (tracked) {
                // With a wiper in its travel the ends belong to different positions: current rises and voltage falls with conductance, so their
                // product bounds the power.
                if (peak_at > 0.25 * g2 && peak_at < 4.0 * g1) {
                    widen(out_.power[b], out_.power[b].low, v1 * g1 * v2);
                }
            } else if (peak_at > g2 && peak_at < g1) {
                const double v = 0.5 / start;
                widen(out_.power[b], out_.power[b].low, peak_at * v * v);
            }
        }
    }

    /// Too many corners: for every figure and direction, from the best corner seen so far, one choice at a time until nothing grows. The figures are
    /// monotone in each choice, so this climbs to a corner that no single change betters; that it is the best of all is not proved.
    void search()
    {
        const std::vector<int> base = radices(p_);
        best_.assign(p_.figures.size() * 2, {});
        const auto look = [&](const choice& c) {
            if (seen_.insert(c).second) {
                current_ = &c;
                visit(c, nullptr);
                current_ = nullptr;
            }
        };
        for (unsigned start = 0; start < 4; ++start) {
            choice c;
            for (std::size_t d = 0; d < base.size(); ++d) {
                const bool high = start == 1 || (start > 1 && (d + start) % 2 == 0);
                c.push_back(high ? base[d] - 1 : 0);
            }
            look(c);
        }
        for (std::size_t target = 0; target < best_.size(); ++target) {
            for (bool grew = true; grew && !best_[target].at.empty();) {
                grew = false;
                for (std::size_t d = 0; d < base.size(); ++d) {
                    for (int s = 0; s < base[d]; ++s) {
                        const double before = best_[target].value;
                        choice next = best_[target].at;
                        next[d] = s;
                        look(next);
                        grew = grew || best_[target].value > before * (before > 0.0 ? 1.0 + 1e-12 : 1.0 - 1e-12);
                    }
                }
            }
        }
    }

    void note_best(std::size_t figure, const travel_extreme& e)
    {
        if (current_ == nullptr) {
            return;
        }
        for (const auto& [target, value] : {std::pair(2 * figure, e.high), std::pair(2 * figure + 1, -e.low)}) {
            if (best_[target].at.empty() || value > best_[target].value) {
                best_[target] = {*current_, value};
            }
        }
    }

    struct best_corner {
        choice at;
        double value = 0.0;
    };

    const component_plan& p_;
    sweep_result out_;
    double from_ = 0.0;
    double to_ = 0.0;
    std::vector<double> places_;
    std::vector<at_corner> voltages_;
    std::vector<figure_extreme> signs_;
    std::set<choice> seen_;           // search only
    std::vector<best_corner> best_;   // search only: per figure, high and low
    const choice* current_ = nullptr; // search only
};

} // namespace

sweep_result sweep(const component_plan& p)
{
    return walker(p).run();
}

figure_extreme overall(const sweep_result& s, std::size_t figure)
{
    figure_extreme out;
    for (const figure_extreme& e : s.by_globals[figure]) {
        if (e.known) {
            widen(out, e.low, e.high);
        }
    }
    if (s.searched && out.known) {
        const double room = s.margin * std::max({std::abs(out.low), std::abs(out.high), out.high - out.low});
        out.low -= room;
        out.high += room;
    }
    return out;
}

} // namespace onehand::circuit
