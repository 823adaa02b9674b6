// Run while building: reads, checks and compiles everything under rules/ once and writes it as bytes in a C++ file. A mistake in a rule file ends the
// build with its place and caret.
#include "published/embedded.hpp"
#include "rule/packed.hpp"

#include <fmt/format.h>
#include <fstream>
#include <iostream>

namespace {

std::string as_literals(const std::string& bytes)
{
    std::string out;
    for (std::size_t from = 0; from < bytes.size(); from += 4000) {
        out += "        \"";
        for (const char c : bytes.substr(from, 4000)) {
            const bool plain = c >= ' ' && c < 127 && c != '"' && c != '\\' && c != '?';
            out += plain ? std::string(1, c) : fmt::format("\\{:03o}", static_cast<unsigned char>(c));
        }
        out += "\"\n";
    }
    return out;
}

} // namespace

int main(int count, char** words)
{
    using namespace onehand;
    if (count != 2) {
        std::cerr << "one argument: the file to write\n";
        return 2;
    }
    library_result loaded = load_library(embedded_rules());
    ready_set set;
    set.lib = std::move(loaded.lib);
    rules_result compiled = compile_rules(set.lib);
    loaded.complaints.insert(loaded.complaints.end(), compiled.complaints.begin(), compiled.complaints.end());
    std::cerr << format_complaints(loaded.complaints);
    if (any_mistake(loaded.complaints)) {
        return 1;
    }
    set.rules = std::move(compiled.rules);
    set.stamp = embedded_stamp();
    const std::string bytes = packed(set);
    std::ofstream out(words[1], std::ios::binary);
    out << "// Generated from rules/: do not edit.\n#include \"audit/session.hpp\"\n\nnamespace onehand {\n\n"
           "std::string_view packed_rules()\n{\n    static const char bytes[] =\n"
        << as_literals(bytes) << fmt::format("        ;\n    return {{bytes, {}}};\n}}\n\n}} // namespace onehand\n", bytes.size());
    return out.flush() ? 0 : 1;
}
