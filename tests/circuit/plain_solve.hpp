#pragma once
// An independent solve of one d.c. network of plain numbers: impedance-form rows for every branch in one dense system, by Eigen's full-pivoting LU (a
// general-purpose library). Shares no code with lib/circuit.
#include "circuit/network.hpp"

#include <Eigen/Dense>

namespace onehand::test {

struct plain_solution {
    Eigen::VectorXd volts;   // per node
    Eigen::VectorXd current; // per row: branches, then two per track, then sources, then the held output
    double held = 0.0;
};

inline plain_solution plain_solve(const circuit::network& n)
{
    struct row {
        int from, to;
        double kv, kr, e;
    };
    std::vector<row> rows;
    for (const auto& b : n.branches) {
        const auto& o = b.options.front();
        switch (o.is) {
        case circuit::form::resistance:
            rows.push_back({b.from, b.to, 1.0, o.at.low, 0.0});
            break;
        case circuit::form::clamp:
            rows.push_back({b.from, b.to, 1.0, 0.0, o.at.low});
            break;
        case circuit::form::current:
            rows.push_back({b.from, b.to, 0.0, -1.0, o.at.low});
            break;
        case circuit::form::closed:
            rows.push_back({b.from, b.to, 1.0, 0.0, 0.0});
            break;
        default:
            rows.push_back({b.from, b.to, 0.0, 1.0, 0.0});
            break;
        }
    }
    for (const auto& t : n.tracks) {
        rows.push_back({t.end_1, t.wiper, 1.0, t.resistance.low * t.position.low, 0.0});
        rows.push_back({t.wiper, t.end_2, 1.0, t.resistance.low * (1.0 - t.position.low), 0.0});
    }
    for (const auto& s : n.sources) {
        rows.push_back({s.plus, s.minus, 1.0, 0.0, s.volts.low});
    }
    const int nodes = n.nodes - 1;
    const int size = nodes + static_cast<int>(rows.size()) + (n.held ? 1 : 0);
    Eigen::MatrixXd a = Eigen::MatrixXd::Zero(size, size);
    Eigen::VectorXd b = Eigen::VectorXd::Zero(size);
    const auto add = [&](int r, int node, double x) {
        if (node > 0) {
            a(r, node - 1) += x;
        }
    };
    const auto leave = [&](int node, int column, double x) {
        if (node > 0) {
            a(node - 1, column) += x;
        }
    };
    for (std::size_t i = 0; i < rows.size(); ++i) {
        const int r = nodes + static_cast<int>(i);
        add(r, rows[i].from, rows[i].kv);
        add(r, rows[i].to, -rows[i].kv);
        a(r, r) -= rows[i].kr;
        b(r) = rows[i].e;
        leave(rows[i].from, r, 1.0);
        leave(rows[i].to, r, -1.0);
    }
    if (n.held) {
        const int r = size - 1;
        leave(n.held->plus, r, -1.0);
        leave(n.held->minus, r, 1.0);
        add(r, n.held->sense, 1.0);
        add(r, n.held->reference, -1.0);
        b(r) = n.held->threshold.low;
        if (n.held->sense > 0) {
            b(n.held->sense - 1) -= n.held->bias.low;
        }
    }
    const Eigen::VectorXd x = a.fullPivLu().solve(b);
    plain_solution out;
    out.volts = Eigen::VectorXd::Zero(n.nodes);
    out.volts.tail(nodes) = x.head(nodes);
    out.current = x.tail(size - nodes);
    if (n.held) {
        out.held = out.volts(n.held->plus) - out.volts(n.held->minus);
    }
    return out;
}

} // namespace onehand::test
