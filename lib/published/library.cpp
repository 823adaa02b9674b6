#include "published/library.hpp"

#include "published/reader.hpp"

#include <algorithm>

namespace onehand {

std::string word_for(basis b)
{
    switch (b) {
    case basis::confirmed:
        return "confirmed";
    case basis::memory:
        return "memory";
    default:
        return "practice";
    }
}

namespace {

template<class T, class Key>
const T* found(const std::vector<T>& list, Key T::*key, const std::string& wanted)
{
    const auto it = std::find_if(list.begin(), list.end(), [&](const T& item) { return item.*key == wanted; });
    return it == list.end() ? nullptr : &*it;
}

std::string stem(const std::string& name)
{
    const std::size_t slash = name.rfind('/');
    std::string base = slash == std::string::npos ? name : name.substr(slash + 1);
    return base.substr(0, base.rfind('.'));
}

/// Which sort of file it is, by its folder; a shop's files sort the same way.
std::string sort_of(const std::string& name)
{
    for (const char* folder : {"tables/", "kinds/", "classes/"}) {
        if (name.starts_with(folder) || name.find(std::string("/") + folder) != std::string::npos) {
            return folder;
        }
    }
    const std::string base = stem(name);
    return base == "sources" || base == "limit-sets" ? base : "rule";
}

class loader {
public:
    explicit loader(library_result& result) : result_(result), lib_(result.lib) {}

    void parse(const std::vector<rule_text>& files)
    {
        for (const rule_text& file : files) {
            read_result read = read_document(file.text, file.name);
            if (!read.complaints.empty()) {
                add(std::move(read.complaints));
                continue;
            }
            documents_.push_back({sort_of(file.name), stem(file.name), std::move(read.doc)});
        }
    }

    void build()
    {
        each("sources", [this](const parsed_file& f) { read_sources(f.doc, lib_, complaints_); });
        each("limit-sets", [this](const parsed_file& f) { read_limit_sets(f.doc, lib_, complaints_); });
        each("tables/", [this](const parsed_file& f) {
            if (fresh(f)) {
                lib_.tables.push_back(read_table(f.doc, f.id, complaints_));
            }
        });
        each("kinds/", [this](const parsed_file& f) {
            if (lib_.find_kind(f.id) != nullptr) {
                complaints_.push_back(f.doc.complain({f.doc.file, 1, 1}, "kind '" + f.id + "' is there already"));
                return;
            }
            lib_.kinds.push_back(read_kind(f.doc, f.id, lib_, complaints_));
        });
        each("classes/", [this](const parsed_file& f) {
            if (fresh(f)) {
                lib_.classes.push_back(read_class(f.doc, f.id, complaints_));
            }
        });
        each("rule", [this](const parsed_file& f) {
            if (fresh(f)) {
                lib_.rule_documents.push_back(f.doc);
            }
        });
        check_citations();
        sort_by_place(complaints_);
        add(std::move(complaints_));
    }

private:
    struct parsed_file {
        std::string sort;
        std::string id;
        document doc;
    };

    template<class F>
    void each(const std::string& sort, F f)
    {
        for (const parsed_file& file : documents_) {
            if (file.sort == sort) {
                f(file);
            }
        }
    }

    /// An id stands once among tables, classes and rules.
    bool fresh(const parsed_file& f)
    {
        const auto [it, inserted] = ids_.emplace(f.id, place{f.doc.file, 1, 1});
        if (!inserted) {
            complaints_.push_back(f.doc.complain({f.doc.file, 1, 1}, "the id '" + f.id + "' is taken by " + it->second.file));
        }
        return inserted;
    }

    void check(const citation& c, const document& doc)
    {
        if (!c.cite.empty() && lib_.find_source(c.cite) == nullptr) {
            std::vector<std::string> known;
            for (const source& s : lib_.sources) {
                known.push_back(s.key);
            }
            const std::string near = nearest_name(c.cite, known);
            complaints_.push_back(
                doc.complain(c.at, "no source '" + c.cite + "' in sources.toml" + (near.empty() ? "" : "; nearest known name: " + near)));
        }
    }

    void check_citations()
    {
        for (const parsed_file& f : documents_) {
            if (f.sort == "tables/" && lib_.find_table(f.id) != nullptr) {
                check(lib_.find_table(f.id)->from, f.doc);
            }
            if (f.sort == "classes/" && lib_.find_class(f.id) != nullptr) {
                check(lib_.find_class(f.id)->from, f.doc);
            }
            if (f.sort == "kinds/" && lib_.find_kind(f.id) != nullptr) {
                for (const failure_spec& failure : lib_.find_kind(f.id)->failures) {
                    check(failure.from, f.doc);
                }
            }
        }
    }

    void add(std::vector<complaint> list)
    {
        for (complaint& c : list) {
            result_.complaints.push_back(std::move(c));
        }
    }

    library_result& result_;
    library& lib_;
    std::vector<parsed_file> documents_;
    std::map<std::string, place> ids_;
    std::vector<complaint> complaints_;
};

} // namespace

const field_spec* kind_spec::find(const std::string& field) const
{
    return found(fields, &field_spec::name, field);
}

const source* library::find_source(const std::string& key) const
{
    return found(sources, &source::key, key);
}

const table* library::find_table(const std::string& id) const
{
    return found(tables, &table::id, id);
}

const kind_spec* library::find_kind(const std::string& name) const
{
    return found(kinds, &kind_spec::name, name);
}

const class_text* library::find_class(const std::string& id) const
{
    return found(classes, &class_text::id, id);
}

const limit_set* library::find_limit_set(const std::string& name) const
{
    return found(limit_sets, &limit_set::name, name);
}

const limit_set* library::limit_set_of(const std::string& source_key) const
{
    for (const limit_set& l : limit_sets) {
        if (std::find(l.sources.begin(), l.sources.end(), source_key) != l.sources.end()) {
            return &l;
        }
    }
    return nullptr;
}

library_result load_library(const std::vector<rule_text>& built_in, const std::vector<rule_text>& own)
{
    library_result result;
    loader load(result);
    load.parse(built_in);
    load.parse(own);
    load.build();
    return result;
}

} // namespace onehand
