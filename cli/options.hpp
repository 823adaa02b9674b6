#pragma once
// What was asked on the command line.
#include <string>
#include <vector>

struct options {
    std::string command;
    std::vector<std::string> files;
    std::string word; // cite WORD, kinds NAME
    std::string format = "text";
    std::string output;
    std::vector<std::string> limit_sets;
    std::string rules;
    std::vector<std::string> settings;
    bool show_working = false;
    std::string colour = "auto";
    // Filled in where the command line itself answered (help, version) or was refused.
    bool answered = false;
    int code = 0;
};

/// Reads the arguments; prints help, version or a refusal itself.
options read_options(int count, char** words);
