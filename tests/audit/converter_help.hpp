#pragma once
// Descriptions of converters for tests, with what they mean when read back.
#include "help.hpp"

#include <fmt/format.h>

namespace onehand::test {

/// A figure of the converter section; a value without numbers where there is none.
inline value told(const audit_result& r, const std::string& name)
{
    if (r.converter) {
        for (const converter_facts::figure& f : r.converter->figures) {
            if (f.name == name) {
                return f.told;
            }
        }
    }
    return {};
}

inline range whole(const audit_result& r, const std::string& name)
{
    const value v = told(r, name);
    return v.numbers.empty() ? range{std::nan(""), std::nan("")} : v.numbers.front().whole;
}

/// A boost stage of bare figures; every line may be replaced.
struct boost_text {
    std::string input = "12 V";
    std::string inductance = "100 uH";
    std::string drive = R"(frequency = "50 kHz", duty = "0.5")";
    std::string feedback = R"(feedback = { net = "FB", threshold = "2.5 V", lag = "max 1 us", mode = "gated" })";
    std::string topology = "boost";
    std::string stage = R"(inductor = "L1"
switch = "Q1"
rectifier = "D1")";
    std::string coil = R"([inductor]
L1 = { nets = ["VIN", "SW"], value = "LVALUE", resistance = "1 uohm" })";
    std::string rectifier = R"([diode]
D1 = { anode = "SW", cathode = "HT", rated-voltage = "600 V", forward-voltage = "0 V" })";
    std::string transistor = R"(rated-voltage = "400 V", on-resistance = "1 uohm", on-resistance-hot = "1 uohm")";
    std::string parts = R"([capacitor]
C1 = { nets = ["HT", "0V"], value = "10 uF", rated-voltage = "630 V", dielectric = "polypropylene" }
[resistor]
R1 = { nets = ["HT", "FB"], value = "71k" }
R2 = { nets = ["FB", "0V"], value = "1k" })";
    std::string outputs = R"([["HT", "0V"]])";

    std::string text() const
    {
        std::string wound = coil;
        if (const auto at = wound.find("LVALUE"); at != std::string::npos) {
            wound.replace(at, 6, inductance);
        }
        return fmt::format(
            "[supply]\nreturn = \"0V\"\n[input]\nnets = [\"VIN\", \"0V\"]\nvoltage = \"{}\"\n[converter.K1]\ntopology = \"{}\"\n{}\n"
            "outputs = {}\ndrive = {{ gate = \"G\", {} }}\n{}\n{}\n[mosfet]\nQ1 = {{ drain = \"SW\", gate = \"G\", source = \"0V\", {} }}\n{}\n{}\n",
            input, topology, stage, outputs, drive, feedback, wound, transistor, rectifier, parts);
    }

    audit_result audited() const
    {
        const audit_outcome o = run(text());
        CAPTURE(text());
        CAPTURE(format_complaints(o.complaints));
        REQUIRE(o.result);
        return *o.result;
    }
};

} // namespace onehand::test
