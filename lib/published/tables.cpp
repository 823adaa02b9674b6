#include "published/reader.hpp"
#include "quantity/text.hpp"

#include <algorithm>
#include <charconv>
#include <cmath>

namespace onehand {

namespace {

/// A printed number in the unit of its column, in SI.
std::optional<double> printed_value(const std::string& cell, const std::string& unit, const dimension& d)
{
    const auto read = parse_quantity(unit.empty() ? cell : cell + " " + unit, d);
    const auto* q = std::get_if<quantity>(&read);
    return q == nullptr ? std::nullopt : std::optional(q->si);
}

std::optional<dimension> unit_dimension(const std::string& unit)
{
    if (unit.empty()) {
        return dim::none;
    }
    const auto q = parse_unit(unit);
    return q ? std::optional(q->dim) : std::nullopt;
}

void read_axis(table_reader& r, table& t)
{
    const node* axis = r.table("axis", true);
    if (axis == nullptr) {
        return;
    }
    table_reader a(r.doc(), *axis, r.place_of("axis"), r.complaints());
    if (axis->find("choice") != nullptr) {
        t.by_choice = true;
        t.axis_name = a.text("choice", true);
    } else {
        t.axis_name = a.text("name", true);
        t.axis_unit = a.text("unit", true);
        const auto d = unit_dimension(t.axis_unit);
        if (!d) {
            a.complain(a.place_of("unit"), "no unit '" + t.axis_unit + "'");
        }
        t.axis_dim = d.value_or(dim::none);
    }
    a.finish();
}

void read_columns(table_reader& r, table& t)
{
    const node* columns = r.list("columns", true);
    if (columns == nullptr) {
        return;
    }
    for (const node& c : columns->items) {
        table_reader one(r.doc(), c, c.at, r.complaints());
        table::column column{one.text("name", true), one.text("unit", true), {}};
        const auto d = unit_dimension(column.unit);
        if (!d) {
            one.complain(one.place_of("unit"), "no unit '" + column.unit + "'");
        }
        column.dim = d.value_or(dim::none);
        one.finish();
        t.columns.push_back(std::move(column));
    }
}

/// "50 V, 75 V", "0.4" or "-"; several where sources disagree.
std::vector<double> read_cell(table_reader& r, const node& cell, const table::column& column, bool by_choice)
{
    std::vector<double> values;
    if (cell.text == "-") {
        return values;
    }
    std::string_view left = cell.text;
    while (!left.empty()) {
        const std::size_t comma = left.find(',');
        std::string one(left.substr(0, comma));
        one.erase(0, one.find_first_not_of(' '));
        // A choice table prints each value with its unit.
        const auto value = printed_value(one, by_choice && column.dim != dim::none ? "" : column.unit, column.dim);
        if (!value) {
            r.complain(cell.at, "'" + one + "' is no number in " + (column.unit.empty() ? "plain figures" : column.unit));
            return values;
        }
        values.push_back(*value);
        left = comma == std::string_view::npos ? std::string_view{} : left.substr(comma + 1);
    }
    return values;
}

void read_row(table_reader& r, const node& row, table& t)
{
    const bool shaped = row.kind == node_kind::list && row.items.size() == t.columns.size() + 1 &&
                        std::all_of(row.items.begin(), row.items.end(), [](const node& n) { return n.kind == node_kind::text; });
    if (!shaped) {
        r.complain(row.at, "a row is a list of " + std::to_string(t.columns.size() + 1) + " texts: the axis and one a column");
        return;
    }
    std::vector<std::string> printed;
    std::vector<std::vector<double>> cells;
    for (std::size_t i = 0; i < row.items.size(); ++i) {
        printed.push_back(row.items[i].text);
        if (i > 0) {
            cells.push_back(read_cell(r, row.items[i], t.columns[i - 1], t.by_choice));
        }
    }
    if (t.by_choice) {
        t.choices.push_back(printed.front());
    } else if (const auto x = printed_value(printed.front(), t.axis_unit, t.axis_dim)) {
        t.axis.push_back(*x);
    } else {
        r.complain(row.items[0].at, "'" + printed.front() + "' is no number in " + t.axis_unit);
        return;
    }
    t.printed.push_back(std::move(printed));
    t.cells.push_back(std::move(cells));
}

void check_order(table_reader& r, const table& t)
{
    if (t.by_choice || t.axis.size() < 2) {
        return;
    }
    const bool up = t.axis[1] > t.axis[0];
    for (std::size_t i = 1; i < t.axis.size(); ++i) {
        if (up ? t.axis[i] <= t.axis[i - 1] : t.axis[i] >= t.axis[i - 1]) {
            r.complain(r.place_of("rows"), "the axis neither rises nor falls throughout: '" + t.printed[i].front() + "' breaks it");
            return;
        }
    }
}

void read_checks(table_reader& r, table& t)
{
    const node* checks = r.list("check", true);
    if (checks == nullptr) {
        return;
    }
    for (const node& c : checks->items) {
        table_reader one(r.doc(), c, c.at, r.complaints());
        table::check check;
        check.at = one.text(t.by_choice ? "choice" : "at", true);
        check.column = one.text("column", true);
        check.gives = one.text("gives", false);
        if (!one.truth("refused", false) && check.gives.empty()) {
            one.complain(c.at, "a check says what it gives, or refused = true");
        }
        check.where = c.at;
        one.finish();
        t.checks.push_back(std::move(check));
    }
}

} // namespace

table read_table(const document& doc, const std::string& id, std::vector<complaint>& complaints)
{
    table t;
    t.id = id;
    t.at = {doc.file, 1, 1};
    table_reader r(doc, doc.root, t.at, complaints);
    t.title = r.text("title", true);
    t.from = r.source("source", true);
    t.conditions = r.text("conditions", true);
    read_axis(r, t);
    read_columns(r, t);
    const std::string how = r.text("interpolate", true);
    t.between_rows = how == "linear" ? interpolation::linear : how == "step-up" ? interpolation::step_up : interpolation::none;
    if (how != "linear" && how != "step-up" && how != "none" && !how.empty()) {
        r.complain(r.place_of("interpolate"), "interpolate is linear, step-up or none");
    }
    t.interpolation_source = r.text("interpolate-source", how == "linear");
    for (const std::string& end : r.texts("open", false)) {
        t.open_low |= end == "low";
        t.open_high |= end == "high";
        if (end != "low" && end != "high") {
            r.complain(r.place_of("open"), "an open end is low or high");
        }
    }
    if (const node* rows = r.list("rows", true)) {
        for (const node& row : rows->items) {
            read_row(r, row, t);
        }
    }
    check_order(r, t);
    read_checks(r, t);
    r.finish();
    return t;
}

} // namespace onehand
