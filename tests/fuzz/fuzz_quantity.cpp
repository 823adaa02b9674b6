// Any text as a quantity of several dimensions: no crash, and what is read prints and reads back.
#include "quantity/text.hpp"

#include <cstdint>
#include <cstdlib>

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size)
{
    using namespace onehand;
    const std::string_view text(reinterpret_cast<const char*>(data), size);
    for (const dimension& d : {dim::voltage, dim::resistance, dim::capacitance, dim::temperature, dim::none}) {
        const auto read = parse_spread(text, d);
        if (const auto* s = std::get_if<spread>(&read)) {
            const auto again = parse_spread(write_spread(*s), d);
            const auto* t = std::get_if<spread>(&again);
            if (t == nullptr || !(t->whole == s->whole)) {
                std::abort();
            }
        }
    }
    return 0;
}
