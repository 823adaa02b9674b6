#include "physics/ladder.hpp"

#include <cmath>

namespace onehand::physics {

ladder_load loaded(const std::vector<farad>& capacitors, ladder_form form, ampere load, hertz f)
{
    const std::size_t count = capacitors.size();
    const coulomb q = load / f;
    // Charge that passes a capacitor each cycle, over the output's: itself and every node above it in its column.
    const auto share = [&](std::size_t i) {
        const std::size_t above = (count - 1 - i) / 2;
        return form == ladder_form::from_base ? 1.0 : static_cast<double>(above + 1);
    };
    ladder_load out;
    volt down{}; // how far the capacitor's peak stands below its own unloaded voltage
    for (std::size_t i = 0; i < count; ++i) {
        const bool of_output = (count - 1 - i) % 2 == 0;
        if (of_output) {
            out.drop = form == ladder_form::from_base ? down : out.drop + down;
            out.ripple = form == ladder_form::from_base ? q / capacitors[i] : out.ripple + q / capacitors[i] * share(i);
        }
        down += q / capacitors[i] * share(i);
    }
    return out;
}

double best_stages(volt peak, hertz f, farad c, ampere load)
{
    return std::sqrt(static_cast<double>(peak * f * c / load));
}

joule ladder_energy(int stages, farad c, volt peak)
{
    return 0.5 * (8.0 * stages - 3.0) * c * peak * peak;
}

} // namespace onehand::physics
