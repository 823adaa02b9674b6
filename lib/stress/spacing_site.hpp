#pragma once
// What the sets of spacing rules share: pollution degree, material, altitude, the least by degree. Inside the room only.
#include "stress/spacing.hpp"

namespace onehand {

/// Material groups of IEC 60664-1 that may hold: that of the surface, or all of them where it is unknown.
struct materials {
    std::vector<std::string> groups; // "I", "II", "III"
    bool printed_wiring = false;     // board copper of a known group but IIIb
    std::vector<std::string> missing;
};
materials material_of(const spacing_site& site);

/// 1 to 3, as written; under a qualified coating 1. Missing says why there is none.
struct degree_told {
    std::optional<int> degree;
    std::string missing;
};
degree_told degree_of(const spacing_site& site);

bool qualified_coating(const spacing_site& site);
bool inner_layer(const spacing_site& site);

/// The figure of one column, `volts` at or above the table's first row; rows are noted in `v`, a refusal is missing there.
std::optional<spread> read_column(value& v, const spacing_site& site, const char* table_id, const std::string& column, const spread& axis);

/// Table F.10, never below 1; missing in `v` without an altitude.
std::optional<spread> altitude_factor(value& v, const spacing_site& site);

/// Two non-negative spreads multiplied end by end; the dimension is the first's.
spread times(const spread& a, const spread& b);
/// The greater at each end.
spread greatest_of(const spread& a, const spread& b);

/// IEC 60664-1 creepage at the voltage, basic insulation, general columns or printed wiring.
value basic_creepage(const spread& volts, const spacing_site& site, bool printed_wiring_counts);

/// IPC-2221 into `need.board` and `need.board_column`.
void add_board(spacing_need& need, const value& working, const spacing_site& site);

/// One figure for every alternative of the working voltage, all that is missing gathered.
template<class F>
value each_voltage(const value& working, F figure)
{
    value out;
    for (const spread& volts : working.numbers) {
        value one = figure(volts);
        out.numbers.insert(out.numbers.end(), one.numbers.begin(), one.numbers.end());
        out.missing.insert(out.missing.end(), one.missing.begin(), one.missing.end());
        out.assumed.insert(out.assumed.end(), one.assumed.begin(), one.assumed.end());
        out.shown.inputs.insert(out.shown.inputs.end(), one.shown.inputs.begin(), one.shown.inputs.end());
        out.shown.formula = one.shown.formula;
    }
    return out;
}

} // namespace onehand
