// IPC-2221: functional spacing of conductors on a board.
#include "stress/spacing_site.hpp"
#include "stress/spread_math.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// Columns of IPC-2221 that may hold at the altitudes of use; none where it is no board.
std::vector<std::string> board_columns(const spacing_site& site, spacing_need& need)
{
    const gap* g = site.written;
    if (inner_layer(site)) {
        return {"B1"};
    }
    if (g == nullptr || !g->surface || g->surface->text() == nullptr) {
        need.board.missing.emplace_back("surface");
        return {};
    }
    const std::string& surface = *g->surface->text();
    const bool conductors = surface == "board copper" || surface == "stripboard";
    if (!conductors && surface != "FR-4") {
        need.board_column = "none";
        return {};
    }
    if (qualified_coating(site)) {
        return {conductors ? "A5" : "A7"}; // coated after assembly; B4 is for a coating of the bare board, no stricter anywhere
    }
    const use& u = *site.used;
    if (!u.altitude || u.altitude->number() == nullptr) {
        need.board.missing.emplace_back("use.altitude");
        return {};
    }
    constexpr double divide = 3050.0; // metres, IPC-2221
    const range& metres = u.altitude->number()->whole;
    std::vector<std::string> columns;
    if (metres.low <= divide) {
        columns.emplace_back(conductors ? "B2" : "A6");
    }
    if (metres.high > divide) {
        if (conductors) {
            columns.emplace_back("B3");
        } else {
            need.board.missing.emplace_back("a column for uncoated leads above 3050 m: none is printed");
        }
    }
    return columns;
}

std::optional<spread> board_spacing(value& v, const spacing_site& site, const std::string& column, const spread& volts)
{
    constexpr double last = 500.0; // volts: above it the table adds for each volt
    const table* steps = site.lib->find_table("ipc-2221-spacing");
    const table* more = site.lib->find_table("ipc-2221-per-volt");
    if (steps == nullptr || more == nullptr) {
        v.missing.emplace_back("table ipc-2221");
        return std::nullopt;
    }
    if (!volts.whole.bounded()) {
        v.missing.emplace_back("IPC-2221: the voltage is not known on one side");
        return std::nullopt;
    }
    auto figure = read_column(v, site, "ipc-2221-spacing", column, clamped(volts, 0.0, last));
    const std::vector<spread> slope = look_up_choice(*more, "mm-per-volt", column);
    if (figure && !slope.empty() && volts.whole.high > last) {
        const double metres_per_volt = slope.front().whole.high * 1e-3;
        const auto added = [&](double u) { return metres_per_volt * std::max(0.0, u - last); };
        for (const auto& [to, from] : {std::pair(&figure->in_use, &volts.in_use), std::pair(&figure->whole, &volts.whole)}) {
            to->low += added(from->low);
            to->high += added(from->high);
        }
        figure->nominal.reset();
        v.shown.inputs.push_back({more->title, "row " + column, more->at});
    }
    return figure;
}

} // namespace

void add_board(spacing_need& need, const value& working, const spacing_site& site)
{
    const std::vector<std::string> columns = board_columns(site, need);
    for (const std::string& column : columns) {
        need.board_column = column;
        for (const spread& volts : working.numbers) {
            if (const auto figure = board_spacing(need.board, site, column, volts)) {
                need.board.numbers.push_back(*figure);
            }
        }
    }
    if (columns.size() > 1 && !need.board.numbers.empty()) {
        // Both sides of 3050 m are in use: the wider column holds for all of it.
        spread all = need.board.numbers.front();
        for (const spread& s : need.board.numbers) {
            all = hull(all, s);
        }
        all.nominal.reset();
        need.board.numbers = {all};
    }
    need.board.shown.formula = "table 6-1 at the peak or d.c. voltage, steps to 500 V, then so much for each volt";
}

} // namespace onehand
