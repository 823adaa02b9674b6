#pragma once
// Extremes of a closed form over a box: branch and bound on intervals. The answer holds every value the form takes in the box (certified), and is no
// wider than asked unless the form keeps growing where it is looked at (a pole), when an end is infinite.
#include "physics/interval.hpp"

#include <functional>
#include <span>
#include <vector>

namespace onehand::physics {

struct span_of {
    double low = 0.0;
    double high = 0.0;
};

using on_intervals = std::function<interval(std::span<const interval>)>;

/// `closeness`: how far, relative to the greatest magnitude, a bound may stand from a value that is taken; where some hundred boxes do not bring it
/// so near it stands farther. Boxes may reach to infinity.
span_of extremes(const on_intervals& form, const std::vector<span_of>& box, double closeness = 1e-5);

} // namespace onehand::physics
