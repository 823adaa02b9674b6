#include "supply/supply.hpp"

#include "supply/reader.hpp"

#include <algorithm>
#include <cctype>

namespace onehand {

const terminal* part::find_terminal(const std::string& name) const
{
    const auto it = std::find_if(terminals.begin(), terminals.end(), [&](const terminal& t) { return t.name == name; });
    return it == terminals.end() ? nullptr : &*it;
}

const std::string& part::net(const std::string& terminal_name) const
{
    static const std::string none;
    const terminal* t = find_terminal(terminal_name);
    return t == nullptr ? none : t->net;
}

const field* part::find(const std::string& name) const
{
    const auto it = fields.find(name);
    return it == fields.end() ? nullptr : &it->second;
}

const field* converter::find(const std::string& key) const
{
    const auto it = fields.find(key);
    return it == fields.end() ? nullptr : &it->second;
}

const part* supply::find_part(const std::string& ref) const
{
    const auto it = std::find_if(parts.begin(), parts.end(), [&](const part& p) { return p.ref == ref; });
    return it == parts.end() ? nullptr : &*it;
}

bool supply::attests(const std::string& what) const
{
    return std::find(complete.begin(), complete.end(), what) != complete.end();
}

supply_result read_supply(const document& doc, const library& lib, const std::vector<std::string>& settings)
{
    document edited = doc;
    std::vector<complaint> complaints = apply_settings(edited.root, edited, lib, settings);
    reader r(edited, lib);
    r.built.file = doc.file;
    read_sections(r);
    read_parts(r);
    read_converter(r);
    check_whole(r);
    complaints.insert(complaints.end(), std::make_move_iterator(r.complaints.begin()), std::make_move_iterator(r.complaints.end()));
    sort_by_place(complaints);
    const auto same = [](const complaint& a, const complaint& b) { return a.at == b.at && a.message == b.message; };
    complaints.erase(std::unique(complaints.begin(), complaints.end(), same), complaints.end());
    return {std::move(r.built), std::move(complaints)};
}

bool natural_less(const std::string& a, const std::string& b)
{
    std::size_t i = 0;
    std::size_t j = 0;
    const auto digit = [](char c) { return std::isdigit(static_cast<unsigned char>(c)) != 0; };
    while (i < a.size() && j < b.size()) {
        if (digit(a[i]) && digit(b[j])) {
            std::size_t m = i;
            std::size_t n = j;
            while (m < a.size() && digit(a[m])) {
                ++m;
            }
            while (n < b.size() && digit(b[n])) {
                ++n;
            }
            const std::string x = a.substr(i, m - i);
            const std::string y = b.substr(j, n - j);
            if (x != y) {
                return x.size() != y.size() ? x.size() < y.size() : x < y;
            }
            i = m;
            j = n;
        } else if (a[i] != b[j]) {
            return a[i] < b[j];
        } else {
            ++i;
            ++j;
        }
    }
    return a.size() - i < b.size() - j;
}

} // namespace onehand
