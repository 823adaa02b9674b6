#pragma once
// The reader's common state: document, library, what has been read, complaints. Inside the room only.
#include "supply/supply.hpp"

#include <set>

namespace onehand {

/// How a key of a section is read.
struct key_spec {
    std::string name;
    field_spec::type holds = field_spec::type::quantity;
    dimension dim{};
    std::vector<std::string> choices; // for choices
    bool positive = true;
    double least = 0.0; // with positive: smallest value allowed
    double most = unbounded;
};

class reader {
public:
    reader(const document& read, const library& data) : doc(read), lib(data) {}

    const document& doc;
    const library& lib;
    supply built;
    std::vector<complaint> complaints;
    std::map<std::string, int> uses;                           // how many places name a net
    std::map<std::string, std::pair<std::string, place>> refs; // reference -> kind and place

    void complain(const place& at, std::string message, gravity weight = gravity::mistake)
    {
        complaints.push_back(doc.complain(at, std::move(message), weight));
    }
    void contradict(const place& at, std::string message, const place& also) { complaints.push_back(doc.contradict(at, std::move(message), also)); }
    void unknown_key(const entry& e, const std::vector<std::string>& known, const std::string& where);

    /// A net's name as written; counted as one place. Empty if it is none.
    std::string net(const node& n);
    std::vector<std::string> nets(const node& n, std::size_t count);
    /// A value by its spec; nothing (with a complaint) if it is wrong.
    std::optional<field> value(const entry& e, const key_spec& spec);
    std::optional<field> spread_value(const node& n, const key_spec& spec);
    /// Reads every key of a table by its specs; other keys are complained of unless `handled` names them.
    std::map<std::string, field> fields(const node& table, const std::vector<key_spec>& specs, const std::set<std::string>& handled,
                                        const std::string& where);
    std::string text(const node& n, const std::string& key);
    bool expect(const node& n, node_kind kind, const std::string& what);
};

void read_sections(reader& r); // supply, use, input, gaps, accesses, decays, protection
void read_parts(reader& r);    // every kind
void read_converter(reader& r);
void check_whole(reader& r); // what only the whole shows: references, single nets, contradictions

/// --set edits on the tree before reading; complaints of file "--set".
std::vector<complaint> apply_settings(node& root, const document& doc, const library& lib, const std::vector<std::string>& settings);

} // namespace onehand
