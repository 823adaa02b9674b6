// The spacings each set asks for one pair.
#include "stress/spacing.hpp"

#include "stress/fields.hpp"
#include "stress/spacing_site.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

bool reinforced(const spacing_site& site)
{
    return site.insulation == "reinforced";
}

/// Towards what lies outside the circuit; inside it the mains' transients stand on both ends alike.
bool against_transients(const spacing_site& site)
{
    return site.insulation != "functional";
}

/// A transient that comes in by the input's own two nets stands across the circuit too: declared as such, or the mains wired in.
bool transient_inside(const spacing_site& site)
{
    const auto feed = site.fed->fields.find("feed");
    const bool wired_in = feed != site.fed->fields.end() && feed->second.text() != nullptr && *feed->second.text() == "mains";
    return wired_in || site.fed->fields.contains("transient");
}

/// What reinforced insulation stands (IEC 60664-1, 5.1.6): the next of the preferred impulse voltages, 160 % of what is none of them. An impulse may
/// also be rated at the preferred one above it and take the step after that; the lesser of both ways, never below the step of the preferred one
/// below.
double reinforced_impulse(double volts)
{
    // 10 and 15 kV stand in the 2020 table of mains only: after 8 kV comes 12 kV.
    constexpr double series[] = {330, 500, 800, 1500, 2500, 4000, 6000, 8000, 12000};
    const auto above = std::lower_bound(std::begin(series), std::end(series), volts * (1.0 - 1e-9));
    const auto step_of = [&](const double* at) {
        if (at == std::end(series) || at + 1 == std::end(series)) {
            return unbounded;
        }
        return at[1];
    };
    const bool preferred = above != std::end(series) && *above <= volts * (1.0 + 1e-9);
    if (preferred && step_of(above) < unbounded) {
        return step_of(above);
    }
    const double asked = std::min(1.6 * volts, step_of(above));
    const bool below = above != std::begin(series) && above != std::end(series);
    return below ? std::max(asked, step_of(above - 1)) : asked;
}

/// The greater of both; where one is unknown, anything from the other up.
value greater_known(const value& a, const value& b)
{
    if (a.numbers.empty() || b.numbers.empty()) {
        value out = a.numbers.empty() ? b : a;
        for (spread& s : out.numbers) { // at least the known figure
            s.in_use.high = s.whole.high = unbounded;
            s.nominal.reset();
        }
        inherit(out, a.numbers.empty() ? a : b);
        return out;
    }
    value out = greater(a, b);
    out.shown = a.shown;
    out.shown.inputs.insert(out.shown.inputs.end(), b.shown.inputs.begin(), b.shown.inputs.end());
    return out;
}

/// Floor by pollution degree and altitude factor, which every clearance shares.
void finish_clearance(value& v, const spacing_site& site, const char* least_table, const std::string& least_column)
{
    const degree_told degree = degree_of(site);
    if (!degree.degree) {
        v.numbers.clear();
        v.missing.push_back(degree.missing);
        return;
    }
    const auto factor = altitude_factor(v, site);
    const auto least = read_column(v, site, least_table, least_column, exactly({static_cast<double>(*degree.degree), dim::none}));
    if (!factor || !least) {
        v.numbers.clear();
        return;
    }
    for (spread& s : v.numbers) {
        s = times(greatest_of(s, *least), *factor);
    }
}

value steady_clearance(const spread& volts, const spacing_site& site)
{
    value v;
    v.shown.formula = reinforced(site)
                          ? "greater of the clearances at 160 % of the peak and at the next impulse step, least by pollution degree, altitude"
                          : "greater of the clearances at the peak and at the impulse, least by pollution degree, altitude";
    if (const auto figure = read_column(v, site, "iec-60664-1-clearance-steady", "case-A", scaled(volts, reinforced(site) ? 1.6 : 1.0))) {
        v.numbers.push_back(*figure);
    }
    return v;
}

