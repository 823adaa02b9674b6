// The rule language: trees, exact diagnostics, three-valued truth.
#include "published/embedded.hpp"
#include "rule/expression.hpp"

#include "quantity/text.hpp"

#include <doctest/doctest.h>

using namespace onehand;

namespace {

const library& data()
{
    static const library_result loaded = load_library(embedded_rules());
    return loaded.lib;
}

std::string tree_or_complaint(const std::string& text, const std::string& subject)
{
    document doc;
    doc.file = "t";
    doc.lines = {"r = '" + text + "'"};
    std::vector<complaint> complaints;
    const expression_place where{&doc, {"t", 1, 5}, true};
    auto e = parse_expression(text, where, complaints);
    if (e) {
        check_expression(*e, data(), subject, where, complaints);
    }
    if (!complaints.empty()) {
        return std::to_string(complaints.front().at.column - 5) + ": " + complaints.front().message;
    }
    return e ? print(*e) : "nothing";
}

struct row {
    const char* text;
    const char* wanted;
};

class given final : public fact_source {
public:
    std::map<std::string, value> values;
    value look_up(const subject&, state in, const std::string& name) const override
    {
        const auto other = values.find(word_for(in) + "." + name);
        const auto it = other != values.end() ? other : values.find(name);
        return it == values.end() ? missing_value(value::type::number, {name}) : it->second;
    }
    value time_to(const subject&, const quantity&) const override
    {
        const auto it = values.find("time");
        return it == values.end() ? missing_value(value::type::number, {"time"}) : it->second;
    }
};

truth_outcome judged(const std::string& text, const given& facts)
{
    document doc;
    doc.file = "t";
    std::vector<complaint> complaints;
    const expression_place where{&doc, {"t", 1, 1}, true};
    auto e = parse_expression(text, where, complaints);
    REQUIRE(e);
    const bool good = check_expression(*e, data(), "resistor", where, complaints);
    CAPTURE(format_complaints(complaints));
    REQUIRE(good);
    const subject about{"resistor", "R1", {}, {}};
    const surroundings s{&data(), &facts, &about, state::running, nullptr};
    return judge_truth(*e, s);
}

value volts(const char* text)
{
    return number(std::get<spread>(parse_spread(text, dim::voltage)));
}

} // namespace

TEST_CASE("trees")
{
    const row rows[] = {
        {"abs(voltage) <= limiting-voltage", "(abs(voltage) <= limiting-voltage)"},
        {"abs(voltage) <= 0.8 * limiting-voltage", "(abs(voltage) <= (0.8 * limiting-voltage))"},
        {"voltage > 0 V and power < 1 W or ambient > 20 degC", "(((voltage > 0 V) and (power < 1 W)) or (ambient > 20 degC))"},
        {"not voltage > 60 V", "not (voltage > 60 V)"},
        {"no-load.voltage <= 400 V", "(no-load.voltage <= 400 V)"},
        {"power <= rated-power * min(1, 2)", "(power <= (rated-power * min(1, 2)))"},
        {"voltage ^ 2 / value <= rated-power", "(((voltage ^ 2) / value) <= rated-power)"},
        {"sqrt(rated-power * value) >= 5 V", "(sqrt((rated-power * value)) >= 5 V)"},
        {"package = \"1206\"", "(package = \"1206\")"},
        {"time-to(60 V) <= 5 s", "(time-to(60 V) <= 5 s)"},
        {"voltage <= table(\"iec-60664-1-creepage\", \"PD1\", 100 V) * 1 V / 1 mm", "0"},
        {"table(\"resistor-body\", \"power\", package) > power", "(table(\"resistor-body\", \"power\", package) > power)"},
        {"-voltage <= 5 V", "(-voltage <= 5 V)"},
        {"(voltage - 5 V) <= 1 kV", "((voltage - 5 V) <= 1 kV)"},
        {"voltage <= 1 V + 2 V - 3 V", "(voltage <= ((1 V + 2 V) - 3 V))"},
        {"ln(2) <= exp(1)", "(ln(2) <= exp(1))"},
    };
    for (const row& r : rows) {
        CAPTURE(r.text);
        const std::string got = tree_or_complaint(r.text, "resistor");
        if (std::string(r.wanted) == "0") {
            CHECK(got.find("table(") != std::string::npos);
        } else {
            CHECK(got == r.wanted);
        }
    }
}

