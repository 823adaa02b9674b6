#pragma once
#include <string>
#include <string_view>

namespace onehand {

/// SHA-256 (FIPS 180-4) of the bytes, 64 lower-case hexadecimal digits.
std::string sha256_of(std::string_view bytes);

} // namespace onehand
