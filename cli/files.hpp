#pragma once
// Files in and out: whole, checked, never partial.
#include <optional>
#include <string>
#include <utility>
#include <vector>

/// A file's whole text ("-": standard input), or why it cannot be had.
struct file_text {
    std::optional<std::string> text;
    std::string why;
};
file_text read_file(const std::string& name);

/// Every *.toml below a folder, by name: name as shown and text; or why not.
struct folder_texts {
    std::vector<std::pair<std::string, std::string>> files;
    std::string why;
};
folder_texts read_folder(const std::string& folder);

/// Writes beside and renames; the reason if it fails, and the old file is as it was.
std::string write_file(const std::string& name, const std::string& text);

/// True if both names are the same file.
bool same_file(const std::string& a, const std::string& b);
