// Recorded reports of every sample. ONEHAND_RECORD=1 in the environment writes them anew; CI never does.
#include "audit/audit.hpp"
#include "report/json.hpp"
#include "report/published_view.hpp"
#include "report/text.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <cctype>
#include <cstdlib>
#include <filesystem>
#include <fstream>
#include <nlohmann/json.hpp>
#include <set>
#include <sstream>

using namespace onehand;
namespace fs = std::filesystem;

namespace {

const fs::path source_root = ONEHAND_SOURCE;

std::string slurp(const fs::path& p)
{
    std::ifstream in(p);
    std::stringstream text;
    text << in.rdbuf();
    return text.str();
}

const session& opened()
{
    static const session_result s = open_session();
    return *s.ready;
}

std::vector<fs::path> samples()
{
    std::vector<fs::path> list;
    for (const auto& e : fs::directory_iterator(source_root / "samples")) {
        if (e.path().extension() == ".toml") {
            list.push_back(e.path());
        }
    }
    std::sort(list.begin(), list.end());
    return list;
}

audit_outcome run(const fs::path& p)
{
    audit_request q;
    q.text = slurp(p);
    q.file = "samples/" + p.filename().string();
    return audit(opened(), q);
}

void compare(const fs::path& recorded, const std::string& now)
{
    const char* record = std::getenv("ONEHAND_RECORD");
    if (record != nullptr && std::string(record) == "1") {
        std::ofstream(recorded) << now;
    }
    REQUIRE(fs::exists(recorded));
    CHECK(slurp(recorded) == now);
}

} // namespace

TEST_CASE("text and JSON of every sample are as recorded")
{
    const text_options how{false, false, &library_of(opened())};
    for (const fs::path& p : samples()) {
        CAPTURE(p.string());
        const audit_outcome o = run(p);
        REQUIRE(o.result);
        const std::string stem = p.stem().string();
        compare(source_root / "tests/recorded" / (stem + ".txt"), text_report(*o.result, how));
        // The stamp of the rules changes with every rule: it is not part of the record.
        compare(source_root / "tests/recorded" / (stem + ".json"), json_report({{&o}}, "0", "0"));
    }
}

TEST_CASE("the table of limit sets in README is current")
{
    const std::string from = "<!-- limit sets: written by tests/report, do not edit -->\n";
    const std::string to = "<!-- limit sets end -->";
    std::string readme = slurp(source_root / "README.md");
    const std::size_t a = readme.find(from);
    const std::size_t b = readme.find(to);
    REQUIRE(a != std::string::npos);
    REQUIRE(b != std::string::npos);
    readme.replace(a, b - a, from + '\n' + limit_set_table(library_of(opened()), rules_of(opened())) + '\n');
    compare(source_root / "README.md", readme);
}

TEST_CASE("no recording without a sample")
{
    std::set<std::string> stems;
    for (const fs::path& p : samples()) {
        stems.insert(p.stem().string());
    }
    for (const auto& e : fs::directory_iterator(source_root / "tests/recorded")) {
        CHECK(stems.contains(e.path().stem().string()));
    }
}

TEST_CASE("the text keeps to 80 columns and to its own first screen" * doctest::test_suite("long"))
{
    const text_options how{false, true, &library_of(opened())};
    for (const fs::path& p : samples()) {
        const std::string text = text_report(*run(p).result, how);
        std::stringstream lines(text);
        std::string line;
        int number = 0;
        bool energise = false;
        bool reach_in = false;
        while (std::getline(lines, line)) {
            ++number;
            energise |= number <= 24 && line.starts_with("Energise:");
            reach_in |= number <= 24 && line.starts_with("Reach in:");
            const auto columns = std::count_if(line.begin(), line.end(), [](unsigned char c) { return (c & 0xC0U) != 0x80U; });
            CAPTURE(line);
            CHECK((columns <= 80 || line.find("  ") == std::string::npos || line.find("mm") != std::string::npos));
        }
        CHECK(energise);
        CHECK(reach_in);
        CHECK(text.find("Local codes and licensed practice") != std::string::npos);
        CHECK(text.find(" safe") == std::string::npos);
    }
}

TEST_CASE("the same bytes from run to run and colour adds only colour" * doctest::test_suite("long"))
{
    for (const fs::path& p : samples()) {
        const audit_outcome a = run(p);
        const audit_outcome b = run(p);
        CHECK(json_report({{&a}}, "0", "0") == json_report({{&b}}, "0", "0"));
        std::string plain = text_report(*a.result, {false, false, nullptr});
        std::string coloured = text_report(*a.result, {true, false, nullptr});
        for (std::size_t at = coloured.find("\x1b["); at != std::string::npos; at = coloured.find("\x1b[")) {
            coloured.erase(at, coloured.find('m', at) - at + 1);
        }
        // Wrapping counts the escapes in one place only: words are the same.
        plain.erase(std::remove_if(plain.begin(), plain.end(), ::isspace), plain.end());
        coloured.erase(std::remove_if(coloured.begin(), coloured.end(), ::isspace), coloured.end());
        CHECK(plain == coloured);
    }
}

TEST_CASE("figures of the text are those of the JSON")
{
    const audit_outcome o = run(source_root / "samples/tide-clock-corrected.toml");
    const auto j = nlohmann::json::parse(json_report({{&o}}, "0", "0"));
    const auto& a = j["audits"][0];
    CHECK(a["conclusion"]["energise"] == "conditional");
    CHECK(a["converter"]["set-point"]["high"].get<double>() == o.result->set_point->output.numbers.front().whole.high);
    CHECK(a["counts"]["fail"] == 0);
    CHECK(a["findings"].size() == o.result->judged.findings.size());
    CHECK(a["label"]["wait"]["high"].get<double>() == o.result->label->wait.numbers.front().whole.high);
    CHECK(a["nets"]["HT"]["running"]["unit"] == "V");
}
