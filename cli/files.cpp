#include "files.hpp"

#include <algorithm>
#include <cerrno>
#include <cstdio>
#include <cstring>
#include <filesystem>
#include <fmt/format.h>
#include <memory>
#include <unistd.h>

namespace fs = std::filesystem;

namespace {

constexpr std::size_t most = (1U << 20U) + 1U; // one byte more than is read, so that the reader can refuse

struct closer {
    void operator()(std::FILE* f) const { std::fclose(f); }
};
using file = std::unique_ptr<std::FILE, closer>;

std::string slurp(std::FILE* from)
{
    std::string text;
    char block[16384];
    while (text.size() < most) {
        const std::size_t got = std::fread(block, 1, std::min(sizeof block, most - text.size()), from);
        if (got == 0) {
            break;
        }
        text.append(block, got);
    }
    return text;
}

} // namespace

file_text read_file(const std::string& name)
{
    if (name == "-") {
        return {slurp(stdin), {}};
    }
    std::error_code error;
    if (fs::is_directory(name, error)) {
        return {std::nullopt, "is a folder"};
    }
    const file in(std::fopen(name.c_str(), "rb"));
    if (!in) {
        return {std::nullopt, std::strerror(errno)};
    }
    std::string text = slurp(in.get());
    if (std::ferror(in.get()) != 0) {
        return {std::nullopt, "cannot be read"};
    }
    return {std::move(text), {}};
}

folder_texts read_folder(const std::string& folder)
{
    folder_texts out;
    std::error_code error;
    if (!fs::is_directory(folder, error)) {
        out.why = "is no folder";
        return out;
    }
    std::vector<fs::path> paths;
    for (fs::recursive_directory_iterator it(folder, error), end; !error && it != end; it.increment(error)) {
        if (it->is_regular_file(error) && it->path().extension() == ".toml") {
            paths.push_back(it->path());
        }
    }
    std::sort(paths.begin(), paths.end());
    for (const fs::path& p : paths) {
        file_text text = read_file(p.string());
        if (!text.text) {
            out.why = p.string() + " " + text.why;
            return out;
        }
        out.files.emplace_back(p.string(), std::move(*text.text));
    }
    if (out.files.empty()) {
        out.why = "holds no .toml file";
    }
    return out;
}

std::string write_file(const std::string& name, const std::string& text)
{
    std::error_code error;
    if (fs::exists(name, error) && !fs::is_regular_file(name, error)) {
        // A device or pipe cannot be replaced; it is written to.
        const file out(std::fopen(name.c_str(), "wb"));
        const bool good = out && std::fwrite(text.data(), 1, text.size(), out.get()) == text.size() && std::fflush(out.get()) == 0;
        return good ? std::string{} : std::string(std::strerror(errno));
    }
    const std::string beside = fmt::format("{}.{}.part", name, static_cast<long>(::getpid()));
    {
        const file out(std::fopen(beside.c_str(), "wb"));
        const bool good = out && std::fwrite(text.data(), 1, text.size(), out.get()) == text.size() && std::fflush(out.get()) == 0;
        if (!good) {
            const std::string why = std::strerror(errno);
            fs::remove(beside, error);
            return why;
        }
    }
    fs::rename(beside, name, error);
    if (error) {
        const std::string why = error.message();
        fs::remove(beside, error);
        return why;
    }
    return {};
}

bool same_file(const std::string& a, const std::string& b)
{
    std::error_code error;
    return a == b || (fs::exists(a, error) && fs::exists(b, error) && fs::equivalent(a, b, error));
}
