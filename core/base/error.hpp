// The two kinds of trouble: wrong input (InputError) and a broken contract, which is a bug (ContractError).
// Not for: a solver that does not converge, which is a normal result with a status.
// SPDX-License-Identifier: MIT
#pragma once

#include <exception>
#include <source_location>
#include <stdexcept>
#include <string>
#include <string_view>
#include <utility>
#include <vector>

namespace bandwright {

/// One thing that is wrong with an input file or a command line.
struct Complaint {
    /// Where: an RFC 6901 JSON Pointer ("/layers/1/thickness"), "line 14, column 5", or empty for the whole
    /// file.
    std::string where;
    /// What was found, what is allowed, what to do; one sentence without the place.
    std::string text;
};

/// Wrong input: all complaints of one file together, each line "file: where: text".
class InputError : public std::exception {
  public:
    InputError(std::string file, std::vector<Complaint> complaints)
        : file_(std::move(file)), complaints_(std::move(complaints)) {
        for (const Complaint& complaint : complaints_) {
            if (!message_.empty()) message_ += '\n';
            if (!file_.empty()) message_ += file_ + ": ";
            if (!complaint.where.empty()) message_ += complaint.where + ": ";
            message_ += complaint.text;
        }
    }
    const char* what() const noexcept override { return message_.c_str(); }
    const std::string& file() const { return file_; }
    const std::vector<Complaint>& complaints() const { return complaints_; }

  private:
    std::string file_;
    std::vector<Complaint> complaints_;
    std::string message_;
};

/// A file could not be read or written.
class FileError : public std::runtime_error {
  public:
    using std::runtime_error::runtime_error;
};

/// A broken contract: a bug of ours, caught by nobody but main.
class ContractError : public std::logic_error {
  public:
    using std::logic_error::logic_error;
};

/// Throws ContractError with the place of the call when the condition does not hold.
inline void require(bool condition, std::string_view text,
                    std::source_location place = std::source_location::current()) {
    if (!condition)
        throw ContractError(std::string(place.file_name()) + ":" + std::to_string(place.line()) + ": " +
                            std::string(text));
}

}  // namespace bandwright
