// Any text as a rule expression: parsed, checked, printed, never a crash.
#include "published/embedded.hpp"
#include "rule/expression.hpp"

#include <cstdint>

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size)
{
    using namespace onehand;
    static const library_result loaded = load_library(embedded_rules());
    document doc;
    doc.file = "t";
    std::vector<complaint> complaints;
    const expression_place where{&doc, {"t", 1, 1}, true};
    auto e = parse_expression(std::string(reinterpret_cast<const char*>(data), size), where, complaints);
    if (e && check_expression(*e, loaded.lib, "resistor", where, complaints)) {
        print(*e);
    }
    return 0;
}
