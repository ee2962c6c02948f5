// Cursor: a place in a JSON document that knows its own path and where complaints about it are collected.
// Not for: parsing JSON (json_value.hpp) or filling whole structs (read_fields.hpp).
// SPDX-License-Identifier: MIT
#pragma once

#include <cstddef>
#include <optional>
#include <span>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

#include "core/base/error.hpp"
#include "core/base/field.hpp"
#include "io/input/json_value.hpp"

namespace bandwright {

/// A place in a document. Every reading member returns nothing when the value is not what it should be and
/// adds one complaint, so that all complaints of a file come together. The document and the list outlive
/// every cursor.
class Cursor {
  public:
    Cursor(const JsonValue& value, std::string path, std::vector<Complaint>& complaints)
        : value_(&value), path_(std::move(path)), complaints_(&complaints) {}

    /// RFC 6901 JSON Pointer of this place; empty for the whole document.
    const std::string& path() const { return path_; }
    const JsonValue& value() const { return *value_; }
    /// How messages quote the value.
    std::string found() const { return found_text(*value_); }
    void complain(std::string text) const { complaints_->push_back({path_, std::move(text)}); }
    /// As complain, with ` (found ...)` at the end.
    void complain_found(const std::string& text) const { complain(text + " (found " + found() + ")"); }

    /// How many complaints there are so far, about any place.
    std::size_t complaint_count() const { return complaints_->size(); }

    bool is_object() const { return value_->kind == JsonValue::Kind::object; }
    /// The member of a key; nothing when there is none, without a complaint.
    std::optional<Cursor> find(std::string_view key) const;
    /// All members with their keys, in the order of the file; none when this is no object.
    std::vector<std::pair<std::string, Cursor>> members() const;
    /// All items of a list; none when this is no list.
    std::vector<Cursor> items() const;

    /// True for an object; otherwise complains that `what` ("a layer") is written as an object.
    bool expect_object(std::string_view what) const;
    /// True for a list; otherwise complains; `example` is one that can be copied.
    bool expect_list(std::string_view what, std::string_view example) const;
    /// Complains about every key that is not among `known`, naming the nearest one and all of `shown` (empty:
    /// known).
    void refuse_other_keys(std::string_view what, const std::vector<std::string>& known,
                           const std::vector<std::string>& shown = {}) const;

    /// A text that is not empty.
    std::optional<std::string> text(std::string_view meaning) const;
    /// A value in memory units within a range; Unit::one is a JSON number, all others are texts with a unit.
    std::optional<double> quantity(Unit unit, const Range& range = any_number) const;
    /// A whole number within a range.
    std::optional<std::size_t> whole_number(const Range& range) const;
    /// Index of a word in a closed list.
    std::optional<std::size_t> choice(std::string_view noun, std::span<const std::string_view> names) const;

  private:
    const JsonValue* value_;
    std::string path_;
    std::vector<Complaint>* complaints_;
};

}  // namespace bandwright
