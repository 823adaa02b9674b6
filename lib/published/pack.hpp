#pragma once
// Values to bytes and back, for data that were read and checked when the program was built: strings, numbers, lists, pairs, optionals, and every
// struct that lists its fields in a function `fields(archive, value)`. The bytes are for the very build that wrote them: no format to keep.
#include <cstdint>
#include <cstring>
#include <map>
#include <optional>
#include <string>
#include <string_view>
#include <type_traits>
#include <utility>
#include <vector>

namespace onehand {

/// What packing and unpacking share: several values in turn, and a pair by its halves.
template<class Self>
class both_ways {
public:
    template<class... T>
    void operator()(T&... value)
    {
        (self().one(value), ...);
    }

protected:
    template<class A, class B>
    void one(std::pair<A, B>& both)
    {
        self().one(both.first);
        self().one(both.second);
    }

private:
    Self& self() { return static_cast<Self&>(*this); }
};

/// Appends to `bytes`.
class packer : public both_ways<packer> {
public:
    std::string bytes;

private:
    friend both_ways;
    using both_ways::one;
    template<class T>
    void one(T& value)
    {
        if constexpr (std::is_arithmetic_v<T> || std::is_enum_v<T>) {
            bytes.append(reinterpret_cast<const char*>(&value), sizeof value);
        } else {
            fields(*this, value);
        }
    }
    void one(std::string& text)
    {
        count(text.size());
        bytes += text;
    }
    template<class T>
    void one(std::vector<T>& list)
    {
        count(list.size());
        for (T& item : list) {
            one(item);
        }
    }
    template<class K, class T>
    void one(std::map<K, T>& all)
    {
        count(all.size());
        for (auto& [key, value] : all) {
            K name = key;
            one(name);
            one(value);
        }
    }
    template<class T>
    void one(std::optional<T>& maybe)
    {
        bool there = maybe.has_value();
        one(there);
        if (there) {
            one(*maybe);
        }
    }
    void count(std::size_t n)
    {
        auto small = static_cast<std::uint32_t>(n);
        one(small);
    }
};

/// Takes from the front of `bytes`, which a packer of the same build wrote.
class unpacker : public both_ways<unpacker> {
public:
    explicit unpacker(std::string_view bytes) : bytes_(bytes) {}

    bool finished() const { return bytes_.empty(); }

private:
    friend both_ways;
    using both_ways::one;
    template<class T>
    void one(T& value)
    {
        if constexpr (std::is_arithmetic_v<T> || std::is_enum_v<T>) {
            std::memcpy(&value, bytes_.data(), sizeof value);
            bytes_.remove_prefix(sizeof value);
        } else {
            fields(*this, value);
        }
    }
    void one(std::string& text)
    {
        const std::size_t n = count();
        text.assign(bytes_.substr(0, n));
        bytes_.remove_prefix(n);
    }
    template<class T>
    void one(std::vector<T>& list)
    {
        list.resize(count());
        for (T& item : list) {
            one(item);
        }
    }
    template<class K, class T>
    void one(std::map<K, T>& all)
    {
        for (std::size_t n = count(); n > 0; --n) {
            K key;
            one(key);
            one(all[key]);
        }
    }
    template<class T>
    void one(std::optional<T>& maybe)
    {
        bool there = false;
        one(there);
        if (there) {
            one(maybe.emplace());
        }
    }
    std::size_t count()
    {
        std::uint32_t n = 0;
        one(n);
        return n;
    }

    std::string_view bytes_;
};

} // namespace onehand
