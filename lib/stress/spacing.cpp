#include "stress/spacing.hpp"

#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

/// Column names of the creepage table that may hold: the material group of the surface, or all of them where it is unknown.
struct materials {
    std::vector<std::string> groups; // "I", "II", "III"
    bool board_copper = false;
    std::vector<std::string> missing;
};

/// IEC 60664-1: group I from CTI 600, II from 400, III (a and b share their columns) from 100; below 100 there is none.
std::optional<std::string> group_of(double cti)
{
    if (cti >= 600.0) {
        return "I";
    }
    if (cti >= 400.0) {
        return "II";
    }
    return cti >= 100.0 ? std::optional<std::string>("III") : std::nullopt;
}

void add_group(materials& m, double cti)
{
    if (const auto g = group_of(cti); g && std::find(m.groups.begin(), m.groups.end(), *g) == m.groups.end()) {
        m.groups.push_back(*g);
    } else if (!g) {
        m.missing.push_back("a surface of CTI 100 or more: none is tabulated below");
    }
}

materials material_of(const std::optional<field>& surface, const std::optional<field>& cti, const library& lib)
{
    materials m;
    if (cti && cti->number() != nullptr) {
        add_group(m, cti->number()->whole.low);
        return m;
    }
    const table* t = lib.find_table("surface-cti");
    if (surface && surface->text() != nullptr && t != nullptr) {
        m.board_copper = *surface->text() == "board copper";
        double least = unbounded;
        for (const spread& s : look_up_choice(*t, "CTI", *surface->text())) {
            least = std::min(least, s.whole.low);
        }
        if (std::isfinite(least)) {
            add_group(m, least); // the worst end of what is published of a named surface
            return m;
        }
    }
    m.groups = {"I", "II", "III"};
    m.missing.push_back("surface");
    return m;
}

std::optional<int> pollution(const use& u)
{
    if (!u.pollution_degree || u.pollution_degree->number() == nullptr) {
        return std::nullopt;
    }
    return static_cast<int>(std::lround(u.pollution_degree->number()->whole.high));
}

void note_rows(value& v, const table& t, const table_answer& a)
{
    v.shown.inputs.push_back({t.title, a.rows, t.at});
}

std::vector<std::string> creepage_columns(const materials& m, int degree, double volts)
{
    if (m.board_copper && degree <= 2 && volts <= 1000.0) {
        return {degree == 1 ? "PWB-PD1" : "PWB-PD2"};
    }
    if (degree == 1) {
        return {"PD1"};
    }
    std::vector<std::string> columns;
    for (const std::string& g : m.groups) {
        columns.push_back("PD" + std::to_string(degree) + "-" + g);
    }
    return columns;
}

value creepage_needed(const spread& volts, const materials& m, int degree, double times, const library& lib)
{
    value v;
    const table* t = lib.find_table("iec-60664-1-creepage");
    if (t == nullptr) {
        return missing_value(value::type::number, {"table iec-60664-1-creepage"});
    }
    for (const std::string& column : creepage_columns(m, degree, volts.whole.high)) {
        // Below the first printed row the first row is asked: more than the table says, never less.
        const table_answer a = look_up(*t, column, clamped(volts, t->axis.front(), unbounded));
        if (!a.figure) {
            v.missing.push_back("creepage: " + a.reason);
            continue;
        }
        v.numbers.push_back(scaled(*a.figure, times));
        note_rows(v, *t, a);
    }
    v.missing.insert(v.missing.end(), m.missing.begin(), m.missing.end());
    v.shown.formula = times > 1.0 ? "twice the basic creepage at the working voltage" : "creepage at the working voltage";
    return v;
}

std::optional<spread> altitude_factor(const use& u, const library& lib, value& v)
{
    const table* t = lib.find_table("iec-60664-1-altitude");
    if (!u.altitude || u.altitude->number() == nullptr || t == nullptr) {
        v.missing.push_back("use.altitude");
        return std::nullopt;
    }
    // Up to 2000 m the tabulated clearances hold as they are; they are never made smaller.
    const table_answer a = look_up(*t, "factor", clamped(*u.altitude->number(), t->axis.front(), unbounded));
    if (!a.figure) {
        v.missing.push_back("altitude: " + a.reason);
        return std::nullopt;
    }
    note_rows(v, *t, a);
    return *a.figure;
}

/// The least by pollution degree, whatever the voltage.
double least_clearance(int degree, const library& lib)
{
    const table* t = lib.find_table("iec-60664-1-clearance-least");
    const table_answer a = t == nullptr ? table_answer{} : look_up(*t, "least", exactly({static_cast<double>(degree), dim::none}));
    return a.figure ? a.figure->whole.high : 0.0;
}

value clearance_needed(const spread& volts, int degree, bool reinforced, const use& u, const library& lib)
{
    value v;
    const table* t = lib.find_table("iec-60664-1-clearance-steady");
    if (t == nullptr) {
        return missing_value(value::type::number, {"table iec-60664-1-clearance-steady"});
    }
    const spread peak = scaled(volts, reinforced ? 1.6 : 1.0);
    const table_answer a = look_up(*t, "case-A", clamped(peak, t->axis.front(), unbounded));
    const auto factor = altitude_factor(u, lib, v);
    if (!a.figure) {
        v.missing.push_back("clearance: " + a.reason);
    }
    if (!a.figure || !factor) {
        return v;
    }
    note_rows(v, *t, a);
    const spread floored = clamped(*a.figure, least_clearance(degree, lib), unbounded);
    v.numbers.push_back({dim::length,
                         {floored.in_use.low * factor->in_use.low, floored.in_use.high * factor->in_use.high},
                         {floored.whole.low * factor->whole.low, floored.whole.high * factor->whole.high},
                         std::nullopt});
    v.shown.formula = reinforced ? "clearance at 160 % of the peak, least by pollution degree, times altitude"
                                 : "clearance at the peak, least by pollution degree, times altitude";
    return v;
}

} // namespace

spacing_need spacing_needed(const value& working_voltage, const std::string& insulation, const std::optional<field>& surface,
                            const std::optional<field>& cti, const use& used, const library& lib)
{
    spacing_need need;
    inherit(need.creepage, working_voltage);
    inherit(need.clearance, working_voltage);
    const auto degree = pollution(used);
    if (!degree || *degree < 1 || *degree > 3) {
        const std::string why = degree ? "pollution degree 4 has no spacing" : "use.pollution-degree";
        need.creepage.missing.push_back(why);
        need.clearance.missing.push_back(why);
        return need;
    }
    const bool reinforced = insulation == "reinforced";
    const materials m = material_of(surface, cti, lib);
    for (const spread& volts : working_voltage.numbers) {
        value clearance = clearance_needed(volts, *degree, reinforced, used, lib);
        value creepage = creepage_needed(volts, m, *degree, reinforced ? 2.0 : 1.0, lib);
        inherit(clearance, need.clearance);
        inherit(creepage, need.creepage);
        need.clearance = clearance;
        // Along a surface never less than through the air beside it.
        const bool both = !clearance.numbers.empty() && !creepage.numbers.empty();
        const evidence shown = creepage.shown;
        need.creepage = both ? greater(creepage, clearance) : creepage;
        need.creepage.shown = shown;
    }
    return need;
}

} // namespace onehand
