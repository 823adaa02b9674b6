// How much of an audit is loading the built-in rules: medians in one process, told as shares.
#include "audit/audit.hpp"
#include "published/embedded.hpp"

#include <algorithm>
#include <chrono>
#include <fmt/format.h>
#include <fstream>
#include <functional>
#include <sstream>

namespace {

double median_seconds(int runs, const std::function<void()>& work)
{
    std::vector<double> times;
    for (int i = 0; i < runs; ++i) {
        const auto from = std::chrono::steady_clock::now();
        work();
        times.push_back(std::chrono::duration<double>(std::chrono::steady_clock::now() - from).count());
    }
    std::nth_element(times.begin(), times.begin() + runs / 2, times.end());
    return times[static_cast<std::size_t>(runs / 2)];
}

} // namespace

int main(int count, char** words)
{
    using namespace onehand;
    constexpr int runs = 31;
    const double packed = median_seconds(runs, [] { open_session(); });
    const double texts = median_seconds(runs, [] {
        const library lib = load_library(embedded_rules()).lib;
        compile_rules(lib);
    });
    fmt::print("loading the rules: read from their texts it would take {:.1f} times as long\n", texts / packed);
    const session_result s = open_session();
    for (int i = 1; i < count; ++i) {
        std::ifstream in(words[i]);
        std::stringstream text;
        text << in.rdbuf();
        audit_request request;
        request.text = text.str();
        request.file = words[i];
        const double audited = median_seconds(runs, [&] { audit(*s.ready, request); });
        const double parsed = median_seconds(runs, [&] { read_document(request.text, request.file); });
        fmt::print("{}: loading the rules {:.1f} % of loading and audit; audit/parse {:.1f}\n", words[i], 100.0 * packed / (packed + audited),
                   audited / parsed);
    }
    return 0;
}
