#include "stress/spacing_site.hpp"

#include "stress/fields.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

/// IEC 60664-1 material groups: the highest printed row that the CTI reaches; IIIa and IIIb share their columns.
std::optional<int> group_number(double cti, const library& lib)
{
    const table* t = lib.find_table("iec-60664-1-material-group");
    std::optional<int> group;
    for (std::size_t i = 0; t != nullptr && i < t->axis.size(); ++i) {
        if (cti >= t->axis[i]) {
            group = static_cast<int>(t->cells[i][0].front());
        }
    }
    return group;
}

/// The lowest CTI that the gap can have: as written, or the worst end of what is published of its surface.
std::optional<double> least_cti(const spacing_site& site)
{
    const gap* g = site.written;
    if (g == nullptr) {
        return std::nullopt;
    }
    if (g->cti && g->cti->number() != nullptr) {
        return g->cti->number()->whole.low;
    }
    const table* t = site.lib->find_table("surface-cti");
    if (!g->surface || g->surface->text() == nullptr || t == nullptr) {
        return std::nullopt;
    }
    double least = unbounded;
    for (const spread& s : look_up_choice(*t, "CTI", *g->surface->text())) {
        least = std::min(least, s.whole.low);
    }
    return std::isfinite(least) ? std::optional(least) : std::nullopt;
}

} // namespace

materials material_of(const spacing_site& site)
{
    materials m;
    const auto cti = least_cti(site);
    if (!cti) {
        m.groups = {"I", "II", "III"};
        m.missing.emplace_back("surface");
        return m;
    }
    const auto group = group_number(*cti, *site.lib);
    if (!group) {
        m.missing.emplace_back("a surface of CTI 100 or more: none is tabulated below");
        return m;
    }
    m.groups = {*group == 1 ? "I" : *group == 2 ? "II" : "III"};
    const bool copper = site.written->surface && site.written->surface->text() != nullptr && *site.written->surface->text() == "board copper";
    m.printed_wiring = copper && *group != 4;
    return m;
}

bool qualified_coating(const spacing_site& site)
{
    const gap* g = site.written;
    return g != nullptr && g->coating && g->coating->text() != nullptr && *g->coating->text() == "qualified";
}

bool inner_layer(const spacing_site& site)
{
    const gap* g = site.written;
    return g != nullptr && g->layer && g->layer->text() != nullptr && *g->layer->text() == "internal";
}

degree_told degree_of(const spacing_site& site)
{
    const use& u = *site.used;
    if (!u.pollution_degree || u.pollution_degree->number() == nullptr) {
        return {std::nullopt, "use.pollution-degree"};
    }
    const int degree = static_cast<int>(std::lround(u.pollution_degree->number()->whole.high));
    if (degree < 1 || degree > 3) {
        return {std::nullopt, "pollution degree 4 has no spacing"};
    }
    // A coating that passed its test keeps the dirt out: the columns of degree 1 hold under it.
    return {qualified_coating(site) ? 1 : degree, {}};
}

std::optional<spread> read_column(value& v, const spacing_site& site, const char* table_id, const std::string& column, const spread& axis)
{
    const table* t = site.lib->find_table(table_id);
    if (t == nullptr) {
        v.missing.push_back(std::string("table ") + table_id);
        return std::nullopt;
    }
    // Below the first printed row the first row is asked: more than the table says, never less.
    const table_answer a = look_up(*t, column, clamped(axis, t->axis.front(), unbounded));
    if (!a.figure) {
        v.missing.push_back(t->title + ": " + a.reason);
        return std::nullopt;
    }
    v.shown.inputs.push_back({t->title, a.rows, t->at});
    return a.figure;
}

std::optional<spread> altitude_factor(value& v, const spacing_site& site)
{
    const use& u = *site.used;
    if (!u.altitude || u.altitude->number() == nullptr) {
        v.missing.emplace_back("use.altitude");
        return std::nullopt;
    }
    // Up to 2000 m the tabulated clearances hold as they are; they are never made smaller.
    return read_column(v, site, "iec-60664-1-altitude", "factor", *u.altitude->number());
}

spread times(const spread& a, const spread& b)
{
    return {
        a.dim, {a.in_use.low * b.in_use.low, a.in_use.high * b.in_use.high}, {a.whole.low * b.whole.low, a.whole.high * b.whole.high}, std::nullopt};
}

spread greatest_of(const spread& a, const spread& b)
{
    return {a.dim,
            {std::max(a.in_use.low, b.in_use.low), std::max(a.in_use.high, b.in_use.high)},
            {std::max(a.whole.low, b.whole.low), std::max(a.whole.high, b.whole.high)},
            std::nullopt};
}

value basic_creepage(const spread& volts, const spacing_site& site, bool printed_wiring_counts)
{
    value v;
    v.shown.formula = "creepage at the working voltage";
    const degree_told degree = degree_of(site);
    if (!degree.degree) {
        v.missing.push_back(degree.missing);
        return v;
    }
    const materials m = material_of(site);
    std::vector<std::string> columns;
    if (printed_wiring_counts && m.printed_wiring && *degree.degree <= 2 && volts.whole.high <= 1000.0) {
        columns = {*degree.degree == 1 ? "PWB-PD1" : "PWB-PD2"};
    } else if (*degree.degree == 1) {
        columns = {"PD1"};
    } else {
        for (const std::string& g : m.groups) {
            columns.push_back("PD" + std::to_string(*degree.degree) + "-" + g);
        }
    }
    for (const std::string& column : columns) {
        if (const auto figure = read_column(v, site, "iec-60664-1-creepage", column, volts)) {
            v.numbers.push_back(*figure);
        }
    }
    if (*degree.degree > 1 || printed_wiring_counts) {
        v.missing.insert(v.missing.end(), m.missing.begin(), m.missing.end());
    }
    return v;
}

} // namespace onehand
