// Every kind of part: which keys name its nets, which are its fields, all from the kind's own file.
#include "quantity/text.hpp"
#include "supply/reader.hpp"

#include <algorithm>
#include <cmath>
#include <fmt/format.h>

namespace onehand {

namespace {

const std::set<std::string> reserved{"supply", "use", "input", "converter", "gap", "access", "decay", "protection"};
const std::vector<std::string> roles{"bleeder", "balance", "limiting", "divider", "damping", "filter", "sense", "indicator"};
constexpr std::size_t most_parts = 500;

std::string starred(const std::string& name, std::size_t number)
{
    const std::size_t star = name.find('*');
    return star == std::string::npos ? name : name.substr(0, star) + std::to_string(number) + name.substr(star + 1);
}

class part_reader {
public:
    part_reader(reader& r, const kind_spec& kind, const entry& e) : r_(r), kind_(kind), entry_(e) {}

    void read()
    {
        part_.ref = entry_.key;
        part_.kind = kind_.name;
        part_.at = entry_.key_at;
        if (part_.ref.find_first_of("/~ \t.*") != std::string::npos) {
            r_.complain(entry_.key_at, "a reference has no '/', '~', '.', '*' or blank: '" + part_.ref + "'");
            return;
        }
        const auto [it, fresh] = r_.refs.emplace(part_.ref, std::pair(kind_.name, entry_.key_at));
        if (!fresh) {
            r_.contradict(entry_.key_at, "'" + part_.ref + "' is a " + it->second.first + " already", it->second.second);
            return;
        }
        if (!r_.expect(entry_.value, node_kind::table, "a part is a table: " + part_.ref + " = { ... }")) {
            return;
        }
        const terminal_form* form = choose_form();
        if (form == nullptr) {
            return;
        }
        part_.polarised = form->polarised;
        read_terminals(*form);
        read_fields(*form);
        read_counts();
        r_.built.parts.push_back(std::move(part_));
    }

private:
    const terminal_form* choose_form()
    {
        const terminal_form* best = nullptr;
        std::size_t most = 0;
        for (const terminal_form& form : kind_.forms) {
            const auto there = static_cast<std::size_t>(
                std::count_if(form.keys.begin(), form.keys.end(), [&](const terminal_key& k) { return entry_.value.find(k.key) != nullptr; }));
            if (there > 0 && best != nullptr && most > 0) {
                r_.complain(entry_.key_at, "'" + part_.ref + "' names its nets in two ways: " + ways());
                return nullptr;
            }
            if (there > most) {
                most = there;
                best = &form;
            }
        }
        if (best == nullptr) {
            r_.complain(entry_.key_at, "'" + part_.ref + "' names no nets: a " + kind_.name + " is written with " + ways());
        }
        return best;
    }

    std::string ways() const
    {
        std::string text;
        for (const terminal_form& form : kind_.forms) {
            std::string keys;
            for (const terminal_key& k : form.keys) {
                keys += k.optional ? "" : (keys.empty() ? "'" : ", '") + k.key + "'";
            }
            text += (text.empty() ? "" : " or ") + keys;
        }
        return text;
    }

    void add(const std::string& name, const node& n)
    {
        if (std::string net = r_.net(n); !net.empty()) {
            part_.terminals.push_back({name, std::move(net), n.at});
        }
    }

    void read_terminals(const terminal_form& form)
    {
        for (const terminal_key& k : form.keys) {
            const entry* e = entry_.value.find(k.key);
            if (e == nullptr) {
                if (!k.optional) {
                    r_.complain(entry_.key_at, "'" + part_.ref + "' has no '" + k.key + "'");
                }
                continue;
            }
            if (k.count == 1) {
                add(k.names[0], e->value);
            } else if (r_.expect(e->value, node_kind::list, "'" + k.key + "' is a list of nets")) {
                read_list(k, e->value);
            }
        }
        const bool same = part_.terminals.size() == 2 && part_.terminals[0].net == part_.terminals[1].net;
        if (same) {
            r_.complain(entry_.value.at.line != 0 ? part_.terminals[1].at : part_.at,
                        "both ends of '" + part_.ref + "' are the same net, '" + part_.terminals[0].net + "'");
        }
    }

    void read_list(const terminal_key& k, const node& list)
    {
        if (k.count > 1 && list.items.size() != static_cast<std::size_t>(k.count)) {
            r_.complain(list.at, fmt::format("'{}' has {} nets, {} are written", k.key, k.count, list.items.size()));
            return;
        }
        if (list.items.empty()) {
            r_.complain(list.at, "'" + k.key + "' is empty");
        }
        for (std::size_t i = 0; i < list.items.size(); ++i) {
            const node& item = list.items[i];
            if (k.count > 1) {
                add(k.names[i], item);
            } else if (k.count == 0) {
                add(starred(k.names[0], i + 1), item);
            } else if (item.kind == node_kind::list && item.items.size() == 2) {
                add(starred(k.names[0], i + 1), item.items[0]);
                add(starred(k.names[1], i + 1), item.items[1]);
            } else {
                r_.complain(item.at, "a pole is a pair of nets, supply side first: [\"HT\", \"HT-L\"]");
            }
        }
    }

    static key_spec spec_of(const field_spec& f) { return {f.name, f.holds, f.dim, f.choices, f.positive}; }

