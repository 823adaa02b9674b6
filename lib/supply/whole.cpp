// What only the whole description shows: single nets, names one letter apart, references used twice.
#include "supply/reader.hpp"

#include <algorithm>

namespace onehand {

namespace {

/// One letter away: replaced, added, dropped, or in the other case.
bool one_letter_apart(const std::string& a, const std::string& b)
{
    return a != b && a.size() > 1 && b.size() > 1 && nearest_name(a, {b}) == b && std::max(a.size(), b.size()) - std::min(a.size(), b.size()) <= 1;
}

bool digits_differ(const std::string& a, const std::string& b)
{
    // AN1 and AN2 are names of a row, not a slip.
    if (a.size() != b.size()) {
        return std::isdigit(static_cast<unsigned char>(a.back())) != 0 || std::isdigit(static_cast<unsigned char>(b.back())) != 0;
    }
    for (std::size_t i = 0; i < a.size(); ++i) {
        if (a[i] != b[i]) {
            return std::isdigit(static_cast<unsigned char>(a[i])) != 0 && std::isdigit(static_cast<unsigned char>(b[i])) != 0;
        }
    }
    return false;
}

void check_single_nets(reader& r)
{
    for (const auto& [net, count] : r.uses) {
        if (count != 1) {
            continue;
        }
        const place at = r.built.net_at[net];
        if (net == r.built.return_net) {
            r.complain(at, "nothing joins the return net '" + net + "'");
            continue;
        }
        std::string near;
        for (const auto& [other, times] : r.uses) {
            const bool alike = one_letter_apart(net, other) && !digits_differ(net, other) && net.size() > 2;
            near = near.empty() && times > 1 && alike ? other : near;
        }
        if (near.empty()) {
            r.complain(at, "net '" + net + "' is named in one place only", gravity::note);
        } else {
            r.contradict(at, "net '" + net + "' is named in one place only; nearest known name: " + near, r.built.net_at[near]);
        }
    }
}

void check_polarity(reader& r)
{
    for (const part& p : r.built.parts) {
        const field* position = p.find("position");
        if (position != nullptr && position->number() != nullptr) {
            const spread& s = *position->number();
            if (s.whole.low < 0.0 || s.whole.high > 1.0) {
                r.complain(position->at, "'position' runs from 0, the first end, to 1");
            }
        }
    }
}

bool on_net(const part* p, const std::string& net)
{
    return p != nullptr && std::any_of(p->terminals.begin(), p->terminals.end(), [&](const terminal& t) { return t.net == net; });
}

/// A stage whose parts do not meet at the switch node is told: the figures speak of one that does.
void check_stage(reader& r)
{
    if (!r.built.stage || r.built.stage->topology == "module") {
        return;
    }
    const converter& c = *r.built.stage;
    const part* power_switch = r.built.find_part(c.power_switch);
    const part* coil = r.built.find_part(c.inductor);
    const part* rectifier = r.built.find_part(c.rectifier);
    if (power_switch == nullptr) {
        return;
    }
    const std::string& node = power_switch->terminals.front().net;
    if (coil != nullptr && !on_net(coil, node)) {
        r.complain(coil->at, "'" + coil->ref + "' does not reach net '" + node + "', where '" + power_switch->ref + "' switches", gravity::note);
    }
    if (coil != nullptr && c.topology == "flyback" && coil->kind != "transformer") {
        r.complain(coil->at, "a flyback stores in a transformer; '" + coil->ref + "' is of kind " + coil->kind);
    }
    if (rectifier == nullptr || coil == nullptr) {
        return;
    }
    if (c.topology == "boost" && rectifier->net("anode") != node) {
        r.complain(rectifier->at, "the anode of '" + rectifier->ref + "' is not on net '" + node + "', where '" + power_switch->ref + "' switches",
                   gravity::note);
    }
    if (c.topology == "flyback" && coil->kind == "transformer" && !on_net(rectifier, coil->net("secondary-1")) &&
        !on_net(rectifier, coil->net("secondary-2"))) {
        r.complain(rectifier->at, "'" + rectifier->ref + "' is not on the secondary of '" + coil->ref + "'", gravity::note);
    }
}

} // namespace

void check_whole(reader& r)
{
    check_stage(r);
    check_single_nets(r);
    check_polarity(r);
}

} // namespace onehand
