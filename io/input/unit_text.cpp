// SPDX-License-Identifier: MIT
#include "io/input/unit_text.hpp"

#include <algorithm>
#include <array>
#include <cctype>
#include <cstdlib>
#include <numbers>
#include <optional>
#include <utility>
#include <vector>

#include "core/base/text.hpp"

namespace bandwright {

namespace {

/// Longest unit text that is looked at, and the largest power that may come out; both only guard against
/// nonsense.
constexpr std::size_t longest_text = 100;
constexpr int largest_power = 60;

struct NamedUnit {
    std::string_view symbol;
    /// Spelled out; takes the spelled-out prefixes and a plural s. May be empty.
    std::string_view name;
    UnitValue value;
    bool takes_prefixes = true;
};

// Definitions: SI brochure, 9th edition [SI2019]; the spellings are those of UDUNITS-2.
constexpr NamedUnit named_units[] = {
    {"m", "meter", {{1}}},
    {"m", "metre", {{1}}},
    {"g", "gram", {{0, 1}, 0, -3}},
    {"s", "second", {{0, 0, 1}}},
    {"A", "ampere", {{0, 0, 0, 1}}},
    {"K", "kelvin", {{0, 0, 0, 0, 1}}},
    {"V", "volt", {{2, 1, -3, -1}}},
    {"J", "joule", {{2, 1, -2}}},
    {"eV", "electronvolt", {{2, 1, -2}, 0, 0, 1}},
    {"W", "watt", {{2, 1, -3}}},
    {"N", "newton", {{1, 1, -2}}},
    {"Pa", "pascal", {{-1, 1, -2}}},
    {"C", "coulomb", {{0, 0, 1, 1}}},
    {"F", "farad", {{-2, -1, 4, 2}}},
    {"ohm", "ohm", {{2, 1, -3, -2}}},
    {"S", "siemens", {{-2, -1, 3, 2}}},
    {"Hz", "hertz", {{0, 0, -1}}},
    {"H", "henry", {{2, 1, -2, -2}}},
    {"T", "tesla", {{0, 1, -2, -1}}},
    {"Wb", "weber", {{2, 1, -2, -1}}},
    {"min", "minute", {{0, 0, 1}, 0, 0, 0, 60}, false},
    {"h", "hour", {{0, 0, 1}, 0, 0, 0, 3600}, false},
    {"d", "day", {{0, 0, 1}, 0, 0, 0, 86400}, false},
    {"angstrom", "angstrom", {{1}, 0, -10}, false},
    {"micron", "micron", {{1}, 0, -6}, false},
    {"degree", "degree", {{}, 1}, false},
    {"rad", "radian", {{}, 1, 0, 0, 180, std::numbers::pi}, true},
    {"degC", "celsius", {{0, 0, 0, 0, 1}, 0, 0, 0, 1, 1, true}, false},
};

struct Prefix {
    std::string_view symbol, name;
    int decimal;
};

constexpr Prefix prefixes[] = {
    {"Y", "yotta", 24}, {"Z", "zetta", 21},  {"E", "exa", 18},   {"P", "peta", 15},   {"T", "tera", 12},
    {"G", "giga", 9},   {"M", "mega", 6},    {"k", "kilo", 3},   {"h", "hecto", 2},   {"da", "deca", 1},
    {"d", "deci", -1},  {"c", "centi", -2},  {"m", "milli", -3}, {"u", "micro", -6},  {"n", "nano", -9},
    {"p", "pico", -12}, {"f", "femto", -15}, {"a", "atto", -18}, {"z", "zepto", -21}, {"y", "yocto", -24},
};

std::string_view without_plural(std::string_view word) {
    return word.size() > 4 && word.ends_with('s') ? word.substr(0, word.size() - 1) : word;
}

/// Value of one name with an optional prefix; whole names go first, so "min" is a minute and "Pa" a pascal.
std::optional<UnitValue> named(std::string_view word) {
    for (const NamedUnit& unit : named_units)
        if (word == unit.symbol || word == unit.name || without_plural(word) == unit.name) return unit.value;
    for (const Prefix& prefix : prefixes)
        for (const NamedUnit& unit : named_units) {
            if (!unit.takes_prefixes) continue;
            const auto follows = [&](std::string_view start, std::string_view rest, std::string_view wanted) {
                return rest.starts_with(start) && rest.substr(start.size()) == wanted;
            };
            if (follows(prefix.symbol, word, unit.symbol) || follows(prefix.name, word, unit.name) ||
                follows(prefix.name, without_plural(word), unit.name)) {
                UnitValue value = unit.value;
                value.decimal += prefix.decimal;
                return value;
            }
        }
    return std::nullopt;
}

/// ASCII spelling: micro, angstrom, ohm and degree signs, raised digits, dots and dashes of typography.
std::string plain(std::string_view text) {
    static constexpr std::pair<std::string_view, std::string_view> signs[] = {
        {"\u00b5", "u"},   {"\u03bc", "u"},   {"\u00c5", "angstrom"}, {"\u212b", "angstrom"},
        {"\u03a9", "ohm"}, {"\u2126", "ohm"}, {"\u00b0C", "degC"},    {"\u00b0", "degree"},
        {"\u00b7", "."},   {"\u22c5", "."},   {"\u2212", "-"},        {"\u207b", "-"},
        {"\u2070", "0"},   {"\u00b9", "1"},   {"\u00b2", "2"},        {"\u00b3", "3"},
        {"\u2074", "4"},   {"\u2075", "5"},   {"\u2076", "6"},        {"\u2077", "7"},
        {"\u2078", "8"},   {"\u2079", "9"},   {"\u00a0", " "},
    };
    std::string result;
    while (!text.empty()) {
        std::size_t used = 0;
        for (const auto& [sign, ascii] : signs)
            if (text.starts_with(sign)) {
                result += ascii;
                used = sign.size();
                break;
            }
        if (used == 0) {
            result += text.front();
            used = 1;
        }
        text.remove_prefix(used);
    }
    return result;
}

UnitValue times(const UnitValue& a, const UnitValue& b, int power) {
    UnitValue c = a;
    c.dimension.metre += power * b.dimension.metre;
    c.dimension.kilogram += power * b.dimension.kilogram;
    c.dimension.second += power * b.dimension.second;
    c.dimension.ampere += power * b.dimension.ampere;
    c.dimension.kelvin += power * b.dimension.kelvin;
    c.angle += power * b.angle;
    c.decimal += power * b.decimal;
    c.electronvolts += power * b.electronvolts;
    for (int k = 0; k < std::abs(power); ++k) {
        c.numerator *= power > 0 ? b.numerator : b.denominator;
        c.denominator *= power > 0 ? b.denominator : b.numerator;
    }
    c.is_celsius = a.is_celsius || b.is_celsius;
    for (int exponent : {c.dimension.metre, c.dimension.kilogram, c.dimension.second, c.dimension.ampere,
                         c.dimension.kelvin, c.angle, c.electronvolts})
        if (std::abs(exponent) > largest_power) throw UnitTextError("", "a power is too large");
    return c;
}

class Reader {
  public:
    explicit Reader(std::string_view text) : text_(text) {}

