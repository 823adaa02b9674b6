#pragma once
// All corners of one component: the extremes of every figure, kept apart by the corner of the global sources so that figures of two components can be
// combined exactly. Inside the room only.
#include "circuit/corner.hpp"

#include <set>
#include <utility>

namespace onehand::circuit {

struct figure_extreme {
    double low = 0.0;
    double high = 0.0;
    bool known = false;
};

struct output_corner {
    choice at;
    std::vector<double> columns;
    double place = 0.0;
    double value = 0.0;
    bool known = false;
};

struct sweep_result {
    std::vector<int> active;                             // columns that are boxes here and matter: globals first
    int global_active = 0;                               // how many of them are globals
    std::vector<std::vector<figure_extreme>> by_globals; // [figure][corner of the active globals]
    std::vector<figure_extreme> power;                   // per branch of the component
    std::vector<figure_extreme> track_power;             // per track
    std::vector<bool> floating;                          // per cluster of the component: in some corner
    std::set<std::pair<int, int>> apart;                 // clusters that in some corner neither are held both nor float as one island
    bool lost = false;
    output_corner output_low, output_high;
    bool searched = false;
    double margin = 0.0;
};

sweep_result sweep(const component_plan& p);

/// Over all corners of the globals, widened by the margin where searched.
figure_extreme overall(const sweep_result& s, std::size_t figure);

} // namespace onehand::circuit