value transient_clearance(const value& impulse, const spacing_site& site)
{
    value v;
    inherit(v, impulse);
    const degree_told degree = degree_of(site);
    if (!degree.degree) {
        v.missing.push_back(degree.missing);
        return v;
    }
    for (const spread& s : impulse.numbers) {
        const double peak = s.whole.high;
        if (peak <= 0.0) {
            v.numbers.push_back(exactly({0.0, dim::length}));
            continue;
        }
        const double asked = reinforced(site) ? reinforced_impulse(peak) : peak;
        const std::string column = "A-PD" + std::to_string(*degree.degree);
        if (const auto figure = read_column(v, site, "iec-60664-1-clearance-transient", column, exactly({asked, dim::voltage}))) {
            v.numbers.push_back(*figure);
        }
    }
    return v;
}

void add_coordination(spacing_need& need, const value& working, const value& impulse, const spacing_site& site)
{
    need.clearance = each_voltage(working, [&](const spread& volts) { return steady_clearance(volts, site); });
    if (against_transients(site) || transient_inside(site)) {
        need.clearance = greater_known(need.clearance, transient_clearance(impulse, site));
    }
    finish_clearance(need.clearance, site, "iec-60664-1-clearance-least", "least");
    need.creepage = each_voltage(working, [&](const spread& volts) { return basic_creepage(volts, site, true); });
    if (reinforced(site)) {
        need.creepage.shown.formula = "twice the basic creepage at the working voltage";
        for (spread& s : need.creepage.numbers) {
            s = scaled(s, 2.0);
        }
    }
}

/// Table K.11: its columns stand for the impulse of the mains they name.
std::optional<std::string> column_for(double impulse)
{
    static const std::pair<double, const char*> columns[] = {{2500.0, "to-150"}, {4000.0, "to-300"}, {6000.0, "to-600"}, {8000.0, "to-1000"}};
    for (const auto& [volts, name] : columns) {
        if (impulse <= volts * (1.0 + 1e-9)) {
            return name;
        }
    }
    return std::nullopt;
}

/// Table K.11 is for what the mains reaches. Without mains it is silent, and the air must still stand the steady voltage: IEC 60664-1 table F.8.
value laboratory_clearance(const spread& volts, const value& impulse, const spacing_site& site)
{
    value v;
    v.shown.formula = "table K.11 at the working voltage, or table F.8 of IEC 60664-1 without mains, least by pollution degree, altitude; twice for "
                      "reinforced";
    for (const spread& s : impulse.numbers) {
        const bool mains = s.whole.high > 0.0;
        const auto column = column_for(s.whole.high);
        if (mains && !column) {
            v.missing.emplace_back("a column of table K.11 for so high an impulse");
            continue;
        }
        const auto figure = mains ? read_column(v, site, "iec-61010-1-secondary", *column, volts)
                                  : read_column(v, site, "iec-60664-1-clearance-steady", "case-A", volts);
        if (figure) {
            v.numbers.push_back(*figure);
        }
    }
    return v;
}

void add_laboratory(spacing_need& need, const value& working, const value& impulse, const spacing_site& site)
{
    if (!against_transients(site)) {
        return;
    }
    const double times_basic = reinforced(site) ? 2.0 : 1.0;
    need.lab_clearance = each_voltage(working, [&](const spread& volts) { return laboratory_clearance(volts, impulse, site); });
    inherit(need.lab_clearance, impulse);
    finish_clearance(need.lab_clearance, site, "iec-60664-1-clearance-least", "least");
    need.lab_creepage = each_voltage(working, [&](const spread& volts) { return basic_creepage(volts, site, true); });
    for (value* v : {&need.lab_clearance, &need.lab_creepage}) { // the least by degree is doubled with the rest
        for (spread& s : v->numbers) {
            s = scaled(s, times_basic);
        }
    }
}

