// SPDX-License-Identifier: MIT
#include "io/input/quantity.hpp"

#include <fmt/format.h>

#include <charconv>
#include <cmath>
#include <cstdlib>
#include <optional>

#include "core/base/constants.hpp"
#include "io/input/message_text.hpp"
#include "io/input/unit_text.hpp"

namespace bandwright {

namespace {

/// Ice point [K]: offset of the Celsius scale. Exact. Source: [SI2019].
constexpr double celsius_zero = 273.15;

bool is_digit(char c) { return c >= '0' && c <= '9'; }

std::string_view trimmed(std::string_view text) {
    while (!text.empty() && (text.front() == ' ' || text.front() == '\t')) text.remove_prefix(1);
    while (!text.empty() && (text.back() == ' ' || text.back() == '\t')) text.remove_suffix(1);
    return text;
}

/// A decimal number in pieces, and how many characters it takes.
struct Decimal {
    std::string mantissa;
    long exponent = 0;
    std::size_t length = 0;
};

std::optional<Decimal> split_number(std::string_view text) {
    Decimal number;
    std::size_t at = 0;
    if (at < text.size() && (text[at] == '+' || text[at] == '-')) {
        if (text[at] == '-') number.mantissa = "-";
        ++at;
    }
    std::size_t digits = 0;
    for (bool point = false; at < text.size() && (is_digit(text[at]) || (text[at] == '.' && !point)); ++at) {
        point = point || text[at] == '.';
        digits += is_digit(text[at]);
        number.mantissa += text[at];
    }
    if (digits == 0) return std::nullopt;
    if (at < text.size() && (text[at] == 'e' || text[at] == 'E')) {
        std::size_t next = at + 1;
        const bool negative = next < text.size() && text[next] == '-';
        if (next < text.size() && (text[next] == '+' || text[next] == '-')) ++next;
        if (next < text.size() && is_digit(text[next])) {
            constexpr long far_out = 100000;
            for (; next < text.size() && is_digit(text[next]); ++next)
                if (number.exponent < far_out) number.exponent = 10 * number.exponent + (text[next] - '0');
            if (negative) number.exponent = -number.exponent;
            at = next;
        }
    }
    number.length = at;
    return number;
}

bool begins_not_finite(std::string_view text) {
    if (text.starts_with('-') || text.starts_with('+')) text.remove_prefix(1);
    std::string start;
    for (char c : text.substr(0, 3)) start += static_cast<char>(c >= 'A' && c <= 'Z' ? c - 'A' + 'a' : c);
    return start == "inf" || start == "nan";
}

[[noreturn]] void fail(const std::string& sentence, std::string_view found) {
    throw QuantityError(fmt::format("{} (found {})", sentence, in_quotes(found)));
}

UnitValue unit_of(std::string_view unit_text, Unit unit, std::string_view whole) {
    try {
        return parse_unit(unit_text);
    } catch (const UnitTextError& error) {
        if (!error.word().empty()) {
            const std::string near = nearest_unit(error.word(), unit);
            if (!near.empty())
                fail(fmt::format("there is no unit \"{}\"; did you mean \"{}\"?", error.word(), near), whole);
            fail(fmt::format("there is no unit \"{}\"; needs a unit of {}, for example \"{}\"", error.word(),
                             info(unit).quantity, info(unit).example),
                 whole);
        }
        if (std::string_view(error.what()) == "degC stands alone")
            fail("degC can only stand alone; write K in a compound unit", whole);
        fail(fmt::format("the unit {} cannot be read; write it as in \"{}\"", in_quotes(unit_text),
                         info(unit).example),
             whole);
    }
}

}  // namespace

std::string kind_with_article(Unit unit) {
    const std::string_view kind = info(unit).quantity;
    const bool vowel = std::string_view("aeiouAEIOU").find(kind.front()) != std::string_view::npos;
    return fmt::format("{} {}", vowel ? "an" : "a", kind);
}

std::string missing_unit_text(Unit unit, std::string_view found) {
    return fmt::format("needs a unit of {}, for example \"{}\" (found {})", info(unit).quantity,
                       info(unit).example, found);
}

double parse_quantity(std::string_view text, Unit unit, BareNumber bare) {
    const UnitInfo& wanted = info(unit);
    const std::string_view whole = trimmed(text);
    if (begins_not_finite(whole)) fail("must be a finite number", text);
    const auto number = split_number(whole);
    if (!number)
        fail(fmt::format("needs {}, a number with a unit, for example \"{}\"", kind_with_article(unit),
                         wanted.example),
             text);
    std::string_view unit_text = trimmed(whole.substr(number->length));
    if (whole.size() > number->length + 1 && whole[number->length] == ',' &&
        is_digit(whole[number->length + 1]))
        fail(fmt::format("the decimal separator is a point, as in \"{}\"", wanted.example), text);
    const std::size_t after_e = unit_text.find_first_not_of("+-", 1);
    if ((unit_text.starts_with('e') || unit_text.starts_with('E')) && after_e != std::string_view::npos &&
        is_digit(unit_text[after_e]))
        fail(fmt::format("there is a blank inside the number; write it as in \"{}\"", wanted.example), text);
    if (unit_text.empty() && unit != Unit::one) {
        if (bare == BareNumber::refused) throw QuantityError(missing_unit_text(unit, in_quotes(text)));
        unit_text = wanted.text;
    }
    const UnitValue value = unit_text.empty() ? UnitValue{} : unit_of(unit_text, unit, text);
    if (!(value.dimension == wanted.dimension) || value.angle != (unit == Unit::angle ? 1 : 0))
        fail(fmt::format("needs {}, for example \"{}\"", kind_with_article(unit), wanted.example), text);

    const std::string decimal = fmt::format("{}e{}", number->mantissa, number->exponent + value.decimal);
    double result = 0;
    const auto [end, code] = std::from_chars(decimal.data(), decimal.data() + decimal.size(), result);
    if (code == std::errc::result_out_of_range)
        fail(number->exponent + value.decimal > 0 ? "must be a finite number"
                                                  : "is closer to 0 than a number can be kept; write 0",
             text);
    if (value.numerator != 1 || value.denominator != 1) result = result * value.numerator / value.denominator;
    const int charges = value.electronvolts - (unit == Unit::energy ? 1 : 0);
    for (int k = 0; k < std::abs(charges); ++k)
        result = charges > 0 ? result * constants::elementary_charge : result / constants::elementary_charge;
    if (value.is_celsius) result += celsius_zero;
    if (!std::isfinite(result)) fail("must be a finite number", text);
    return result;
}

}  // namespace bandwright
