#pragma once
// One corner of a component: every discrete state and resistance end chosen. It gives each figure as a linear form in the sources, or, with a wiper
// in its travel, three samples from which the exact rational function of the wiper's position is rebuilt. Inside the room only.
#include "circuit/reduced.hpp"

#include <array>

namespace onehand::circuit {

inline constexpr double least_ohms = 1e-3; // stands for a short where a resistance is unknown
inline constexpr double most_ohms = 1e15;  // stands for an open

/// A resistance as it can be solved with.
inline double usable(double ohms)
{
    return ohms < least_ohms ? least_ohms : ohms > most_ohms ? most_ohms : ohms;
}

/// A state of one branch at a corner.
struct branch_state {
    form is = form::open;
    double ohms = 0.0; // resistance
    box at;            // clamp or current: a column of its own
    char end = ' ';    // 'l', 'h': which end of the resistance
};

/// What a component can be in, and the figures asked of it.
struct component_plan {
    const network* net = nullptr;
    const reduced* red = nullptr;
    const component* part = nullptr;
    std::vector<std::vector<branch_state>> states; // per branch of the component
    std::vector<std::vector<double>> track_ohms;   // per track
    std::vector<std::vector<double>> track_places; // per further track (not the first): sampled positions
    int columns = 0;                               // globals, then one per branch, then threshold and bias
    int threshold_column = -1;
    std::vector<box> column_box;

    struct figure {
        enum class of { node, pair, across, through, section_1, section_2 };
        of what = of::node;
        int a = 0; // cluster, branch position, track position
        int b = 0;
    };
    std::vector<figure> figures;

    std::size_t corners() const; // product of all choices; saturates
};

component_plan plan_for(const network& n, const reduced& r, const component& c);

/// A choice: one index per branch, then per track resistance, then per further track position.
using choice = std::vector<int>;
choice choice_at(const component_plan& p, std::size_t number);
std::vector<int> radices(const component_plan& p);

/// Linear forms of all figures at one corner, at one position of the first track.
struct corner_sample {
    double weight = 1.0;                   // the denominator's value here, the same for all figures
    std::vector<std::vector<double>> form; // [figure][column]; empty: floating
    std::vector<double> output;            // form of the held output itself
};
struct corner {
    std::vector<corner_sample> samples; // one, or three with a track (positions 1/4, 1/2, 3/4)
    std::vector<bool> floating;         // per cluster of the component
    std::vector<int> island;            // per cluster: -1 held, else a number that those which float as one share
    bool lost = false;                  // the sense does not depend on the output
};
corner solve_corner(const component_plan& p, const choice& at);

/// Least and greatest of a figure at a corner for given column values, the first track's wiper anywhere in [from, to]. `at_low`, `at_high`: position
/// that gives it.
struct travel_extreme {
    double low = 0.0;
    double high = 0.0;
    double at_low = 0.0;
    double at_high = 0.0;
    bool pole = false; // the denominator vanishes inside
};
class travel_form {
public:
    travel_form(const std::vector<corner_sample>& samples, const std::vector<const std::vector<double>*>& forms, const std::vector<double>& columns);
    double at(double place) const;
    travel_extreme over(double from, double to) const;

private:
    std::array<double, 3> numerator_{};
    std::array<double, 3> denominator_{1.0, 0.0, 0.0};
    bool moves_ = false;
};

} // namespace onehand::circuit
