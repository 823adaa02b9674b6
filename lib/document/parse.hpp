#pragma once
#include "document/document.hpp"

namespace onehand {

/// Parses into result.doc.root, or adds the complaints. Inside the room only.
void parse_into(std::string_view text, read_result& result);

} // namespace onehand