    UnitValue whole() {
        const UnitValue value = product(0);
        if (at_ < text_.size()) fail();
        if (value.is_celsius && factors_ != 1) throw UnitTextError("", "degC stands alone");
        return value;
    }

  private:
    [[noreturn]] void fail() const { throw UnitTextError("", "the form is not understood"); }
    char here() const { return at_ < text_.size() ? text_[at_] : '\0'; }
    bool skip_blanks() {
        const std::size_t before = at_;
        while (here() == ' ' || here() == '\t') ++at_;
        return at_ > before;
    }
    static bool is_digit(char c) { return c >= '0' && c <= '9'; }
    static bool is_letter(char c) {
        return (c >= 'a' && c <= 'z') || (c >= 'A' && c <= 'Z') || c == '_' || c == '%' ||
               static_cast<unsigned char>(c) >= 0x80;
    }

    UnitValue product(int depth) {
        UnitValue value;
        skip_blanks();
        int sign = here() == '/' ? -1 : 1;
        if (sign < 0) {
            ++at_;
            skip_blanks();
        }
        for (;;) {
            value = factor(value, sign, depth);
            const bool blank = skip_blanks();
            if (at_ == text_.size() || here() == ')') return value;
            sign = 1;
            if (here() == '/' || here() == '.' || (here() == '*' && !text_.substr(at_).starts_with("**"))) {
                sign = here() == '/' ? -1 : 1;
                ++at_;
                skip_blanks();
            } else if (!blank && here() != '(') {
                fail();
            }
        }
    }

