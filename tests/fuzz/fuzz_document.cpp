// Any text as a description: read, complained of, never a crash.
#include "published/embedded.hpp"
#include "supply/supply.hpp"

#include <cstdint>

extern "C" int LLVMFuzzerTestOneInput(const std::uint8_t* data, std::size_t size)
{
    using namespace onehand;
    static const library_result loaded = load_library(embedded_rules());
    const read_result read = read_document({reinterpret_cast<const char*>(data), size}, "t");
    if (read.complaints.empty()) {
        format_complaints(read_supply(read.doc, loaded.lib).complaints);
    }
    return 0;
}
