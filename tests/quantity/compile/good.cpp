#include "physics/storage.hpp"
onehand::joule energy(onehand::farad c, onehand::volt u)
{
    return onehand::physics::stored_energy(c, u);
}
