#pragma once
// Finding the item that a subject speaks of, for the look-ups of facts. Inside the room only.
#include "stress/facts.hpp"

#include <algorithm>

namespace onehand {

template<class Item>
const Item* item_of(const std::vector<Item>& list, const subject& s)
{
    const auto it = std::find_if(list.begin(), list.end(), [&](const Item& i) { return i.about == s; });
    return it == list.end() ? nullptr : &*it;
}

inline value no_fact(const subject& s, const std::string& name)
{
    return missing_value(value::type::number, {s.name + "." + name});
}

} // namespace onehand
