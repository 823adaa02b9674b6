#pragma once
#include <string>

namespace onehand {

/// One file of published data or rules as handed in: its name below the rules folder, and its whole text.
struct rule_text {
    std::string name;
    std::string text;
};

} // namespace onehand
