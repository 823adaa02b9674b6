#pragma once
// A TOML 1.0 document as a tree in which every key and value remembers its place. The only room that sees the TOML library. Refuses: text over 1 MiB,
// nesting over 32, dates, nan and inf, invalid UTF-8, NUL; a syntax error is one complaint at its place, with advice where a unit was left unquoted.
// Keys keep document order.
#include "document/complaint.hpp"

#include <string_view>
#include <utility>

namespace onehand {

struct node;

struct entry; // key, its place, value

enum class node_kind { text, number, truth, list, table };

struct node {
    node_kind kind = node_kind::table;
    place at;
    std::string text;     // node_kind::text
    double number = 0.0;  // node_kind::number (integer or float)
    bool integer = false; // written without point or exponent
    bool truth = false;
    bool inline_table = false;  // written in braces
    bool basic_text = true;     // one line, no escapes: column of code point i inside the text is at.column + 1 + i
    std::vector<node> items;    // list
    std::vector<entry> entries; // table

    const entry* find(std::string_view key) const;
};

struct entry {
    std::string key;
    place key_at;
    node value;
};

struct document {
    std::string file;
    std::vector<std::string> lines;
    node root;

    /// A complaint at a place of this document, its excerpt filled in.
    complaint complain(const place& at, std::string message, gravity weight = gravity::mistake) const;
    complaint contradict(const place& at, std::string message, const place& also) const;
};

/// The place of code point `offset` inside a text value (the opening quote's place where the text has escapes or several lines).
place inside(const node& text, std::size_t offset);

struct read_result {
    document doc;
    std::vector<complaint> complaints; // empty: read
};

/// `file` is the name to show. Never throws, never reads a file.
read_result read_document(std::string_view text, const std::string& file);

} // namespace onehand
