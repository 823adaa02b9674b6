#pragma once
// The network with its surely closed branches merged, its held nodes told as sums of sources, and the rest split into components that no held node
// joins. Inside the room only.
#include "circuit/network.hpp"

#include <cstddef>
#include <cstdint>

namespace onehand::circuit {

/// Coefficients over the global sources (the output's own column last where it is held by feedback).
using combination = std::vector<double>;

struct component {
    std::vector<int> clusters; // unknown ones
    std::vector<int> branches;
    std::vector<int> tracks;
    bool has_sense = false; // the held output's sense node or reference lies in it
};

struct reduced {
    std::vector<int> cluster_of; // per node
    int clusters = 0;
    std::vector<std::optional<combination>> potential; // per cluster; nothing: unknown
    std::vector<box> sources;                          // boxes of the global columns; the output's box is filled in once it is found
    int output_column = -1;                            // -1: not held by feedback
    std::vector<int> unheld;                           // sources that hang on nothing, by their column
    std::vector<component> components;
    std::vector<int> component_of; // per cluster; -1: held
};

reduced reduce(const network& n);

/// True if some option of the branch conducts.
bool may_conduct(const branch& b);

} // namespace onehand::circuit
