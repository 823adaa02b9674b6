#include "physics/ballast.hpp"

#include <algorithm>

namespace onehand::physics {

ohm ballast_resistance(volt source, volt held, ampere shunt, ampere load)
{
    return (source - held) / (shunt + load);
}

shunt_state shunt_regulator(volt source, ohm series, volt held, ohm load)
{
    shunt_state s;
    const volt divided = source * (1.0 / (1.0 + static_cast<double>(series / load)));
    s.regulating = divided > held;
    s.across = std::min(divided, held);
    s.series = (source - s.across) / series;
    s.load = s.across / load;
    s.shunt = s.regulating ? s.series - s.load : ampere{};
    s.in_series = s.series * s.series * series;
    s.in_shunt = s.shunt * held;
    return s;
}

ohm least_load(volt source, ohm series, volt held)
{
    return series * static_cast<double>(held / (source - held));
}

} // namespace onehand::physics