void add_equipment(spacing_need& need, const value& working, const value& impulse, const spacing_site& site)
{
    if (!against_transients(site)) {
        return;
    }
    const std::string column = reinforced(site) ? "reinforced" : "basic";
    // Copies disagree whether table 10 is read at the working peak alone or at the transient too: the stricter reading counts.
    double most_transient = 0.0;
    for (const spread& s : impulse.numbers) {
        most_transient = std::max(most_transient, s.whole.high);
    }
    const value steady = each_voltage(working, [&](const spread& volts) {
        value v;
        if (const auto figure = read_column(v, site, "iec-62368-1-clearance-peak", column, clamped(volts, most_transient, unbounded))) {
            v.numbers.push_back(*figure);
        }
        v.shown.formula = "greater of tables 10 (peak, transient) and 14 (transient), least by pollution degree, altitude";
        return v;
    });
    value transient;
    inherit(transient, impulse);
    for (const spread& s : impulse.numbers) {
        const auto figure = s.whole.high > 0.0
                                ? read_column(transient, site, "iec-62368-1-clearance-withstand", column, exactly({s.whole.high, dim::voltage}))
                                : std::optional(exactly({0.0, dim::length}));
        if (figure) {
            transient.numbers.push_back(*figure);
        }
    }
    need.equipment_clearance = greater_known(steady, transient);
    finish_clearance(need.equipment_clearance, site, "iec-62368-1-clearance-least", column);
    need.equipment_creepage = each_voltage(working, [&](const spread& volts) { return basic_creepage(volts, site, false); });
    for (spread& s : need.equipment_creepage.numbers) {
        s = scaled(s, reinforced(site) ? 2.0 : 1.0);
    }
}

/// Along a surface never less than through the air beside it.
value at_least_clearance(const value& creepage, const value& clearance)
{
    value out = creepage.numbers.empty() || clearance.numbers.empty() ? greater_known(creepage, clearance) : greater(creepage, clearance);
    out.shown = creepage.shown;
    return out;
}

} // namespace

spacing_need spacing_needed(const value& working_voltage, const spacing_site& site)
{
    spacing_need need;
    const value impulse = mains_impulse(*site.fed, *site.lib);
    add_coordination(need, working_voltage, impulse, site);
    add_laboratory(need, working_voltage, impulse, site);
    add_equipment(need, working_voltage, impulse, site);
    add_board(need, working_voltage, site);
    need.creepage = at_least_clearance(need.creepage, need.clearance);
    if (against_transients(site)) {
        need.lab_creepage = at_least_clearance(need.lab_creepage, need.lab_clearance);
        need.equipment_creepage = at_least_clearance(need.equipment_creepage, need.equipment_clearance);
    }
    // A set that asks nothing stays empty; one that asks carries what is not known of the voltage.
    std::vector<value*> asked{&need.creepage, &need.clearance};
    if (against_transients(site)) {
        asked.insert(asked.end(), {&need.lab_creepage, &need.lab_clearance, &need.equipment_creepage, &need.equipment_clearance});
    }
    if (need.board_column != "none") {
        asked.push_back(&need.board);
    }
    for (value* v : asked) {
        inherit(*v, working_voltage);
        if (v->numbers.empty() && v->missing.empty()) {
            v->missing.emplace_back("the working voltage");
        }
    }
    return need;
}

set_need need_of(const spacing_need& need, const limit_set& set)
{
    const std::pair<const char*, set_need> told[] = {{"iec-60664-1", {&need.clearance, &need.creepage}},
                                                     {"iec-61010-1", {&need.lab_clearance, &need.lab_creepage}},
                                                     {"iec-62368-1", {&need.equipment_clearance, &need.equipment_creepage}},
                                                     {"ipc-2221", {&need.board, &need.board}}};
    for (const auto& [source, figures] : told) {
        if (std::find(set.sources.begin(), set.sources.end(), source) != set.sources.end()) {
            return figures;
        }
    }
    return {};
}

} // namespace onehand
