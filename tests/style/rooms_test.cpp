// The rooms and their one-way order: every #include under lib/ and cli/ against the table of the design.
#include <doctest/doctest.h>

#include <filesystem>
#include <fstream>
#include <map>
#include <set>
#include <sstream>
#include <string>
#include <vector>

namespace fs = std::filesystem;

namespace {

const fs::path root = ONEHAND_SOURCE;

const std::map<std::string, std::set<std::string>> may_include{
    {"quantity", {}},
    {"document", {"quantity"}},
    {"physics", {"quantity"}},
    {"circuit", {}},
    {"published", {"quantity", "document"}},
    {"supply", {"quantity", "document", "published"}},
    {"stress", {"quantity", "document", "physics", "circuit", "published", "supply"}},
    {"rule", {"quantity", "document", "published", "supply", "stress"}},
    {"audit", {"quantity", "document", "physics", "circuit", "published", "supply", "stress", "rule"}},
    {"report", {"quantity", "document", "published", "supply", "stress", "rule", "audit"}},
};

std::vector<fs::path> sources(const fs::path& below)
{
    std::vector<fs::path> list;
    for (const auto& e : fs::recursive_directory_iterator(below)) {
        if (e.path().extension() == ".cpp" || e.path().extension() == ".hpp") {
            list.push_back(e.path());
        }
    }
    return list;
}

std::vector<std::string> lines_of(const fs::path& p)
{
    std::ifstream in(p);
    std::vector<std::string> lines;
    for (std::string line; std::getline(in, line);) {
        lines.push_back(line);
    }
    return lines;
}

std::string included(const std::string& line)
{
    if (!line.starts_with("#include")) {
        return {};
    }
    const std::size_t from = line.find_first_of("\"<");
    return line.substr(from + 1, line.find_last_of("\">") - from - 1);
}

} // namespace

TEST_CASE("rooms include only what their row allows")
{
    int seen = 0;
    for (const fs::path& p : sources(root / "lib")) {
        const std::string room = fs::relative(p, root / "lib").begin()->string();
        REQUIRE(may_include.contains(room));
        for (const std::string& line : lines_of(p)) {
            const std::string what = included(line);
            const std::string other = what.substr(0, what.find('/'));
            if (may_include.contains(other) && what.find('/') != std::string::npos) {
                CAPTURE(p.string());
                CAPTURE(line);
                CHECK((other == room || may_include.at(room).contains(other)));
                ++seen;
            }
        }
    }
    CHECK(seen > 100);
}

TEST_CASE("the TOML library is seen by one room and heavy headers stay out of public ones")
{
    for (const fs::path& p : sources(root / "lib")) {
        const std::string room = fs::relative(p, root / "lib").begin()->string();
        for (const std::string& line : lines_of(p)) {
            const std::string what = included(line);
            CAPTURE(p.string());
            if (what.starts_with("toml++")) {
                CHECK(room == "document");
            }
            const bool heavy =
                what.starts_with("boost/") || what.starts_with("toml++") || what.starts_with("Eigen/") || what.starts_with("nlohmann/");
            const bool open = (room == "quantity" && p.filename() != "bridge.hpp") || room == "audit" || room == "report";
            if (p.extension() == ".hpp" && heavy) {
                CHECK_FALSE(open);
            }
        }
    }
}

TEST_CASE("the command line includes audit and report and no physics")
{
    static const std::set<std::string> allowed{"audit", "report"};
    for (const fs::path& p : sources(root / "cli")) {
        for (const std::string& line : lines_of(p)) {
            const std::string what = included(line);
            const std::string other = what.substr(0, what.find('/'));
            if (what.find('/') != std::string::npos && may_include.contains(other)) {
                CAPTURE(line);
                CHECK(allowed.contains(other));
            }
        }
    }
}

TEST_CASE("files stay short and nothing soothes")
{
    static const char* const soothing[] = {"is safe", "are safe", "perfectly safe", "harmless", "no danger", "nothing to worry"};
    for (const char* folder : {"lib", "cli"}) {
        for (const fs::path& p : sources(root / folder)) {
            const auto lines = lines_of(p);
            CAPTURE(p.string());
            CHECK(lines.size() <= 500);
            for (const std::string& line : lines) {
                for (const char* word : soothing) {
                    CHECK(line.find(word) == std::string::npos);
                }
            }
        }
    }
}

TEST_CASE("every rule is reached by a sample or says why not by its subject")
{
    // A rule whose subject occurs in no sample would never be seen at work.
    std::string all;
    for (const auto& e : fs::directory_iterator(root / "samples")) {
        std::ifstream in(e.path());
        std::stringstream text;
        text << in.rdbuf();
        all += text.str();
    }
    for (const auto& e : fs::directory_iterator(root / "rules")) {
        if (e.path().extension() != ".toml" || e.path().filename() == "sources.toml" || e.path().filename() == "limit-sets.toml") {
            continue;
        }
        std::string subject;
        for (const std::string& line : lines_of(e.path())) {
            if (line.starts_with("subject")) {
                subject = line.substr(line.find('"') + 1, line.rfind('"') - line.find('"') - 1);
            }
        }
        static const std::set<std::string> always{"gap", "net-pair", "stored", "access", "converter", "supply", "zener"};
        CAPTURE(e.path().string());
        CHECK((always.contains(subject) || all.find("[" + subject + "]") != std::string::npos));
    }
}
