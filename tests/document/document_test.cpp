// TOML as the room reads it: places, order, and complaints in our own words.
#include "document/document.hpp"

#include <doctest/doctest.h>

using namespace onehand;

namespace {

struct row {
    const char* text;
    const char* complaint; // whole, as printed
};

const row rows[] = {
    {"a = 4.7 kohm\n", "t:1:5: a value with a unit is text: quote it, \"4.7 kohm\"\n    a = 4.7 kohm\n        ^\n"},
    {"x = 1\nb = 4.7 \xc2\xb5"
     "F\n",
     "t:2:5: a value with a unit is text: quote it, \"4.7 \xc2\xb5"
     "F\"\n    b = 4.7 \xc2\xb5"
     "F\n        ^\n"},
    {"label = yes\n", "t:1:9: 'yes' is no value here: write true or false, or quote a word\n    label = yes\n            ^\n"},
    {"a = \"12 V\n", "t:1:5: the closing quote is missing on this line\n    a = \"12 V\n        ^\n"},
    {"\xce\xa9 = 5\n", "t:1:1: a character beyond ASCII outside quotes: quote the value or key, like \"4.7 \xc2\xb5"
                       "F\"\n    \xce\xa9 = 5\n    ^\n"},
    {"a = 1\na = 2\n", "t:2:1: written twice: a key or table stands once\n    a = 2\n    ^\nt:1:1: also here:\n    a = 1\n    ^\n"},
    {"a = nan\n", "t:1:5: nan and inf are no values here\n    a = nan\n        ^\n"},
    {"a = 2024-01-01\n", "t:1:5: dates and times are no values here: quote the text\n    a = 2024-01-01\n        ^\n"},
};

} // namespace

TEST_CASE("complaints with line and caret")
{
    for (const row& r : rows) {
        CAPTURE(r.text);
        const read_result got = read_document(r.text, "t");
        std::string text = format_complaints(got.complaints);
        std::string wanted = r.complaint;
        if (const std::size_t at = wanted.find("also here:"); at != std::string::npos) {
            wanted.replace(at, 10, "also here");
        }
        CHECK(text == wanted);
    }
}

TEST_CASE("places and document order")
{
    const read_result got = read_document("# first\n[b]\nz = \"\xc2\xb5 V\"\na = { k = [1, 2.5, true] }\n[a]\nx = \"q\"\n", "t");
    REQUIRE(got.complaints.empty());
    const node& root = got.doc.root;
    REQUIRE(root.entries.size() == 2);
    CHECK(root.entries[0].key == "b");
    CHECK(root.entries[1].key == "a");
    const node& b = root.entries[0].value;
    CHECK(b.entries[0].key == "z");
    CHECK(b.entries[0].value.at == place{"t", 3, 5});
    CHECK(inside(b.entries[0].value, 2) == place{"t", 3, 8});
    const node* list = &b.entries[1].value.find("k")->value;
    CHECK(list->items[0].integer);
    CHECK_FALSE(list->items[1].integer);
    CHECK(list->items[2].truth);
    CHECK(list->items[1].at.column == 15);
}

TEST_CASE("what must not be given to the parser is refused before")
{
    for (const char* text : {"[#", "[[=", "[[[a]]]", "a = [ } ]",
                             "a = \"\"\"x \\\n\xc2\xb5"
                             "F\"\"\"",
                             "[\xc3\xa9]", "a = [[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[[1]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]]"}) {
        CAPTURE(text);
        CHECK(read_document(text, "t").complaints.size() == 1);
    }
}

TEST_CASE("size and line ends")
{
    CHECK(read_document(std::string((1U << 20U) + 1, '#'), "t").complaints.front().message == "the file is larger than 1 MiB: it is not read");
    const read_result crlf = read_document("\xEF\xBB\xBF"
                                           "a = 1\r\nb = \"x\"\r\n",
                                           "t");
    REQUIRE(crlf.complaints.empty());
    CHECK(crlf.doc.root.find("b")->value.at.line == 2);
}

TEST_CASE("a caret lines up under tabs")
{
    complaint c;
    c.at = {"t", 1, 4};
    c.message = "m";
    c.excerpt = "\t\tab";
    CHECK(format_complaint(c) == "t:1:4: m\n    \t\tab\n    \t\t ^\n");
}

TEST_CASE("the nearest known name")
{
    const std::vector<std::string> known{"value", "voltage", "rated-voltage"};
    CHECK(nearest_name("valeu", known) == "value");
    CHECK(nearest_name("rated-voltag", known) == "rated-voltage");
    CHECK(nearest_name("entirely", known).empty());
}
