#pragma once
// The published data and the compiled rules as one piece of bytes, written when the program is built and unpacked when it starts: nothing is parsed
// or checked again.
#include "rule/rules.hpp"

#include <string_view>

namespace onehand {

struct ready_set {
    library lib; // without rule documents: they are the rules
    std::shared_ptr<const rule_set> rules;
    std::string stamp; // SHA-256 of every built-in file, hexadecimal
};

std::string packed(const ready_set& set);
/// `bytes` of the same build; anything else is a fault of the program.
ready_set unpacked(std::string_view bytes);

} // namespace onehand
