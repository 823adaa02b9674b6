// What is told of the converter: its figures in the order a reader asks for them.
#include "audit/sections.hpp"
#include "stress/stage_facts.hpp"

namespace onehand {

namespace {

struct told {
    const char* name;
    const char* fact;
    const char* words;
};

const told told_of_every_stage[] = {{"load-current", "load-current", "load current"},
                                    {"output-power", "load-power", "load power"},
                                    {"body-power", "body-power", "into a body of 2 kohm"},
                                    {"body-current", "lowest-body-current", "into the lowest body resistance"}};

const told told_of_own_stage[] = {{"frequency", "frequency", "frequency"},
                                  {"duty", "duty", "duty"},
                                  {"inductor.peak", "inductor-peak", "coil, peak"},
                                  {"inductor.start-up", "start-up-peak", "coil, peak until the rail stands"},
                                  {"inductor.average", "inductor-average", "coil, average"},
                                  {"inductor.rms", "inductor-effective", "coil, effective"},
                                  {"inductor.ripple", "inductor-ripple", "coil, ripple"},
                                  {"switch.current", "switch-effective", "switch, effective"},
                                  {"rectifier.current", "rectifier-average", "rectifier, average"},
                                  {"input-current", "input-current", "input current"},
                                  {"available-power", "available-power", "power it can hold"},
                                  {"headroom", "headroom", "over what is drawn"},
                                  {"losses", "losses", "losses"},
                                  {"output-ripple", "output-ripple", "output ripple"},
                                  {"overshoot", "overshoot", "overshoot"},
                                  {"inrush.current", "inrush-current", "inrush through the coil"},
                                  {"inrush.i2t", "inrush-integral", "inrush I2t"},
                                  {"held-on-current", "held-on-current", "switch held on"},
                                  {"runaway.voltage", "runaway-voltage", "feedback lost, output"},
                                  {"runaway.energy", "runaway-energy", "feedback lost, stored"}};

} // namespace

std::optional<converter_facts> converter_section(const solved_supply& s)
{
    if (!s.bodies().stage || s.output().topology.empty()) {
        return std::nullopt;
    }
    converter_facts f;
    const subject about{"converter", s.bodies().stage->name, {}, s.bodies().stage->at};
    const auto tell = [&](const told& t) { f.figures.push_back({t.name, t.words, s.look_up(about, state::running, t.fact)}); };
    if (s.stage().there()) {
        const value mode = s.look_up(about, state::running, "mode");
        f.mode = mode.choice;
        f.mode_missing = mode.missing;
        for (const told& t : told_of_own_stage) {
            tell(t);
        }
        const part* q = first_body(s.bodies(), s.bodies().stage->power_switch);
        if (q != nullptr) {
            f.figures.push_back({"switch.voltage", "switch, peak voltage", s.output().peak});
        }
        if (s.bodies().stage->clamp) {
            f.figures.push_back({"clamp.voltage", "clamp, voltage", s.output().clamp_voltage});
            f.figures.push_back({"clamp.power", "clamp, power", s.output().clamp_power});
        }
        for (const exceeded& x : runaway_order(s)) {
            f.runaway_order.push_back({x.ref, x.what, x.rail, x.time});
        }
        f.runaway_story = runaway_story(s);
    }
    for (const told& t : told_of_every_stage) {
        tell(t);
    }
    f.shorted = short_story(s);
    return f;
}

} // namespace onehand
