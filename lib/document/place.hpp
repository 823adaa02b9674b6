#pragma once
// Where something was written: file, line and column, both 1-based, columns counted in code points. line 0: no place (a value that was computed or is
// absent).
#include <cstdint>
#include <string>

namespace onehand {

struct place {
    std::string file;
    std::uint32_t line = 0;
    std::uint32_t column = 0;

    friend bool operator==(const place&, const place&) = default;
};

/// File order within one file; files by name.
bool before(const place& a, const place& b);

} // namespace onehand
