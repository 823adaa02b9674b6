#pragma once
// Parts as ideal elements: each part of a description, whole or with the fault put on it, becomes the elements its kind gives for a state, with their
// values and with the names of what is not known of them. Bodies of a series string are parts of their own here (expand_bodies).
#include "stress/fields.hpp"

namespace onehand {

/// One ideal element between two nets.
struct element {
    std::string ref;
    std::string from;
    std::string to;
    std::vector<element_spec::form> forms;      // several: any one of them may be the case
    std::map<element_spec::form, value> values; // of the forms that need one; a value may be missing
    std::string wiper;                          // form track: the third net
    value position;                             // form track: 0 at `from`
    bool charge_path = false;                   // soldered and resistive: counts for discharge
    bool main = true;                           // it lies between the terminals that the part's voltage is told of
};

/// The elements of one part in a state.
std::vector<element> elements_of(const part& p, const library& lib, state in);

/// The elements of every part not named in `left_out` (the converter's own switch and rectifier are told by the stage).
std::vector<element> wire(const supply& s, const library& lib, state in, const std::vector<std::string>& left_out);

/// True if the element may conduct in some form.
bool may_conduct(const element& e);
/// True if it conducts in every form.
bool surely_conducts(const element& e);
/// True if it makes its two nets one in every form: closed, or a coil, which is closed for direct current.
bool joins_nets(const element& e);

} // namespace onehand
