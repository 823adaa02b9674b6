// What if: --set edits put into the tree before it is read, so that they are checked like anything written.
#include "supply/reader.hpp"

#include <algorithm>

namespace onehand {

namespace {

complaint of_setting(const std::string& setting, std::string message)
{
    complaint c;
    c.at = {"--set " + setting, 0, 0};
    c.message = std::move(message);
    return c;
}

/// The table of a part, wherever its kind put it; with its kind.
std::pair<node*, const kind_spec*> part_table(node& root, const library& lib, const std::string& ref)
{
    for (entry& e : root.entries) {
        const kind_spec* kind = lib.find_kind(e.key);
        if (kind == nullptr || e.value.kind != node_kind::table) {
            continue;
        }
        for (entry& p : e.value.entries) {
            if (p.key == ref && p.value.kind == node_kind::table) {
                return {&p.value, kind};
            }
        }
    }
    return {nullptr, nullptr};
}

node* section_table(node& root, const std::string& name)
{
    for (entry& e : root.entries) {
        if (e.key == name && e.value.kind == node_kind::table) {
            return &e.value;
        }
        if (e.key == "converter" && e.value.kind == node_kind::table) {
            for (entry& c : e.value.entries) {
                if (c.key == name && c.value.kind == node_kind::table) {
                    return &c.value;
                }
            }
        }
    }
    return nullptr;
}

std::vector<std::string> targets(const node& root, const library& lib)
{
    std::vector<std::string> names;
    for (const entry& e : root.entries) {
        if (lib.find_kind(e.key) != nullptr || e.key == "converter") {
            for (const entry& p : e.value.entries) {
                names.push_back(p.key);
            }
        } else {
            names.push_back(e.key);
        }
    }
    return names;
}

node node_of(const std::string& text, const std::string& setting)
{
    node n;
    n.at = {"--set " + setting, 0, 0};
    n.basic_text = false;
    if (text == "true" || text == "false") {
        n.kind = node_kind::truth;
        n.truth = text == "true";
        return n;
    }
    const bool digits = !text.empty() && text.find_first_not_of("0123456789") == std::string::npos && text.size() < 9;
    n.kind = digits ? node_kind::number : node_kind::text;
    n.text = text;
    n.integer = digits;
    n.number = digits ? std::stod(text) : 0.0;
    return n;
}

void put(node& table, const std::string& key, node value)
{
    for (entry& e : table.entries) {
        if (e.key == key) {
            e.value = std::move(value);
            return;
        }
    }
    const place at = value.at;
    table.entries.push_back({key, at, std::move(value)});
}

} // namespace

std::vector<complaint> apply_settings(node& root, const document& doc, const library& lib, const std::vector<std::string>& settings)
{
    static_cast<void>(doc);
    std::vector<complaint> complaints;
    for (const std::string& setting : settings) {
        const std::size_t equals = setting.find('=');
        if (equals == std::string::npos || equals == 0) {
            complaints.push_back(of_setting(setting, "write it as R9=470k, R9.rated-power=0.5 W or use.altitude=2500 m"));
            continue;
        }
        const std::string target = setting.substr(0, equals);
        const std::size_t dot = target.find('.');
        const std::string name = target.substr(0, dot);
        auto [table, kind] = part_table(root, lib, name);
        node* section = table != nullptr ? table : section_table(root, name);
        if (section == nullptr) {
            const std::string near = nearest_name(name, targets(root, lib));
            complaints.push_back(of_setting(setting, "no part or section '" + name + "'" + (near.empty() ? "" : "; nearest known name: " + near)));
            continue;
        }
        if (dot == std::string::npos && kind == nullptr) {
            complaints.push_back(of_setting(setting, "a section needs its key: " + name + ".key=value"));
            continue;
        }
        std::string key = dot == std::string::npos ? kind->main_field : target.substr(dot + 1);
        if (kind != nullptr && key == kind->main_field) {
            // What is set stands for what was measured too.
            std::erase_if(section->entries, [](const entry& e) { return e.key == "measured"; });
        }
        put(*section, key, node_of(setting.substr(equals + 1), setting));
    }
    return complaints;
}

} // namespace onehand
