// The only file that sees the argument parser.
#include "options.hpp"

#include <CLI/CLI.hpp>
#include <fmt/format.h>

namespace {

void add_common(CLI::App& app, options& o)
{
    app.add_option("--format", o.format, "text or json");
    app.add_option("--output", o.output, "write there instead; a good file is never replaced by a partial one");
    app.add_option("--rules", o.rules, "a folder of a shop's own rules and tables");
    app.add_option("--colour", o.colour, "auto, always or never (NO_COLOR is honoured)");
}

void add_audited(CLI::App& app, options& o)
{
    app.add_option("files", o.files, "descriptions in TOML; - is standard input")->required();
    app.add_option("--set", o.settings, "what if: R9=470k, R9.rated-power=0.5 W, use.altitude=2500 m; may be repeated")->take_all()->expected(1);
    app.add_option("--limit-sets", o.limit_sets, "judge by these sets only; may be repeated")->take_all()->expected(1);
    app.add_flag("--show-working", o.show_working, "formulas, inputs, places; what passes, too");
    add_common(app, o);
}

} // namespace

options read_options(int count, char** words)
{
    options o;
    CLI::App app{"onehand audits a small high-voltage DC supply, as built, before it is first powered and before a hand goes inside.\n"
                 "It is an aid to a competent person; local codes and licensed practice come first.",
                 "onehand"};
    app.set_version_flag("--version", "onehand " ONEHAND_VERSION);
    app.require_subcommand(1);
    app.footer("Exit: 0 no objection, 1 a hold, 2 unusable input, 3 fault in the program, 4 conditions left.");
    CLI::App* audit = app.add_subcommand("audit", "both conclusions, what to do first, findings with their sources");
    CLI::App* discharge = app.add_subcommand("discharge", "what stays after switch-off, pair by pair");
    CLI::App* spacing = app.add_subcommand("spacing", "every pair above 60 V: voltage, what is asked, what was measured");
    for (CLI::App* c : {audit, discharge, spacing}) {
        add_audited(*c, o);
    }
    CLI::App* cite = app.add_subcommand("cite", "a rule, table, class or source whole, by id, standard or word");
    cite->add_option("word", o.word, "id, standard or word")->required();
    add_common(*cite, o);
    CLI::App* rules = app.add_subcommand("rules", "the limit sets with their rules, classes and tables");
    rules->add_option("--limit-sets", o.limit_sets, "only this set; may be repeated")->take_all()->expected(1);
    add_common(*rules, o);
    CLI::App* kinds = app.add_subcommand("kinds", "the kinds of part, or one with its fields");
    kinds->add_option("name", o.word, "a kind");
    add_common(*kinds, o);
    try {
        app.parse(count, words);
    } catch (const CLI::ParseError& e) {
        o.answered = true;
        o.code = app.exit(e) == 0 ? 0 : 2;
        return o;
    }
    o.command = app.get_subcommands().front()->get_name();
    const bool audited = o.command == "audit" || o.command == "discharge" || o.command == "spacing";
    if (o.format != "text" && !(audited && o.format == "json")) {
        fmt::print(stderr, "onehand {}: no format '{}': {}\n", o.command, o.format, audited ? "text, json" : "text");
        o.answered = true;
        o.code = 2;
    }
    if (o.colour != "auto" && o.colour != "always" && o.colour != "never") {
        fmt::print(stderr, "onehand {}: --colour is auto, always or never\n", o.command);
        o.answered = true;
        o.code = 2;
    }
    return o;
}