TEST_CASE("diagnostics with their column")
{
    const row rows[] = {
        {"", "1: empty"},
        {"voltage <=", "11: something is missing at the end"},
        {"voltage <= 5", "9: a voltage on the left, a plain number on the right"},
        {"voltage <= 5 A", "9: a voltage on the left, a current on the right"},
        {"voltage + power <= 5 V", "9: a voltage on the left, a power on the right"},
        {"voltag <= 5 V", "1: a resistor has no 'voltag'; nearest known name: voltage"},
        {"voltage-5 V <= 1 V", "11: 'V <= 1 V' is left over"},
        {"voltage <= 5 parsec", "14: 'parsec' is left over"},
        {"voltage <= 5 V extra", "16: 'extra' is left over"},
        {"voltage <= (5 V", "16: a closing bracket is missing"},
        {"voltage <= 5 V)", "15: ')' is left over"},
        {"1 V < voltage < 5 V", "15: comparisons are joined by 'and', not chained"},
        {"voltage ^ value <= 5 V", "11: a power is a whole number from 1 to 9"},
        {"voltage ^ 12 <= 5 V", "11: a power is a whole number from 1 to 9"},
        {"voltage * voltage <= 5 V", "9: a square is written x ^ 2, so that its spread is right"},
        {"sqrt(voltage) <= 5 V", "1: the root of a voltage has no dimension of its own"},
        {"ln(voltage) <= 5", "1: 'ln' asks for a plain number, not a voltage"},
        {"log(voltage) <= 5", "1: no function 'log': min, max, abs, sqrt, ln, exp, table or time-to"},
        {"min(voltage) <= 5 V", "12: 'min' takes 2 values"},
        {"min(voltage, power) <= 5 V", "1: a voltage on the left, a power on the right"},
        {"time-to(5 s) <= 5 s", "1: time-to asks for a voltage, like time-to(60 V)"},
        {"table(\"creepage\", \"PD1\", voltage) <= 5 mm", "1: no table 'creepage'"},
        {"table(\"iec-60664-1-creepage\", \"PD9\", voltage) <= 5 mm", "1: table 'iec-60664-1-creepage' has no column 'PD9'"},
        {"table(\"iec-60664-1-creepage\", \"PD1\", power) <= 5 mm", "38: the axis of 'iec-60664-1-creepage' is a voltage, not a power"},
        {"table(\"resistor-body\", \"power\", voltage) <= 1 W", "33: the axis of 'resistor-body' is the choice 'package', not a voltage"},
        {"table(\"iec-60664-1-creepage\", \"PD1\", package) <= 5 mm", "38: the axis of 'iec-60664-1-creepage' is a voltage, not a choice"},
        {"table(\"derating-capacitor-nasa\", \"share\", package) <= 1",
         "43: the axis of 'derating-capacitor-nasa' is the choice 'dielectric', not a choice"},
        {"power <= table(\"resistor-body\", \"limiting-voltage\", package)", "7: a power on the left, a voltage on the right"},
        {"table(voltage) <= 5 mm", "7: a word in quotes is due here"},
        {"idle.voltage <= 5 V", "1: no state 'idle': start-up, running, no-load, standby or switched-off"},
        {"no-load. <= 5 V", "9: a name is due after the state"},
        {"package <= 5 V", "1: a choice cannot be reckoned with"},
        {"voltage = \"1206\"", "9: a voltage on the left, a choice on the right"},
        {"package = \"1207\"", "11: 'package' is never \"1207\"; nearest known name: 1206"},
        {"voltage and power <= 1 W", "1: a voltage is neither true nor false: compare it"},
        {"not voltage", "5: a voltage is neither true nor false: compare it"},
        {"voltage <= current * 1 ohm",
         "9: two solved facts in one comparison, current and voltage: they move together, a fact of their own is needed"},
        {"power <= voltage ^ 2 / value",
         "7: two solved facts in one comparison, power and voltage: they move together, a fact of their own is needed"},
        {"power <= value * 1 A ^ 2", "7: 'power' is computed from 'value': the two cannot be compared"},
        {"voltage <= 5 V and", "19: something is missing at the end"},
        {"voltage <= \"", "12: a word in quotes is due here"},
        {"voltage # 5 V", "9: '# 5 V' is left over"},
        {"voltage <= # 5 V", "12: '#' does not belong here"},
        {"voltage <= 5V5", "14: '5' is left over"},
        {"max(1 V, 2 V <= 5 V", "20: a closing bracket is missing"},
    };
    int right = 0;
    for (const row& r : rows) {
        CAPTURE(r.text);
        const std::string got = tree_or_complaint(r.text, "resistor");
        CHECK(got == std::string(r.wanted));
        right += got == r.wanted ? 1 : 0;
    }
    CHECK(std::size(rows) >= 40);
}

