#pragma once
// The plain text report, 80 columns: both conclusions and what to do first on the first screen, then findings by gravity with their figures and
// sources, then the figures themselves.
#include "audit/audit.hpp"

namespace onehand {

struct text_options {
    bool colour = false;          // adds to the words, never stands for them
    bool show_working = false;    // formulas, inputs, places; passes too
    const library* lib = nullptr; // for the titles of sources
};

std::string text_report(const audit_result& r, const text_options& options);
/// Only what stays after switch-off, pair by pair.
std::string discharge_report(const audit_result& r, const text_options& options);
/// Only the spacings: voltage, what is asked, what was measured.
std::string spacing_report(const audit_result& r, const text_options& options);

} // namespace onehand
