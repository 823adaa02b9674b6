// What is packed while building is what a fresh reading of rules/ gives, field by field.
#include "published/embedded.hpp"
#include "rule/packed.hpp"
#include "rule/rule_set.hpp"

#include <doctest/doctest.h>

using namespace onehand;

TEST_CASE("packed and unpacked the data and rules are the same field by field")
{
    ready_set fresh;
    fresh.lib = load_library(embedded_rules()).lib;
    fresh.rules = compile_rules(fresh.lib).rules;
    fresh.stamp = embedded_stamp();
    REQUIRE(fresh.rules);
    const ready_set back = unpacked(packed(fresh));
    CHECK(back.stamp.size() == 64);
    CHECK(back.stamp == fresh.stamp);
    CHECK(back.lib.sources == fresh.lib.sources);
    CHECK(back.lib.tables == fresh.lib.tables);
    CHECK(back.lib.kinds == fresh.lib.kinds);
    CHECK(back.lib.classes == fresh.lib.classes);
    CHECK(back.lib.limit_sets == fresh.lib.limit_sets);
    CHECK(back.rules->rules == fresh.rules->rules);
    CHECK(back.rules->classes == fresh.rules->classes);
    CHECK(fresh.lib.tables.size() >= 8);
    CHECK(fresh.rules->rules.size() >= 30);
}

TEST_CASE("a changed field does not pack to the same bytes")
{
    ready_set set;
    set.lib = load_library(embedded_rules()).lib;
    set.rules = compile_rules(set.lib).rules;
    const std::string before = packed(set);
    set.lib.tables.front().cells.front().front().push_back(1.0);
    CHECK(packed(set) != before);
}
