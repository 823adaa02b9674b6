#pragma once
// Reading a table of a rule file key by key: what is due, of which type, and that nothing else stands there. Inside the room only.
#include "published/library.hpp"

namespace onehand {

/// One table being read; complaints go to the list given.
class table_reader {
public:
    table_reader(const document& doc, const node& table, const place& at, std::vector<complaint>& complaints)
        : doc_(doc), table_(table), at_(at), complaints_(complaints)
    {
    }
    ~table_reader() = default;

    const node* any(const std::string& key, node_kind kind, const char* kind_word, bool due);
    std::string text(const std::string& key, bool due);
    bool truth(const std::string& key, bool otherwise);
    std::vector<std::string> texts(const std::string& key, bool due);
    const node* list(const std::string& key, bool due);
    const node* table(const std::string& key, bool due);
    place place_of(const std::string& key) const;
    citation source(const std::string& key, bool due);

    /// Complains of every key that was not asked for.
    void finish();

    void complain(const place& at, std::string message) { complaints_.push_back(doc_.complain(at, std::move(message))); }
    const document& doc() const { return doc_; }
    const place& at() const { return at_; }
    std::vector<complaint>& complaints() { return complaints_; }

private:
    const document& doc_;
    const node& table_;
    place at_;
    std::vector<complaint>& complaints_;
    std::vector<std::string> asked_;
};

/// The elements of a list as texts; anything else is complained of.
std::vector<std::string> texts_of(const document& doc, const node& list, std::vector<complaint>& complaints);

table read_table(const document& doc, const std::string& id, std::vector<complaint>& complaints);
kind_spec read_kind(const document& doc, const std::string& name, const library& lib, std::vector<complaint>& complaints);
class_text read_class(const document& doc, const std::string& id, std::vector<complaint>& complaints);
void read_sources(const document& doc, library& lib, std::vector<complaint>& complaints);
void read_limit_sets(const document& doc, library& lib, std::vector<complaint>& complaints);

} // namespace onehand
