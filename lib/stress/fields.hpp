#pragma once
// A field of a part as a value: as written, else from the published table of its choice (package, dielectric, surface), else missing by name. A named
// choice with several published values is judged at its worst end; an unknown choice leaves every published value possible (design law 6).
#include "published/library.hpp"
#include "stress/facts.hpp"
#include "supply/supply.hpp"

namespace onehand {

/// The value of `name` for this part; missing if its kind has no such field.
value field_value(const part& p, const kind_spec& kind, const library& lib, const std::string& name);

/// The value of an optional written field of a section ("use.ambient"), missing under that name if absent.
value written_value(const std::optional<field>& f, value::type type, const std::string& name);

/// Air around every part: ambient and the rise inside, both from [use].
value inside_temperature(const use& u);

/// One line of evidence for a written field.
evidence::input input_of(const std::string& name, const field& f);

} // namespace onehand