TEST_CASE("three-valued truth over both ranges")
{
    given f;
    f.values["limiting-voltage"] = volts("250 V");
    f.values["voltage"] = volts("200 V +-10%");
    truth_outcome t = judged("voltage <= limiting-voltage", f);
    CHECK(t.in_use == tri::yes);
    CHECK(t.whole == tri::yes);
    f.values["voltage"] = volts("240 V +-10%");
    t = judged("voltage <= limiting-voltage", f);
    CHECK(t.in_use == tri::yes);
    CHECK(t.whole == tri::unknown);
    CHECK(t.breached);
    CHECK_FALSE(t.breached_in_use);
    f.values["voltage"] = volts("100 V .. 300 V");
    t = judged("voltage <= limiting-voltage", f);
    CHECK(t.breached_in_use);
    CHECK_FALSE(t.certain_fail);
    f.values["voltage"] = volts("min 300 V");
    t = judged("voltage <= limiting-voltage", f);
    CHECK(t.certain_fail);
    f.values["voltage"] = volts("min 100 V");
    t = judged("voltage <= limiting-voltage", f);
    CHECK_FALSE(t.breached); // nothing known breaches it
    CHECK(t.whole == tri::unknown);
}

TEST_CASE("unknown choices: all published values must agree")
{
    given f;
    value several;
    several.numbers = {exactly({200, dim::voltage}), exactly({250, dim::voltage})};
    several.missing = {"R1.package"};
    f.values["limiting-voltage"] = several;
    f.values["voltage"] = volts("100 V");
    truth_outcome t = judged("voltage <= limiting-voltage", f);
    CHECK(t.whole == tri::yes);
    CHECK(t.missing.empty());
    f.values["voltage"] = volts("220 V");
    t = judged("voltage <= limiting-voltage", f);
    CHECK(t.missing == std::vector<std::string>{"R1.package"});
    f.values["voltage"] = volts("300 V");
    t = judged("voltage <= limiting-voltage", f);
    CHECK(t.certain_fail);
}

TEST_CASE("and and or with unknowns")
{
    CHECK(both(tri::no, tri::unknown) == tri::no);
    CHECK(both(tri::yes, tri::unknown) == tri::unknown);
    CHECK(either(tri::yes, tri::unknown) == tri::yes);
    CHECK(either(tri::no, tri::unknown) == tri::unknown);
    CHECK(turned(tri::unknown) == tri::unknown);
    given f;
    f.values["voltage"] = volts("300 V");
    truth_outcome t = judged("voltage <= 100 V and limiting-voltage > 50 V", f);
    CHECK(t.whole == tri::no);
    CHECK(t.certain_fail);
    CHECK(t.missing.empty()); // decided without it
    t = judged("voltage <= 400 V and limiting-voltage > 50 V", f);
    CHECK(t.missing == std::vector<std::string>{"limiting-voltage"});
}

TEST_CASE("a time that never comes is longer than any limit")
{
    given f;
    value never;
    never.never = true;
    f.values["time"] = never;
    CHECK(judged("time-to(60 V) <= 5 s", f).certain_fail);
    CHECK(judged("time-to(60 V) > 5 s", f).whole == tri::yes);
}

TEST_CASE("a table over a choice: the row asked for, the stricter of several figures, open where the choice is not known")
{
    given f;
    f.values["package"] = choice_of("1206"); // printed 0.25 W, 0.125 W
    const std::string within = "power <= table(\"resistor-body\", \"power\", package)";
    f.values["power"] = number(exactly({0.124, dim::power}));
    CHECK(judged(within, f).whole == tri::yes);
    f.values["power"] = number(exactly({0.126, dim::power}));
    CHECK(judged(within, f).breached);
    CHECK_FALSE(judged(within, f).certain_fail);
    f.values["power"] = number(exactly({0.251, dim::power}));
    CHECK(judged(within, f).certain_fail);
    f.values["package"] = choice_of("2512 pulse-proof"); // printed "-"
    CHECK(judged(within, f).whole == tri::unknown);
    CHECK_FALSE(judged(within, f).missing.empty());
    f.values["package"] = missing_value(value::type::choice, {"R1.package"});
    CHECK(judged(within, f).missing == std::vector<std::string>{"R1.package"});
}
