#include "physics/timer.hpp"

#include <limits>

namespace onehand::physics {

namespace {

const double two = std::log(2.0);

template<class N>
N charging(const N& share, const N& drop)
{
    // 1 + (share/2)/(1 - share - drop): each of them once but for the share, which only raises it.
    const N left = at_least(N(1.0) - share - drop, 0.0);
    if (!(most(left) > 0.0)) {
        return N(std::numeric_limits<double>::infinity()); // it never gets there
    }
    return logarithm(N(1.0) + share * N(0.5) / left);
}

} // namespace

template<class N>
astable_times<N> astable(const ohms<N>& ra, const ohms<N>& rb, const farads<N>& c, const N& share)
{
    return {(ra + rb) * c * charging(share, N(0.0)), rb * c * N(two)};
}

template<class N>
astable_times<N> astable_bypassed(const ohms<N>& ra, const ohms<N>& rb, const farads<N>& c, const N& share, const N& drop)
{
    return {ra * c * charging(share, drop), rb * c * N(two)};
}

template<class N>
N astable_duty(const ohms<N>& ra, const ohms<N>& rb, const N& share, const N& drop, bool bypassed)
{
    const N more = (ra / rb).value() + N(bypassed ? 0.0 : 1.0);
    return N(1.0) / (N(1.0) + N(two) / (charging(share, drop) * more));
}

template double astable_duty(const ohms<double>&, const ohms<double>&, const double&, const double&, bool);
template interval astable_duty(const ohms<interval>&, const ohms<interval>&, const interval&, const interval&, bool);
template astable_times<double> astable(const ohms<double>&, const ohms<double>&, const farads<double>&, const double&);
template astable_times<interval> astable(const ohms<interval>&, const ohms<interval>&, const farads<interval>&, const interval&);
template astable_times<double> astable_bypassed(const ohms<double>&, const ohms<double>&, const farads<double>&, const double&, const double&);
template astable_times<interval> astable_bypassed(const ohms<interval>&, const ohms<interval>&, const farads<interval>&, const interval&,
                                                  const interval&);

} // namespace onehand::physics
