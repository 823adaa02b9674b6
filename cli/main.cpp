// Reads arguments and files, calls audit and report, sets the exit code. No physics here.
#include "files.hpp"
#include "options.hpp"

#include "audit/audit.hpp"
#include "report/json.hpp"
#include "report/published_view.hpp"
#include "report/text.hpp"

#include <algorithm>
#include <atomic>
#include <cstdio>
#include <cstdlib>
#include <exception>
#include <fmt/format.h>
#include <thread>
#include <unistd.h>

namespace {

using namespace onehand;

/// The first of 3, 2, 1, 4, 0 that occurred.
int gravest(const std::vector<int>& codes)
{
    for (const int code : {3, 2, 1, 4}) {
        if (std::find(codes.begin(), codes.end(), code) != codes.end()) {
            return code;
        }
    }
    return 0;
}

/// Text to standard output or the file asked for; 0, or 3 with the reason told.
int deliver(const options& o, const std::string& text)
{
    if (!o.output.empty()) {
        if (const std::string why = write_file(o.output, text); !why.empty()) {
            fmt::print(stderr, "onehand: {}: {}\n", o.output, why);
            return 3;
        }
        return 0;
    }
    const bool written = std::fwrite(text.data(), 1, text.size(), stdout) == text.size();
    if (!written || std::fflush(stdout) != 0 || std::ferror(stdout) != 0) {
        std::fputs("onehand: the output could not be written\n", stderr);
        return 3;
    }
    return 0;
}

bool coloured(const options& o)
{
    if (o.colour != "auto") {
        return o.colour == "always";
    }
    const char* off = std::getenv("NO_COLOR");
    return (off == nullptr || *off == '\0') && o.output.empty() && ::isatty(STDOUT_FILENO) != 0;
}

session_result open(const options& o, int& code)
{
    std::vector<rule_text> own;
    if (!o.rules.empty()) {
        folder_texts read = read_folder(o.rules);
        if (!read.why.empty()) {
            fmt::print(stderr, "onehand: {} {}\n", o.rules, read.why);
            code = 2;
            return {};
        }
        for (auto& [name, text] : read.files) {
            own.push_back({name, std::move(text)});
        }
    }
    session_result opened = open_session(own);
    if (!opened.ready) {
        std::fputs(format_complaints(opened.complaints).c_str(), stderr);
        code = o.rules.empty() ? 3 : 2;
    }
    return opened;
}

/// Audits all files, on all cores; outcomes in the order of the files.
std::vector<audit_outcome> audit_all(const session& s, const options& o)
{
    std::vector<audit_request> requests;
    std::vector<audit_outcome> outcomes(o.files.size());
    for (std::size_t i = 0; i < o.files.size(); ++i) {
        file_text read = read_file(o.files[i]);
        audit_request request;
        request.file = o.files[i] == "-" ? "standard input" : o.files[i];
        request.settings = o.settings;
        request.limit_sets = o.limit_sets;
        if (read.text) {
            request.text = std::move(*read.text);
        } else {
            complaint c;
            c.at.file = o.files[i];
            c.message = read.why;
            outcomes[i].complaints.push_back(std::move(c));
        }
        requests.push_back(std::move(request));
    }
    std::atomic<std::size_t> next{0};
    const auto work = [&] {
        for (std::size_t i = next++; i < requests.size(); i = next++) {
            if (outcomes[i].complaints.empty()) {
                outcomes[i] = audit(s, requests[i]);
            }
        }
    };
    std::vector<std::thread> others;
    const std::size_t cores = std::min<std::size_t>(std::max(1U, std::thread::hardware_concurrency()), requests.size());
    for (std::size_t i = 1; i < cores; ++i) {
        others.emplace_back(work);
    }
    work();
    for (std::thread& t : others) {
        t.join();
    }
    return outcomes;
}

std::string one_text(const options& o, const audit_result& r, const text_options& how)
{
    return o.command == "discharge" ? discharge_report(r, how) : o.command == "spacing" ? spacing_report(r, how) : text_report(r, how);
}

int audited(const options& o, const session& s)
{
    for (const std::string& name : o.files) {
        if (!o.output.empty() && same_file(o.output, name)) {
            fmt::print(stderr, "onehand: --output {} would write over the description itself\n", o.output);
            return 2;
        }
    }
    const std::vector<audit_outcome> outcomes = audit_all(s, o);
    std::vector<int> codes;
    std::vector<json_input> inputs;
    std::string text;
    std::string stamp;
    const text_options how{coloured(o), o.show_working, &library_of(s)};
    for (const audit_outcome& outcome : outcomes) {
        const int code = exit_code(outcome);
        codes.push_back(o.command == "audit" || code == 2 ? code : 0);
        inputs.push_back({&outcome});
        if (o.format == "text") {
            std::fputs(format_complaints(outcome.complaints).c_str(), stderr);
        }
        if (outcome.result) {
            stamp = outcome.result->rules_stamp;
            text += (text.empty() ? "" : "\n") + one_text(o, *outcome.result, how);
        }
    }
    if (o.format == "json") {
        text = json_report(inputs, ONEHAND_VERSION, stamp, o.command == "audit" ? "" : o.command);
    }
    if (!text.empty()) {
        codes.push_back(deliver(o, text));
    }
    return gravest(codes);
}

int refused(const std::string& why)
{
    std::fputs(why.c_str(), stderr);
    return 2;
}

int run(const options& o)
{
    int code = 0;
    const session_result opened = open(o, code);
    if (!opened.ready) {
        return code;
    }
    const session& s = *opened.ready;
    if (o.command == "cite") {
        bool found = false;
        const std::string text = cite_text(library_of(s), rules_of(s), o.word, found);
        return found ? deliver(o, text) : refused(text);
    }
    if (o.command == "rules") {
        bool found = false;
        const std::string text = rules_text(library_of(s), rules_of(s), o.limit_sets, found);
        return found ? deliver(o, text) : refused(text);
    }
    if (o.command == "kinds") {
        bool found = false;
        const std::string text = kinds_text(library_of(s), o.word, found);
        return found ? deliver(o, text) : refused(text);
    }
    return audited(o, s);
}

} // namespace

int main(int count, char** words)
{
    try {
        const options o = read_options(count, words);
        return o.answered ? o.code : run(o);
    } catch (const std::exception& error) {
        fmt::print(stderr, "onehand: a fault in the program: {}\n", error.what());
        return 3;
    }
}
