#include "io/results/hdf5_file.hpp"

#include <hdf5.h>
#include <hdf5_hl.h>

#include <limits>
#include <utility>

#include "core/base/error.hpp"

namespace bandwright {

namespace {

/// An HDF5 identifier with the function that gives it back.
class Handle {
  public:
    Handle(hid_t id, herr_t (*release)(hid_t)) : id_(id), release_(release) {}
    ~Handle() {
        if (id_ >= 0) release_(id_);
    }
    Handle(const Handle&) = delete;
    Handle& operator=(const Handle&) = delete;
    operator hid_t() const { return id_; }

  private:
    hid_t id_;
    herr_t (*release_)(hid_t);
};

// HDF5's own reason, from the top of its error stack down to the cause.
std::string reason() {
    std::string words;
    H5Ewalk2(
        H5E_DEFAULT, H5E_WALK_UPWARD,
        [](unsigned, const H5E_error2_t* entry, void* data) -> herr_t {
            auto& text = *static_cast<std::string*>(data);
            if (text.empty() && entry->desc) text = entry->desc;
            return 0;
        },
        &words);
    return words.empty() ? "no reason given" : words;
}

void silence() { H5Eset_auto2(H5E_DEFAULT, nullptr, nullptr); }

[[noreturn]] void fail(const std::filesystem::path& path, const std::string& what) {
    throw FileError(path.string() + ": " + what + " (" + reason() + ")");
}

template <class Id>
Id checked(Id id, const std::filesystem::path& path, const std::string& what) {
    if (id < 0) fail(path, what);
    return id;
}

hid_t fixed_text_type(std::size_t length) {
    const hid_t type = H5Tcopy(H5T_C_S1);
    H5Tset_size(type, length > 0 ? length : 1);
    H5Tset_strpad(type, H5T_STR_NULLPAD);
    H5Tset_cset(type, H5T_CSET_UTF8);
    return type;
}

}  // namespace

Hdf5File::Hdf5File(std::int64_t id, std::filesystem::path path) : id_(id), path_(std::move(path)) {}

Hdf5File::Hdf5File(Hdf5File&& other) noexcept
    : id_(std::exchange(other.id_, -1)), path_(std::move(other.path_)) {}

Hdf5File::~Hdf5File() {
    if (id_ >= 0) H5Fclose(id_);
}

Hdf5File Hdf5File::create(const std::filesystem::path& path) {
    silence();
    const Handle creation(H5Pcreate(H5P_FILE_CREATE), H5Pclose), access(H5Pcreate(H5P_FILE_ACCESS), H5Pclose);
    // netCDF-4 wants creation order tracked; old bounds let every HDF5 of the last years read the file.
    H5Pset_link_creation_order(creation, H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED);
    H5Pset_attr_creation_order(creation, H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED);
    H5Pset_libver_bounds(access, H5F_LIBVER_EARLIEST, H5F_LIBVER_V18);
    const hid_t id = H5Fcreate(path.c_str(), H5F_ACC_TRUNC, creation, access);
    if (id < 0) fail(path, "the file cannot be created");
    return Hdf5File(id, path);
}

Hdf5File Hdf5File::open(const std::filesystem::path& path) {
    silence();
    const hid_t id = H5Fopen(path.c_str(), H5F_ACC_RDONLY, H5P_DEFAULT);
    if (id < 0) fail(path, "the file cannot be opened as a result file");
    return Hdf5File(id, path);
}

void Hdf5File::attribute(const std::string& dataset, const std::string& name, const std::string& value) {
    const Handle object(H5Oopen(id_, dataset.empty() ? "/" : dataset.c_str(), H5P_DEFAULT), H5Oclose);
    const Handle type(fixed_text_type(value.size()), H5Tclose), space(H5Screate(H5S_SCALAR), H5Sclose);
    const Handle attribute(H5Acreate2(object, name.c_str(), type, space, H5P_DEFAULT, H5P_DEFAULT), H5Aclose);
    if (attribute < 0 || H5Awrite(attribute, type, value.empty() ? "\0" : value.c_str()) < 0)
        fail(path_, "the attribute " + name + " cannot be written");
}

void Hdf5File::attribute(const std::string& dataset, const std::string& name, std::int64_t value) {
    const Handle object(H5Oopen(id_, dataset.empty() ? "/" : dataset.c_str(), H5P_DEFAULT), H5Oclose);
    const Handle space(H5Screate(H5S_SCALAR), H5Sclose);
    const Handle attribute(H5Acreate2(object, name.c_str(), H5T_STD_I64LE, space, H5P_DEFAULT, H5P_DEFAULT),
                           H5Aclose);
    if (attribute < 0 || H5Awrite(attribute, H5T_NATIVE_INT64, &value) < 0)
        fail(path_, "the attribute " + name + " cannot be written");
}

namespace {

struct Shape {
    std::vector<hsize_t> lengths;
    hsize_t count = 1;
};

Shape shape_of(hid_t file, const std::vector<std::string>& scales, const std::filesystem::path& path) {
    Shape shape;
    for (const std::string& name : scales) {
        const Handle dataset(checked(H5Dopen2(file, name.c_str(), H5P_DEFAULT), path, "no scale " + name),
                             H5Dclose);
        const Handle space(H5Dget_space(dataset), H5Sclose);
        hsize_t length = 0;
        H5Sget_simple_extent_dims(space, &length, nullptr);
        shape.lengths.push_back(length);
        shape.count *= length;
    }
    return shape;
}

void attach(hid_t file, hid_t dataset, const std::vector<std::string>& scales,
            const std::filesystem::path& path) {
    for (unsigned axis = 0; axis < scales.size(); ++axis) {
        const Handle scale(
            checked(H5Dopen2(file, scales[axis].c_str(), H5P_DEFAULT), path, "no scale " + scales[axis]),
            H5Dclose);
        if (H5DSattach_scale(dataset, scale, axis) < 0)
            fail(path, "the scale " + scales[axis] + " cannot be attached");
    }
}

hid_t creation_properties() {
    const hid_t properties = H5Pcreate(H5P_DATASET_CREATE);
    H5Pset_attr_creation_order(properties, H5P_CRT_ORDER_TRACKED | H5P_CRT_ORDER_INDEXED);
    return properties;
}

void write_data(hid_t file, const std::string& name, const std::vector<std::string>& scales, hid_t file_type,
                hid_t memory_type, const void* data, std::size_t count, const void* fill,
                const std::filesystem::path& path) {
    const Shape shape = shape_of(file, scales, path);
    require(shape.count == count, "the variable " + name + " does not fit its dimensions");
    const Handle space(
        H5Screate_simple(static_cast<int>(shape.lengths.size()), shape.lengths.data(), nullptr), H5Sclose);
    const Handle properties(creation_properties(), H5Pclose);
    if (fill) H5Pset_fill_value(properties, memory_type, fill);
    const Handle dataset(
        H5Dcreate2(file, name.c_str(), file_type, space, H5P_DEFAULT, properties, H5P_DEFAULT), H5Dclose);
    if (dataset < 0) fail(path, "the variable " + name + " cannot be created");
    if (count > 0 && H5Dwrite(dataset, memory_type, H5S_ALL, H5S_ALL, H5P_DEFAULT, data) < 0)
        fail(path, "the variable " + name + " cannot be written");
    if (fill) {
        const hsize_t one = 1;
        const Handle single(H5Screate_simple(1, &one, nullptr), H5Sclose);
        const Handle attribute(H5Acreate2(dataset, "_FillValue", file_type, single, H5P_DEFAULT, H5P_DEFAULT),
                               H5Aclose);
        H5Awrite(attribute, memory_type, fill);
    }
    attach(file, dataset, scales, path);
}

}  // namespace

void Hdf5File::scale(const std::string& name, const std::vector<double>& values) {
    const hsize_t length = values.size();
    const Handle space(H5Screate_simple(1, &length, nullptr), H5Sclose),
        properties(creation_properties(), H5Pclose);
    const Handle dataset(
        H5Dcreate2(id_, name.c_str(), H5T_IEEE_F64LE, space, H5P_DEFAULT, properties, H5P_DEFAULT), H5Dclose);
    if (dataset < 0) fail(path_, "the scale " + name + " cannot be created");
    if (length > 0 && H5Dwrite(dataset, H5T_NATIVE_DOUBLE, H5S_ALL, H5S_ALL, H5P_DEFAULT, values.data()) < 0)
        fail(path_, "the scale " + name + " cannot be written");
    if (H5DSset_scale(dataset, name.c_str()) < 0) fail(path_, name + " cannot be made a scale");
}

void Hdf5File::variable(const std::string& name, const std::vector<std::string>& scales,
                        const std::vector<double>& values) {
    const double fill = std::numeric_limits<double>::quiet_NaN();
    write_data(id_, name, scales, H5T_IEEE_F64LE, H5T_NATIVE_DOUBLE, values.data(), values.size(), &fill,
               path_);
}

void Hdf5File::variable(const std::string& name, const std::vector<std::string>& scales,
                        const std::vector<int>& values) {
    write_data(id_, name, scales, H5T_STD_I32LE, H5T_NATIVE_INT, values.data(), values.size(), nullptr,
               path_);
}

void Hdf5File::text(const std::string& name, const std::string& value) {
    const Handle type(H5Tcopy(H5T_C_S1), H5Tclose), space(H5Screate(H5S_SCALAR), H5Sclose),
        properties(creation_properties(), H5Pclose);
    H5Tset_size(type, H5T_VARIABLE);
    H5Tset_cset(type, H5T_CSET_UTF8);
    const Handle dataset(H5Dcreate2(id_, name.c_str(), type, space, H5P_DEFAULT, properties, H5P_DEFAULT),
                         H5Dclose);
    const char* pointer = value.c_str();
    if (dataset < 0 || H5Dwrite(dataset, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, &pointer) < 0)
        fail(path_, "the text " + name + " cannot be written");
}

std::vector<std::size_t> Hdf5File::lengths(const std::string& name) const {
    const Handle dataset(checked(H5Dopen2(id_, name.c_str(), H5P_DEFAULT), path_, "there is no " + name),
                         H5Dclose);
    const Handle space(H5Dget_space(dataset), H5Sclose);
    std::vector<hsize_t> lengths(static_cast<std::size_t>(H5Sget_simple_extent_ndims(space)));
    if (!lengths.empty()) H5Sget_simple_extent_dims(space, lengths.data(), nullptr);
    return {lengths.begin(), lengths.end()};
}

std::vector<double> Hdf5File::values(const std::string& name) const {
    std::size_t count = 1;
    for (const std::size_t length : lengths(name)) count *= length;
    std::vector<double> data(count);
    const Handle dataset(H5Dopen2(id_, name.c_str(), H5P_DEFAULT), H5Dclose);
    if (count > 0 && H5Dread(dataset, H5T_NATIVE_DOUBLE, H5S_ALL, H5S_ALL, H5P_DEFAULT, data.data()) < 0)
        fail(path_, name + " cannot be read");
    return data;
}

std::string Hdf5File::text(const std::string& name) const {
    const Handle dataset(checked(H5Dopen2(id_, name.c_str(), H5P_DEFAULT), path_, "there is no " + name),
                         H5Dclose);
    const Handle type(H5Dget_type(dataset), H5Tclose), space(H5Dget_space(dataset), H5Sclose);
    char* pointer = nullptr;
    if (H5Tis_variable_str(type) <= 0 || H5Dread(dataset, type, H5S_ALL, H5S_ALL, H5P_DEFAULT, &pointer) < 0)
        fail(path_, name + " cannot be read");
    const std::string result = pointer ? pointer : "";
    H5Dvlen_reclaim(type, space, H5P_DEFAULT, &pointer);
    return result;
}

std::string Hdf5File::attribute(const std::string& name) const {
    const Handle attribute(
        checked(H5Aopen(id_, name.c_str(), H5P_DEFAULT), path_, "there is no attribute " + name), H5Aclose);
    const Handle type(H5Aget_type(attribute), H5Tclose);
    std::string value(H5Tget_size(type), '\0');
    if (H5Aread(attribute, type, value.data()) < 0) fail(path_, "the attribute " + name + " cannot be read");
    return value.substr(0, value.find('\0'));
}

std::vector<std::string> Hdf5File::names() const {
    std::vector<std::string> list;
    const auto add = [](hid_t, const char* name, const H5L_info_t*, void* data) -> herr_t {
        static_cast<std::vector<std::string>*>(data)->emplace_back(name);
        return 0;
    };
    hsize_t index = 0;
    if (H5Literate(id_, H5_INDEX_NAME, H5_ITER_NATIVE, &index, add, &list) < 0)
        fail(path_, "its datasets cannot be listed");
    return list;
}

bool Hdf5File::is_text(const std::string& name) const {
    const Handle dataset(checked(H5Dopen2(id_, name.c_str(), H5P_DEFAULT), path_, "there is no " + name),
                         H5Dclose);
    const Handle type(H5Dget_type(dataset), H5Tclose);
    return H5Tget_class(type) == H5T_STRING;
}

std::string Hdf5File::first_scale(const std::string& name) const {
    const Handle dataset(checked(H5Dopen2(id_, name.c_str(), H5P_DEFAULT), path_, "there is no " + name),
                         H5Dclose);
    std::string scale;
    const auto take = [](hid_t, unsigned, hid_t found, void* data) -> herr_t {
        std::string text(256, '\0');
        const ssize_t length = H5Iget_name(found, text.data(), text.size());
        if (length > 1)
            *static_cast<std::string*>(data) = text.substr(1, static_cast<std::size_t>(length) - 1);
        return 1;
    };
    if (H5Iget_type(dataset) == H5I_DATASET && H5DSget_num_scales(dataset, 0) > 0)
        H5DSiterate_scales(dataset, 0, nullptr, take, &scale);
    return scale;
}

void Hdf5File::close() {
    if (id_ >= 0 && H5Fclose(std::exchange(id_, -1)) < 0) fail(path_, "the file cannot be closed");
}

}  // namespace bandwright
