#pragma once
// The converter's stage as it is described: every parameter with its two ranges, and figures of it as certified extremes over all of them at once.
// Frequency and duty of a timer are spread jointly through its parts. What a figure needs and the description does not give makes it missing; a
// forward drop that is not given may be anything up to 1.5 V (common practice, no source). Inside the room only.
#include "physics/stage.hpp"
#include "physics/worst_case.hpp"
#include "stress/fields.hpp"

#include <array>

namespace onehand {

/// The part of that reference, or the first body of its string.
const part* first_body(const supply& s, const std::string& ref);

class stage_model {
public:
    enum class given : std::size_t {
        in,
        inductance,
        frequency,
        duty,
        ra,
        rb,
        ct,
        control,
        timer_supply,
        limit,
        delay,
        turns,
        leakage,
        out,
        drop,
        load,
        coil,
        on_resistance,
        hot_resistance,
        capacitance,
        count
    };

    struct parameter {
        std::string name; // "L1.value"
        std::optional<spread> at;
        std::optional<evidence::input> shown;
        std::vector<std::string> missing;
    };

    /// What a form may use: the stage, and each parameter's own interval.
    struct view {
        physics::stage<physics::interval> stage;
        std::array<physics::interval, static_cast<std::size_t>(given::count)> at;

        const physics::interval& of(given g) const { return at[static_cast<std::size_t>(g)]; }
    };
    using form = std::function<physics::interval(const view&)>;

    stage_model() = default;
    /// `s` has single bodies only. No model is made of a module: `there` is false.
    stage_model(const supply& s, const library& lib);

    bool there() const { return there_; }
    physics::shape shape() const { return shape_; }
    bool timed() const { return timed_; }     // by an astable timer
    bool limited() const { return limited_; } // by a peak current

    void set(given g, const value& v, const std::string& name);
    const parameter& at(given g) const { return all_[static_cast<std::size_t>(g)]; }
    /// The parameters that tell on-time and period.
    std::vector<given> cycle() const;

    /// The figure over both ranges; missing where one of `needs` is. `also`: parameters used where they are known and open-ended where not.
    value figure(const std::string& formula, const dimension& d, std::vector<given> needs, const form& f, const std::vector<given>& also = {}) const;
    /// Greatest and least over the whole as plain numbers; nothing where one of `needs` is missing.
    std::optional<range> plain(std::vector<given> needs, const form& f) const;

private:
    void read_drive(const supply& s, const library& lib);
    void read_parts(const supply& s, const library& lib);
    void from_field(given g, const part* p, const std::string& field_name, const std::string& ref);
    view viewed(const std::vector<given>& used, std::span<const physics::interval> at) const;

    std::array<parameter, static_cast<std::size_t>(given::count)> all_;
    bool there_ = false;
    bool timed_ = false;
    bool limited_ = false;
    bool inverted_ = false;
    bool bypassed_ = false;
    physics::shape shape_ = physics::shape::boost;
};

} // namespace onehand
