// The published data as loaded: printed cells read back, checks of every table, loader refusals.
#include "published/embedded.hpp"
#include "published/library.hpp"
#include "quantity/text.hpp"

#include <doctest/doctest.h>

#include <algorithm>
#include <filesystem>
#include <fstream>
#include <iterator>

using namespace onehand;

namespace {

const library& data()
{
    static const library_result loaded = load_library(embedded_rules());
    return loaded.lib;
}

double read(const std::string& text, const dimension& d)
{
    return std::get<quantity>(parse_quantity(text, d)).si;
}

std::string refusal(const std::string& name, const std::string& text)
{
    std::vector<rule_text> own{{name, text}};
    const library_result r = load_library(embedded_rules(), own);
    std::string all;
    for (const complaint& c : r.complaints) {
        all += (all.empty() ? "" : " || ") + std::to_string(c.at.line) + ":" + std::to_string(c.at.column) + ": " + c.message;
    }
    return all;
}

const char* const small_table = "title = \"T\"\nsource = { cite = \"practice\", clause = \"-\", basis = \"practice\" }\nconditions = \"none\"\naxis "
                                "= { name = \"voltage\", unit = \"V\" }\n"
                                "columns = [{ name = \"a\", unit = \"mm\" }]\ninterpolate = \"none\"\nrows = [[\"1\", \"2\"], [\"3\", "
                                "\"4\"]]\n[[check]]\nat = \"1 V\"\ncolumn = \"a\"\ngives = \"2 mm\"\n";

std::string with(const std::string& from, const std::string& to)
{
    std::string text = small_table;
    text.replace(text.find(from), from.size(), to);
    return text;
}

} // namespace

TEST_CASE("the built-in data load without complaint")
{
    const library_result r = load_library(embedded_rules());
    CHECK(format_complaints(r.complaints) == "");
    CHECK(r.lib.kinds.size() == 25);
    CHECK(r.lib.tables.size() >= 8);
    CHECK(r.lib.limit_sets.size() >= 6);
}

TEST_CASE("every check point of every table comes out")
{
    for (const table& t : data().tables) {
        CHECK(t.checks.size() >= 3);
        for (const table::check& c : t.checks) {
            CAPTURE(t.id);
            CAPTURE(c.at);
            const auto column = std::find_if(t.columns.begin(), t.columns.end(), [&](const table::column& k) { return k.name == c.column; });
            REQUIRE(column != t.columns.end());
            if (t.by_choice) {
                const auto values = look_up_choice(t, c.column, c.at);
                CHECK(values.empty() == c.gives.empty());
                if (!values.empty()) {
                    double least = values.front().whole.low;
                    for (const spread& s : values) {
                        least = std::min(least, s.whole.low);
                    }
                    CHECK(least == doctest::Approx(read(c.gives, column->dim)).epsilon(1e-9).scale(0));
                }
                continue;
            }
            const table_answer a = look_up(t, c.column, exactly({read(c.at, t.axis_dim), t.axis_dim}));
            REQUIRE(a.figure.has_value() == !c.gives.empty());
            if (a.figure) {
                CHECK(a.figure->whole.low == doctest::Approx(read(c.gives, column->dim)).epsilon(1e-9).scale(0));
            } else {
                CHECK_FALSE(a.reason.empty());
            }
        }
    }
}

TEST_CASE("published: IEC 62368-1 table 5 cell by cell")
{
    // Two national texts that follow the 2014 and 2018 editions agree in all 15 rows.
    const double nf[] = {300, 170, 91, 61, 41, 28, 18, 12, 8, 4, 1.6, 0.8, 0.4, 0.2, 0.133};
    const double es1[] = {60, 75, 100, 125, 150, 200, 250, 350, 500, 1000, 2500, 5000, 10000, 20000, 25000};
    const table& t = *data().find_table("iec-62368-1-charged-capacitor");
    REQUIRE(t.printed.size() == 15);
    int cells = 0;
    for (std::size_t i = 0; i < 15; ++i) {
        for (const auto& [column, factor] : {std::pair("ES1", 1.0), std::pair("ES2", 2.0)}) {
            const table_answer a = look_up(t, column, exactly({nf[i] * 1e-9, dim::capacitance}));
            REQUIRE(a.figure);
            CHECK(a.figure->whole.low == doctest::Approx(es1[i] * factor).epsilon(1e-9).scale(0));
            ++cells;
        }
    }
    CHECK(cells == 30);
    // Read the other way along the same chords (derived reference): 180 V allows 33.2 nF at ES1 and 123 nF at ES2.
    CHECK(look_up_reverse(t, "ES1", exactly({180, dim::voltage})).figure->whole.low == doctest::Approx(33.2e-9).epsilon(1e-3).scale(0));
    CHECK(look_up_reverse(t, "ES2", exactly({180, dim::voltage})).figure->whole.low == doctest::Approx(123e-9).epsilon(1e-2).scale(0));
}

TEST_CASE("over a spread a table gives its extremes over every printed row inside")
{
    const table& t = *data().find_table("iec-60664-1-creepage");
    const table_answer a = look_up(t, "PD2-III", between(dim::voltage, 30.0, 70.0));
    REQUIRE(a.figure);
    CHECK(a.figure->whole.low == doctest::Approx(0.5214e-3).epsilon(1e-3).scale(0)); // between 25 V and 32 V
    CHECK(a.figure->whole.high == doctest::Approx((1.25 + 0.05 * 7.0 / 17.0) * 1e-3).epsilon(1e-9).scale(0));
    CHECK_FALSE(look_up(t, "PD2-III", between(dim::voltage, 5.0, 70.0)).figure);
    CHECK_FALSE(look_up(t, "PWB-PD1", exactly({1100, dim::voltage})).figure);
}

