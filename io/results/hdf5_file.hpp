// An HDF5 file being written or read: RAII over the C API, errors as FileError. hdf5.h is included in the
// .cpp alone. Not for: which variables a result file has (write_results.cpp).
//
// SPDX-License-Identifier: MIT
#pragma once

#include <cstdint>
#include <filesystem>
#include <string>
#include <vector>

namespace bandwright {

/// A flat file of datasets with dimension scales, readable as netCDF-4.
class Hdf5File {
  public:
    /// Creates the file (replacing one of that name). Errors: FileError with the file's name and HDF5's
    /// reason.
    static Hdf5File create(const std::filesystem::path& path);
    /// Opens an existing file for reading. Errors: FileError.
    static Hdf5File open(const std::filesystem::path& path);
    ~Hdf5File();
    Hdf5File(Hdf5File&& other) noexcept;
    Hdf5File& operator=(Hdf5File&&) = delete;

    /// Text attribute of the file, or of a dataset when `dataset` is not empty; fixed-length UTF-8.
    void attribute(const std::string& dataset, const std::string& name, const std::string& value);
    void attribute(const std::string& dataset, const std::string& name, std::int64_t value);

    /// A dimension scale of doubles.
    void scale(const std::string& name, const std::vector<double>& values);
    /// Doubles over named scales, row-major, with _FillValue NaN.
    void variable(const std::string& name, const std::vector<std::string>& scales,
                  const std::vector<double>& values);
    /// 32-bit integers over named scales.
    void variable(const std::string& name, const std::vector<std::string>& scales,
                  const std::vector<int>& values);
    /// A scalar string of any length, UTF-8.
    void text(const std::string& name, const std::string& value);

    /// Doubles of a dataset, its lengths, its text, an attribute's text; FileError when absent.
    std::vector<double> values(const std::string& name) const;
    std::vector<std::size_t> lengths(const std::string& name) const;
    std::string text(const std::string& name) const;
    std::string attribute(const std::string& name) const;
    /// Names of all datasets.
    std::vector<std::string> names() const;
    /// Whether a dataset holds text.
    bool is_text(const std::string& name) const;
    /// Name of the scale of a dataset's first dimension; empty when it has none.
    std::string first_scale(const std::string& name) const;

    /// Closes and reports trouble; the destructor closes without a word. Errors: FileError.
    void close();

  private:
    Hdf5File(std::int64_t id, std::filesystem::path path);
    std::int64_t id_ = -1;
    std::filesystem::path path_;
};

}  // namespace bandwright
