#pragma once
// Random d.c. networks for the worst-case tests: fixed seeds, every kind of element.
#include "circuit/network.hpp"

#include <algorithm>
#include <cmath>
#include <random>

namespace onehand::test {

using namespace onehand::circuit;

inline double between(std::mt19937& r, double a, double b)
{
    return std::uniform_real_distribution<double>(a, b)(r);
}

inline int pick(std::mt19937& r, int a, int b)
{
    return std::uniform_int_distribution<int>(a, b)(r);
}

inline box about(std::mt19937& r, double nominal, double most)
{
    const double t = between(r, 0.0, most);
    return {nominal * (1.0 - t), nominal * (1.0 + t)};
}

/// Two sources on nodes 1 and 2, `inner` further nodes, a tree of resistances that holds them all, extra ones across, perhaps a track.
inline network random_network(std::mt19937& r, int inner, int extra, bool with_track)
{
    network n;
    n.nodes = 3 + inner;
    n.sources.push_back({1, 0, about(r, between(r, 5.0, 300.0), 0.2)});
    n.sources.push_back({pick(r, 0, 1) == 0 ? 2 : 0, 2, {}});
    n.sources.back() = {2, 0, about(r, between(r, 1.0, 50.0), 0.2)};
    for (int i = 0; i < inner; ++i) {
        const int node = 3 + i;
        n.branches.push_back({pick(r, 0, node - 1), node, {{form::resistance, about(r, std::pow(10.0, between(r, 2.0, 6.0)), 0.3)}}});
    }
    for (int i = 0; i < extra; ++i) {
        const int a = pick(r, 0, n.nodes - 1);
        const int b = pick(r, 0, n.nodes - 1);
        if (a != b) {
            n.branches.push_back({a, b, {{form::resistance, about(r, std::pow(10.0, between(r, 2.0, 6.0)), 0.3)}}});
        }
    }
    if (with_track) {
        const int a = pick(r, 0, n.nodes - 1);
        const int w = 3 + pick(r, 0, inner - 1);
        const int b = pick(r, 0, n.nodes - 1);
        if (a != w && b != w) {
            n.tracks.push_back({a, w, b, about(r, std::pow(10.0, between(r, 3.0, 5.0)), 0.2), {0.0, 1.0}});
        }
    }
    return n;
}

/// One point inside all boxes, as a network of points.
inline network point_of(const network& n, std::mt19937& r, bool corners)
{
    network p = n;
    const auto draw = [&](box& b) {
        const double x = corners ? (pick(r, 0, 1) == 0 ? b.low : b.high) : between(r, b.low, b.high);
        b = {x, x};
    };
    for (source& s : p.sources) {
        draw(s.volts);
    }
    for (branch& b : p.branches) {
        for (option& o : b.options) {
            draw(o.at);
        }
    }
    for (track& t : p.tracks) {
        draw(t.resistance);
        draw(t.position);
        t.position = {std::clamp(t.position.low, 1e-9, 1.0 - 1e-9), std::clamp(t.position.low, 1e-9, 1.0 - 1e-9)};
    }
    if (p.held) {
        draw(p.held->threshold);
        draw(p.held->bias);
    }
    return p;
}

} // namespace onehand::test
