#include "supply/supply.hpp"

namespace onehand {

supply expand_bodies(const supply& s)
{
    supply out = s;
    out.parts.clear();
    for (const part& p : s.parts) {
        if (p.series == 1 && p.parallel == 1) {
            out.parts.push_back(p);
            continue;
        }
        int number = 0;
        for (int k = 0; k < p.parallel; ++k) {
            for (int i = 0; i < p.series; ++i) {
                part body = p;
                body.ref = p.ref + "/" + std::to_string(++number);
                body.series = body.parallel = 1;
                const std::string branch = p.ref + "~" + (p.parallel > 1 ? std::to_string(k + 1) + "." : "");
                if (i > 0) {
                    body.terminals[0].net = branch + std::to_string(i);
                }
                if (i + 1 < p.series) {
                    body.terminals[1].net = branch + std::to_string(i + 1);
                }
                out.parts.push_back(std::move(body));
            }
        }
    }
    return out;
}

} // namespace onehand
