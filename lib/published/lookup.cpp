#include "published/library.hpp"
#include "quantity/text.hpp"

#include <algorithm>
#include <cmath>

namespace onehand {

namespace {

struct axis_view {
    std::vector<double> x; // ascending
    std::vector<std::size_t> row;
};

axis_view ascending(const table& t)
{
    axis_view v;
    const bool up = t.axis.size() < 2 || t.axis[1] > t.axis[0];
    for (std::size_t i = 0; i < t.axis.size(); ++i) {
        const std::size_t at = up ? i : t.axis.size() - 1 - i;
        v.x.push_back(t.axis[at]);
        v.row.push_back(at);
    }
    return v;
}

std::optional<std::size_t> column_at(const table& t, const std::string& column)
{
    for (std::size_t i = 0; i < t.columns.size(); ++i) {
        if (t.columns[i].name == column) {
            return i;
        }
    }
    return std::nullopt;
}

std::string figure(const table& t, double x)
{
    return format_quantity({x, t.axis_dim});
}

struct reading {
    std::optional<double> y;
    std::string reason;
};

/// One printed value or the line between two; nothing beyond a closed end or on a cell that is not printed.
reading read_at(const table& t, const axis_view& v, std::size_t column, double x)
{
    const auto cell = [&](std::size_t i) -> std::optional<double> {
        const auto& values = t.cells[v.row[i]][column];
        return values.empty() ? std::nullopt : std::optional(values.front());
    };
    const auto none_printed = [&](double at) {
        return reading{std::nullopt, "nothing is printed in column " + t.columns[column].name + " at " + figure(t, at)};
    };
    if (x < v.x.front()) {
        if (!t.open_low) {
            return {std::nullopt, figure(t, x) + " is below the first printed row, " + figure(t, v.x.front())};
        }
        return cell(0) ? reading{cell(0), {}} : none_printed(v.x.front());
    }
    if (x > v.x.back()) {
        if (!t.open_high) {
            return {std::nullopt, figure(t, x) + " is above the last printed row, " + figure(t, v.x.back())};
        }
        return cell(v.x.size() - 1) ? reading{cell(v.x.size() - 1), {}} : none_printed(v.x.back());
    }
    const auto upper = static_cast<std::size_t>(std::lower_bound(v.x.begin(), v.x.end(), x) - v.x.begin());
    if (v.x[upper] == x) {
        return cell(upper) ? reading{cell(upper), {}} : none_printed(x);
    }
    const auto y0 = cell(upper - 1);
    const auto y1 = cell(upper);
    if (!y0 || !y1) {
        return none_printed(x);
    }
    switch (t.between_rows) {
    case interpolation::linear:
        return {*y0 + (*y1 - *y0) * (x - v.x[upper - 1]) / (v.x[upper] - v.x[upper - 1]), {}};
    case interpolation::step_up:
        return {y1, {}};
    default:
        return {std::nullopt, figure(t, x) + " lies between printed rows, and the source allows no reading there"};
    }
}

struct span_reading {
    std::optional<range> y;
    std::string reason;
};

span_reading read_over(const table& t, const axis_view& v, std::size_t column, const range& x)
{
    std::vector<double> points{x.low, x.high};
    for (const double printed : v.x) {
        if (printed > x.low && printed < x.high) {
            points.push_back(printed);
        }
    }
    std::optional<range> y;
    for (const double p : points) {
        const reading r = read_at(t, v, column, p);
        if (!r.y) {
            return {std::nullopt, r.reason};
        }
        y = y ? range{std::min(y->low, *r.y), std::max(y->high, *r.y)} : range{*r.y, *r.y};
    }
    return {y, {}};
}

std::string rows_named(const table& t, const axis_view& v, const range& x)
{
    const auto low = std::upper_bound(v.x.begin(), v.x.end(), x.low);
    const auto high = std::lower_bound(v.x.begin(), v.x.end(), x.high);
    const std::size_t first = low == v.x.begin() ? 0 : static_cast<std::size_t>(low - v.x.begin()) - 1;
    const std::size_t last = high == v.x.end() ? v.x.size() - 1 : static_cast<std::size_t>(high - v.x.begin());
    const auto row = [&](std::size_t i) { return t.printed[v.row[i]].front() + (t.axis_unit.empty() ? "" : " " + t.axis_unit); };
    return first >= last ? "row " + row(std::min(first, last)) : "rows " + row(first) + " to " + row(last);
}

} // namespace

table_answer look_up(const table& t, const std::string& column, const spread& axis_value)
{
    const auto at = column_at(t, column);
    if (!at || t.by_choice || t.axis.empty()) {
        return {std::nullopt, "no column " + column + " in " + t.title, {}};
    }
    if (!axis_value.whole.bounded() && !(t.open_low && axis_value.whole.high < unbounded) && !(t.open_high && axis_value.whole.low > -unbounded)) {
        return {std::nullopt, "the " + t.axis_name + " is not known on one side", {}};
    }
    const axis_view v = ascending(t);
    const span_reading whole = read_over(t, v, *at, axis_value.whole);
    if (!whole.y) {
        return {std::nullopt, whole.reason, {}};
    }
    const span_reading in_use = read_over(t, v, *at, axis_value.in_use);
    spread figure{t.columns[*at].dim, *in_use.y, *whole.y, std::nullopt};
    if (axis_value.nominal) {
        figure.nominal = read_at(t, v, *at, *axis_value.nominal).y;
    }
    return {figure, {}, rows_named(t, v, axis_value.whole)};
}

table_answer look_up_reverse(const table& t, const std::string& column, const spread& column_value)
{
    const auto at = column_at(t, column);
    if (!at || t.by_choice || t.axis.empty()) {
        return {std::nullopt, "no column " + column + " in " + t.title, {}};
    }
    // The same chords read the other way: axis and column change places.
    table turned = t;
    turned.axis_name = column;
    turned.axis_dim = t.columns[*at].dim;
    turned.axis_unit = t.columns[*at].unit;
    turned.columns = {{t.axis_name, t.axis_unit, t.axis_dim}};
    turned.axis.clear();
    turned.cells.clear();
    turned.printed.clear();
    for (std::size_t i = 0; i < t.axis.size(); ++i) {
        if (t.cells[i][*at].empty()) {
            continue;
        }
        turned.axis.push_back(t.cells[i][*at].front());
        turned.cells.push_back({{t.axis[i]}});
        turned.printed.push_back({t.printed[i][*at + 1], t.printed[i].front()});
    }
    const axis_view v = ascending(turned);
    if (std::adjacent_find(v.x.begin(), v.x.end(), [](double a, double b) { return a >= b; }) != v.x.end()) {
        return {std::nullopt, "column " + column + " repeats a value: it cannot be read backwards", {}};
    }
    turned.open_low = turned.open_high = false;
    return look_up(turned, t.axis_name, column_value);
}

std::vector<spread> look_up_choice(const table& t, const std::string& column, const std::string& choice)
{
    std::vector<spread> list;
    const auto at = column_at(t, column);
    const auto row = std::find(t.choices.begin(), t.choices.end(), choice);
    if (!at || row == t.choices.end()) {
        return list;
    }
    for (const double value : t.cells[static_cast<std::size_t>(row - t.choices.begin())][*at]) {
        list.push_back(exactly({value, t.columns[*at].dim}));
    }
    return list;
}

} // namespace onehand