    UnitValue factor(const UnitValue& before, int sign, int depth) {
        UnitValue value;
        if (here() == '(') {
            ++at_;
            if (depth > 8) fail();
            value = product(depth + 1);
            if (here() != ')') fail();
            ++at_;
        } else if (here() == '1') {
            ++at_;
            if (is_digit(here())) fail();
            return before;
        } else {
            const std::size_t start = at_;
            while (is_letter(here())) ++at_;
            if (at_ == start) fail();
            const std::string word(text_.substr(start, at_ - start));
            const auto known = named(word);
            if (!known) throw UnitTextError(word, "unknown unit");
            value = *known;
        }
        ++factors_;
        const int exponent = power();
        if (value.is_celsius && exponent * sign != 1) throw UnitTextError("", "degC stands alone");
        return times(before, value, sign * exponent);
    }

    int power() {
        bool written = false;
        if (here() == '^') {
            ++at_;
            written = true;
        } else if (text_.substr(at_).starts_with("**")) {
            at_ += 2;
            written = true;
        }
        const char next = at_ + 1 < text_.size() ? text_[at_ + 1] : '\0';
        int sign = 1;
        if ((here() == '-' || here() == '+') && is_digit(next)) {
            sign = here() == '-' ? -1 : 1;
            ++at_;
        }
        if (!is_digit(here())) {
            if (written) fail();
            return 1;
        }
        int value = 0;
        while (is_digit(here())) {
            value = 10 * value + (here() - '0');
            if (value > largest_power) throw UnitTextError("", "a power is too large");
            ++at_;
        }
        return sign * value;
    }

    std::string_view text_;
    std::size_t at_ = 0;
    int factors_ = 0;
};

}  // namespace

UnitValue parse_unit(std::string_view text) {
    if (text.size() > longest_text) throw UnitTextError("", "too long");
    const std::string ascii = plain(text);
    return Reader(ascii).whole();
}

std::string nearest_unit(std::string_view word, Unit wanted) {
    static constexpr std::string_view common[] = {
        "um",        "nm",   "cm",     "mm",   "m",      "angstrom", "V",      "mV",  "kV",    "eV",
        "keV",       "meV",  "MeV",    "s",    "us",     "ns",       "ms",     "min", "h",     "K",
        "degC",      "A",    "mA",     "uA",   "nA",     "ohm",      "kohm",   "F",   "pF",    "S",
        "Hz",        "kHz",  "MHz",    "C",    "J",      "W",        "degree", "rad", "meter", "micrometer",
        "nanometer", "volt", "second", "hour", "minute", "kelvin",
    };
    std::vector<std::string> of_kind, others;
    for (std::string_view name : common) {
        // Symbols are so short that a difference of two letters says nothing.
        const std::size_t longer = std::max(name.size(), word.size()),
                          shorter = std::min(name.size(), word.size());
        if (longer - shorter > 1) continue;
        const UnitValue value = parse_unit(name);
        const bool fits = value.dimension == info(wanted).dimension && value.angle == (wanted == Unit::angle);
        (fits ? of_kind : others).emplace_back(name);
    }
    // A unit of the wanted kind wins over a nearer one of another kind.
    const std::string near = nearest_name(word, of_kind);
    return near.empty() ? nearest_name(word, others) : near;
}

}  // namespace bandwright