    void read_fields(const terminal_form& form)
    {
        std::vector<std::string> known{"series", "parallel", "role", "measured"};
        std::set<std::string> terminals;
        for (const terminal_key& k : form.keys) {
            terminals.insert(k.key);
            known.push_back(k.key);
        }
        for (const field_spec& f : kind_.fields) {
            known.push_back(f.name);
        }
        for (const entry& e : entry_.value.entries) {
            if (terminals.contains(e.key) || e.key == "series" || e.key == "parallel" || e.key == "role" || e.key == "measured") {
                continue;
            }
            const field_spec* spec = kind_.find(e.key);
            if (spec == nullptr) {
                r_.unknown_key(e, known, kind_.name + " '" + part_.ref + "'");
            } else if (auto f = read_one(e, *spec)) {
                part_.fields[e.key] = std::move(*f);
            }
        }
        read_measured();
        for (const field_spec& f : kind_.fields) {
            const auto here = part_.fields.find(f.name);
            const auto there = part_.fields.find(f.not_with);
            if (!f.not_with.empty() && here != part_.fields.end() && there != part_.fields.end()) {
                r_.contradict(here->second.at, "'" + f.name + "' says nothing beside '" + f.not_with + "': write '" + f.instead + "'",
                              there->second.at);
            }
        }
    }

    std::optional<field> read_one(const entry& e, const field_spec& spec)
    {
        if (spec.per.empty() || e.value.kind != node_kind::text) {
            return r_.value(e, spec_of(spec));
        }
        const dimension each = spec.dim / dim::length;
        const auto read = parse_spread(e.value.text, each);
        const auto* one = std::get_if<spread>(&read);
        if (one == nullptr) {
            return r_.value(e, spec_of(spec));
        }
        const entry* by = entry_.value.find(spec.per);
        if (by == nullptr) {
            r_.complain(e.value.at, "'" + e.key + "' is written per metre: '" + spec.per + "' is needed");
            return std::nullopt;
        }
        const auto length = r_.value(*by, {spec.per, field_spec::type::quantity, dim::length, {}});
        if (!length) {
            return std::nullopt;
        }
        const spread& l = *length->number();
        const auto times = [](const range& a, const range& b) { return range{std::max(a.low, 0.0) * b.low, a.high * b.high}; };
        spread total{spec.dim, times(one->in_use, l.in_use), times(one->whole, l.whole), std::nullopt};
        if (one->nominal && l.nominal) {
            total.nominal = *one->nominal * *l.nominal;
        }
        return field{total, e.value.at, e.value.text + " times " + length->written, {}};
    }

    /// A measured value stands for the marked one, whose place is kept.
    void read_measured()
    {
        const entry* e = entry_.value.find("measured");
        const field_spec* main = kind_.find(kind_.main_field);
        if (e == nullptr) {
            return;
        }
        if (main == nullptr) {
            r_.complain(e->key_at, "a " + kind_.name + " has nothing that 'measured' could replace");
            return;
        }
        key_spec spec = spec_of(*main);
        spec.name = "measured";
        if (auto f = r_.value(*e, spec)) {
            if (const auto marked = part_.fields.find(main->name); marked != part_.fields.end()) {
                f->nominal_at = marked->second.at;
            }
            part_.fields[main->name] = std::move(*f);
        }
    }

    int count_of(const char* key)
    {
        const entry* e = entry_.value.find(key);
        if (e == nullptr) {
            return 1;
        }
        const bool whole = e->value.kind == node_kind::number && e->value.integer;
        if (!whole || e->value.number < 1.0 || e->value.number > 50.0) {
            r_.complain(e->value.at, std::string("'") + key + "' is a whole number from 1 to 50, without quotes");
            return 1;
        }
        return static_cast<int>(e->value.number);
    }

    void read_counts()
    {
        part_.series = count_of("series");
        part_.parallel = count_of("parallel");
        if ((part_.series > 1 || part_.parallel > 1) && part_.terminals.size() != 2) {
            r_.complain(part_.at, "only a part of two ends can be told in series or parallel: write '" + part_.ref + "' part by part");
            part_.series = part_.parallel = 1;
        }
        if (const entry* e = entry_.value.find("role")) {
            if (const auto f = r_.value(*e, {"role", field_spec::type::choice, {}, roles})) {
                part_.role = *f->text();
            }
        }
    }

    reader& r_;
    const kind_spec& kind_;
    const entry& entry_;
    part part_;
};

} // namespace

void read_parts(reader& r)
{
    std::vector<std::string> known(reserved.begin(), reserved.end());
    for (const kind_spec& k : r.lib.kinds) {
        known.push_back(k.name);
    }
    for (const entry& e : r.doc.root.entries) {
        if (reserved.contains(e.key)) {
            continue;
        }
        const kind_spec* kind = r.lib.find_kind(e.key);
        if (kind == nullptr) {
            const std::string near = nearest_name(e.key, known);
            r.complain(e.key_at, "'" + e.key + "' is no section and no kind of part" + (near.empty() ? "" : "; nearest known name: " + near));
            continue;
        }
        if (!r.expect(e.value, node_kind::table, "[" + e.key + "] is a table of parts: R1 = { ... }")) {
            continue;
        }
        for (const entry& p : e.value.entries) {
            part_reader(r, *kind, p).read();
        }
    }
    std::stable_sort(r.built.parts.begin(), r.built.parts.end(), [](const part& a, const part& b) { return before(a.at, b.at); });
    std::size_t bodies = 0;
    for (const part& p : r.built.parts) {
        bodies += static_cast<std::size_t>(p.series) * static_cast<std::size_t>(p.parallel);
    }
    if (bodies > most_parts) {
        r.complain({r.doc.file, 0, 0}, fmt::format("{} parts: at most {} are read", bodies, most_parts));
    }
}

} // namespace onehand
