#include "supply/reader.hpp"

#include "quantity/text.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

namespace {

bool good_name(const std::string& name)
{
    return !name.empty() && name.find_first_of(" \t\"'/~*") == std::string::npos;
}

} // namespace

void reader::unknown_key(const entry& e, const std::vector<std::string>& known, const std::string& where)
{
    const std::string near = nearest_name(e.key, known);
    complain(e.key_at, "unknown key '" + e.key + "' in " + where + (near.empty() ? "" : "; nearest known name: " + near));
}

bool reader::expect(const node& n, node_kind kind, const std::string& what)
{
    if (n.kind == kind) {
        return true;
    }
    complain(n.at, what);
    return false;
}

std::string reader::net(const node& n)
{
    if (!expect(n, node_kind::text, "a net is a name in quotes")) {
        return {};
    }
    if (!good_name(n.text)) {
        complain(n.at, n.text.empty() ? "a net has a name" : "a net's name has no blanks, quotes, '/', '~' or '*': '" + n.text + "'");
        return {};
    }
    if (uses[n.text]++ == 0) {
        built.nets.push_back(n.text);
        built.net_at[n.text] = n.at;
    }
    return n.text;
}

std::vector<std::string> reader::nets(const node& n, std::size_t count)
{
    std::vector<std::string> list;
    if (!expect(n, node_kind::list, fmt::format("a list of {} nets is due, like [\"HT\", \"0V\"]", count))) {
        return list;
    }
    for (const node& item : n.items) {
        if (std::string name = net(item); !name.empty()) {
            list.push_back(std::move(name));
        }
    }
    if (n.items.size() != count) {
        complain(n.at, fmt::format("{} nets are due here, {} are written", count, n.items.size()));
        list.clear();
    } else if (list.size() == 2 && count == 2 && list[0] == list[1]) {
        complain(n.at, "both ends are the same net, '" + list[0] + "'");
    }
    return list.size() == count ? list : std::vector<std::string>{};
}

std::string reader::text(const node& n, const std::string& key)
{
    return expect(n, node_kind::text, "'" + key + "' is a text in quotes") ? n.text : std::string{};
}

std::optional<field> reader::spread_value(const node& n, const key_spec& spec)
{
    if (n.kind == node_kind::number && spec.dim == dim::none) {
        return field{exactly({n.number, dim::none}), n.at, fmt::format("{}", n.number), {}};
    }
    if (n.kind == node_kind::number) {
        const auto wanted = parse_spread(fmt::format("{}", n.number), spec.dim);
        const auto* why = std::get_if<text_error>(&wanted);
        complain(n.at, why != nullptr ? why->message + ", in quotes" : "a bare number");
        return std::nullopt;
    }
    if (!expect(n, node_kind::text, "'" + spec.name + "' is a quantity in quotes")) {
        return std::nullopt;
    }
    const auto read = parse_spread(n.text, spec.dim);
    if (const auto* wrong = std::get_if<text_error>(&read)) {
        complain(inside(n, wrong->offset), wrong->message);
        return std::nullopt;
    }
    return field{std::get<spread>(read), n.at, n.text, {}};
}

std::optional<field> reader::value(const entry& e, const key_spec& spec)
{
    const node& n = e.value;
    if (spec.holds == field_spec::type::truth) {
        if (!expect(n, node_kind::truth, "'" + spec.name + "' is true or false, without quotes")) {
            return std::nullopt;
        }
        return field{n.truth, n.at, n.truth ? "true" : "false", {}};
    }
    if (spec.holds == field_spec::type::choice || spec.holds == field_spec::type::text) {
        if (!expect(n, node_kind::text, "'" + spec.name + "' is a text in quotes")) {
            return std::nullopt;
        }
        if (spec.holds == field_spec::type::choice && std::find(spec.choices.begin(), spec.choices.end(), n.text) == spec.choices.end()) {
            const std::string near = nearest_name(n.text, spec.choices);
            complain(n.at, "'" + n.text + "' is no " + spec.name + (near.empty() ? ": " + listed(spec.choices) : "; nearest known name: " + near));
            return std::nullopt;
        }
        return field{n.text, n.at, n.text, {}};
    }
    auto f = spread_value(n, spec);
    if (!f) {
        return std::nullopt;
    }
    spread s = *f->number();
    const double least = spec.positive ? spec.least : -unbounded;
    if (std::isfinite(s.whole.high) && s.whole.high < least) {
        complain(n.at, "'" + spec.name + "' cannot be negative");
        return std::nullopt;
    }
    if (spec.positive && std::isfinite(s.whole.low) && s.whole.low < 0.0) {
        complain(n.at, s.nominal && *s.nominal < 0.0 ? "'" + spec.name + "' cannot be negative"
                                                     : "the tolerance of '" + spec.name + "' reaches below zero");
        return std::nullopt;
    }
    if (s.whole.high > spec.most && std::isfinite(s.whole.high)) {
        complain(n.at, fmt::format("'{}' is at most {}", spec.name, format_quantity({spec.most, spec.dim})));
        return std::nullopt;
    }
    if (spec.positive) {
        s.whole.low = std::max(s.whole.low, 0.0); // a one-sided figure of what cannot be negative ends at zero
        s.in_use.low = std::max(s.in_use.low, 0.0);
    }
    f->value = s;
    return f;
}

std::map<std::string, field> reader::fields(const node& table, const std::vector<key_spec>& specs, const std::set<std::string>& handled,
                                            const std::string& where)
{
    std::map<std::string, field> out;
    std::vector<std::string> known(handled.begin(), handled.end());
    for (const key_spec& s : specs) {
        known.push_back(s.name);
    }
    for (const entry& e : table.entries) {
        if (handled.contains(e.key)) {
            continue;
        }
        const auto spec = std::find_if(specs.begin(), specs.end(), [&](const key_spec& s) { return s.name == e.key; });
        if (spec == specs.end()) {
            unknown_key(e, known, where);
        } else if (auto f = value(e, *spec)) {
            out[e.key] = std::move(*f);
        }
    }
    return out;
}

} // namespace onehand
