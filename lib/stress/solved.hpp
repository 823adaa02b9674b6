#pragma once
// A supply solved as it stands: the rail, every d.c. state, what is stored, what stays after switch-off, the working voltage of every gap. It is the
// source of facts for the rules and holds the figures that reports print. Nothing here is judged.
#include "stress/decay.hpp"
#include "stress/spacing.hpp"
#include "supply/change.hpp"

#include <tuple>

namespace onehand {

/// The body of IEC 62368-1 (and IEC 61140) for touch current and charge, in ohm.
inline constexpr double standard_body = 2000.0;
/// "At once": what flows within this time, in seconds.
inline constexpr double at_once = 0.010;
/// Below this a pair of nets needs no gap of its own, in volt.
inline constexpr double low_voltage = 60.0;

struct stored_item {
    subject about;
    bool is_pair = false;
    bool touchable = false;         // a pair open always or by plug withdrawn
    std::vector<std::string> parts; // capacitors that can reach it
    value capacitance, voltage, energy, charge, at_once_energy, at_once_charge;
    bool discharge_path = false;
    std::string paths; // "none" | "one" | "several"
    std::string only_part;
    value es1_voltage, es2_voltage;
    value pulse_current, pulse_time;            // through the body in the first instant, and how long it stays above the steady limit
    value pulse_es2_voltage, pulse_es2_current; // what IEC 62368-1 tables 6 and 7 allow for that long
};

struct access_item {
    access where;
    subject about;
    bool touchable = false;
    std::map<state, value> voltage; // magnitude
    std::map<state, value> touch_current;
    value charge;
    value capacitance;              // that charge at the pair's voltage
    value es1_voltage, es2_voltage; // IEC 62368-1 table 5, of the stored pair
    bool discharge_path = false;
};

struct pair_item {
    subject about;
    value voltage;       // working voltage, magnitude, over running, no-load and standby
    std::string covered; // "gap" | "floor" | "none"
    bool person_side = false;
};

struct gap_item {
    subject about;
    const gap* written = nullptr;
    bool floor = false;
    value voltage;
    std::string insulation;
    bool person_side = false;
    bool bridge_worse = false;
    bool switches = false; // the switch node is one of its nets, or of those a floor gap speaks for
    spacing_need need;
    spacing_site site(const supply& s, const library& lib) const { return {insulation, written, &s.used, &s.fed, &lib}; }
};

/// One switch-off case for one pair.
struct decay_item {
    subject about;
    off_case how;
};

class solved_supply final : public fact_source {
public:
    /// `s` as written or as a change left it; `lib` must outlive this.
    solved_supply(supply s, const library& lib);
    ~solved_supply() override;

    value look_up(const subject& s, state in, const std::string& name) const override;
    value time_to(const subject& s, const quantity& limit) const override;

    const std::vector<subject>& subjects() const { return subjects_; }
    const supply& written() const { return written_; }
    const supply& bodies() const { return bodies_; }
    const library& data() const { return lib_; }
    const rail& output() const { return output_; }
    /// The stage with its greatest load, at its port; `there` is false for a module.
    const stage_model& stage() const { return stage_; }
    /// Current that hangs on the output, none to its most.
    const value& load() const { return load_; }
    const dc_solution& at(state in) const;
    const std::vector<dc_solution>& states() const { return states_; }
    const std::vector<charged_capacitor>& capacitors() const { return capacitors_; }
    const std::vector<stored_item>& stored() const { return stored_; }
    const std::vector<access_item>& accesses() const { return accesses_; }
    const std::vector<pair_item>& pairs() const { return pairs_; }
    const std::vector<gap_item>& gaps() const { return gaps_; }
    /// The cases that stand for switch-off as built: input open and shorted, output fitted and, where there is a plug, unplugged.
    const std::vector<off_case>& off_cases() const { return off_cases_; }
    const decay_network& after(const off_case& how) const;
    /// Those cases with one body taken out: a path may be open whatever the ends do.
    std::vector<off_case> off_cases_without(const std::string& ref) const;
    /// Bodies that discharge something after switch-off: each is a path that may be open.
    std::vector<std::string> paths_to_break() const;

private:
    friend class fact_book;
    void list_accesses();
    void list_stored();
    void list_pairs();
    void list_gaps();
    void list_subjects();
    value worst_time(const std::string& a, const std::string& b, double volts) const;
    value worst_left(const std::string& a, const std::string& b, double seconds) const;
    value worst_left_broken(const std::string& a, const std::string& b, double seconds) const;
    value fact(const subject& s, state in, const std::string& name) const;
    value part_fact(const subject& s, state in, const std::string& name) const;
    value gap_fact(const subject& s, const std::string& name) const;
    value pair_fact(const subject& s, const std::string& name) const;
    value stored_fact(const subject& s, const std::string& name) const;
    value access_fact(const subject& s, state in, const std::string& name) const;
    value converter_fact(const std::string& name) const;
    void load_stage();
    value supply_fact(const std::string& name) const;

    supply written_;
    supply bodies_;
    const library& lib_;
    rail output_;
    stage_model stage_;
    value load_;
    std::vector<dc_solution> states_;
    std::vector<charged_capacitor> capacitors_;
    std::vector<stored_item> stored_;
    std::vector<access_item> accesses_;
    std::vector<pair_item> pairs_;
    std::vector<gap_item> gaps_;
    std::vector<off_case> off_cases_;
    mutable std::vector<std::pair<off_case, std::unique_ptr<decay_network>>> decays_;
    std::vector<subject> subjects_;
    mutable std::map<std::tuple<std::string, std::string, std::uint32_t, std::uint32_t, state, std::string>, value> memo_;
};

} // namespace onehand