TEST_CASE("loader refusals")
{
    const std::pair<std::string, std::string> rows[] = {
        {with("title = \"T\"\n", ""), "1:1: no 'title' here"},
        {with("cite = \"practice\"", "cite = \"practise\""), "2:10: no source 'practise' in sources.toml; nearest known name: practice"},
        {with("basis = \"practice\"", "basis = \"sure\""), "2:53: basis is confirmed, memory or practice"},
        {with("unit = \"V\"", "unit = \"volt\""), "4:35: no unit 'volt' || 7:10: '1' is no number in volt || 7:22: '3' is no number in volt"},
        {with("unit = \"mm\"", "unit = \"mmm\""), "5:33: no unit 'mmm' || 7:15: '2' is no number in mmm || 7:27: '4' is no number in mmm"},
        {with("interpolate = \"none\"", "interpolate = \"curve\""), "6:15: interpolate is linear, step-up or none"},
        {with("interpolate = \"none\"", "interpolate = \"linear\""), "1:1: no 'interpolate-source' here"},
        {with("[\"3\", \"4\"]", "[\"3\"]"), "7:21: a row is a list of 2 texts: the axis and one a column"},
        {with("[\"3\", \"4\"]", "[\"1\", \"4\"]"), "7:8: the axis neither rises nor falls throughout: '1' breaks it"},
        {with("[\"3\", \"4\"]", "[\"3\", \"x\"]"), "7:27: 'x' is no number in mm"},
        {with("[\"3\", \"4\"]", "[3, 4]"), "7:21: a row is a list of 2 texts: the axis and one a column"},
        {with("gives = \"2 mm\"\n", ""), "8:1: a check says what it gives, or refused = true"},
        {with("column = \"a\"\n", ""), "8:1: no 'column' here"},
        {with("conditions = \"none\"", "condition = \"none\""),
         "1:1: no 'conditions' here || 3:1: unknown key 'condition'; nearest known name: conditions"},
        {with("interpolate = \"none\"", "interpolate = \"none\"\nopen = [\"middle\"]"), "7:8: an open end is low or high"},
        {with("title = \"T\"", "title = 5"), "1:9: 'title' is a text in quotes"},
        {with("axis = { name = \"voltage\", unit = \"V\" }", "axis = { name = \"voltage\" }"),
         "4:8: no 'unit' here || 7:10: '1' is no number in  || 7:22: '3' is no number in "},
    };
    for (const auto& [text, wanted] : rows) {
        CAPTURE(text);
        const std::string got = refusal("shop/tables/own.toml", text);
        if (wanted.find("is no number in  ||") == std::string::npos) {
            CHECK(got == wanted);
        } else {
            CHECK(got.find("4:8: no 'unit' here") != std::string::npos);
        }
    }
    CHECK(refusal("shop/tables/own.toml", small_table) == "");
    CHECK(refusal("shop/tables/iec-60664-1-creepage.toml", small_table)
              .find("the id 'iec-60664-1-creepage' is taken by tables/iec-60664-1-creepage.toml") != std::string::npos);
    CHECK(refusal("shop/kinds/resistor.toml", "title = \"R\"\n") == "1:1: kind 'resistor' is there already");
    CHECK(
        refusal("shop/kinds/gizmo.toml",
                "title = \"R\"\nvoltage = [\"a\", \"b\"]\n[[written]]\na = \"a\"\nb = \"b\"\n[field.x]\ndimension = \"voltag\"\nmeaning = \"m\"\n") ==
        "7:13: no dimension 'voltag'");
    CHECK(refusal("shop/kinds/gizmo.toml", "title = \"R\"\nvoltage = [\"a\", \"b\"]\n[[written]]\na = \"a\"\nb = \"b\"\n[[element]]\nbetween = "
                                           "[\"a\", \"b\"]\nforms = [\"melted\"]\n") ==
          "8:9: no form 'melted': open, closed, resistance, clamp, current, capacitance, inductance or track");
}

TEST_CASE("names of choices come with all their printed values")
{
    const table& t = *data().find_table("resistor-body");
    CHECK(look_up_choice(t, "limiting-voltage", "0603").size() == 2);
    CHECK(look_up_choice(t, "limiting-voltage", "1206 high-voltage").front().whole.low == 500.0);
    CHECK(look_up_choice(t, "power", "1206 high-voltage").empty());
}

TEST_CASE("every source is cited and every table is read or says in its first line what it is for")
{
    const library lib = load_library(embedded_rules()).lib;
    std::string all;
    for (const rule_text& f : embedded_rules()) {
        all += f.text;
    }
    for (const source& s : lib.sources) {
        CAPTURE(s.key);
        CHECK(all.find("cite = \"" + s.key + "\"") != std::string::npos);
    }
    std::string read = all;
    for (const auto& e : std::filesystem::recursive_directory_iterator(std::string(ONEHAND_SOURCE) + "/lib")) {
        if (e.path().extension() == ".cpp") {
            std::ifstream in(e.path());
            read += std::string(std::istreambuf_iterator<char>(in), {});
        }
    }
    for (const rule_text& f : embedded_rules()) {
        if (f.name.starts_with("tables/")) {
            const std::string id = f.name.substr(7, f.name.size() - 12);
            CAPTURE(id);
            CHECK((read.find('"' + id + '"') != std::string::npos || f.text.starts_with("# ")));
        }
    }
}
