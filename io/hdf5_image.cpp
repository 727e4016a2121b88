#include "io/hdf5_image.hpp"

#include <algorithm>
#include <stdexcept>

namespace lidwright {
namespace {

constexpr std::size_t growth = 1 << 20;  // bytes by which the memory of a file grows

void require(bool good, const std::string& what) {
  if (!good) throw std::runtime_error("HDF5 cannot handle " + what);
}

Hdf5Id memory_access() {
  Hdf5Id access(H5Pcreate(H5P_FILE_ACCESS), H5Pclose, "access properties");
  require(H5Pset_fapl_core(access, growth, false) >= 0, "a file in memory");
  return access;
}

Hdf5Id text_type(std::size_t size) {
  Hdf5Id type(H5Tcopy(H5T_C_S1), H5Tclose, "text");
  require(H5Tset_size(type, std::max<std::size_t>(size, 1)) >= 0, "text");
  require(H5Tset_strpad(type, H5T_STR_NULLPAD) >= 0 && H5Tset_cset(type, H5T_CSET_UTF8) >= 0,
          "text");
  return type;
}

/// Room for the user block, in which io/checkpoint puts its seal.
constexpr hsize_t user_block = 512;

}  // namespace

Hdf5Id::Hdf5Id(hid_t raw, herr_t (*close)(hid_t), const std::string& what)
    : raw_(raw), close_(close) {
  require(raw >= 0, what);
}

QuietHdf5::QuietHdf5() {
  H5Eget_auto2(H5E_DEFAULT, &function_, &data_);
  H5Eset_auto2(H5E_DEFAULT, nullptr, nullptr);
}

QuietHdf5::~QuietHdf5() { H5Eset_auto2(H5E_DEFAULT, function_, data_); }

Hdf5Writer::Hdf5Writer() {
  const Hdf5Id creation(H5Pcreate(H5P_FILE_CREATE), H5Pclose, "creation properties");
  require(H5Pset_userblock(creation, user_block) >= 0, "a user block");
  file_ = Hdf5Id(H5Fcreate("in memory", H5F_ACC_TRUNC, creation, memory_access()), H5Fclose,
                 "a file in memory");
}

void Hdf5Writer::group(const std::string& path) {
  const Hdf5Id creation(H5Pcreate(H5P_GROUP_CREATE), H5Pclose, path);
  require(H5Pset_obj_track_times(creation, false) >= 0, path);
  const Hdf5Id made(H5Gcreate2(file_, path.c_str(), H5P_DEFAULT, creation, H5P_DEFAULT), H5Gclose,
                    path);
}

void Hdf5Writer::array(const std::string& path, const std::vector<hsize_t>& sizes,
                       const double* values) {
  const Hdf5Id space(sizes.empty()
                         ? H5Screate(H5S_SCALAR)
                         : H5Screate_simple(static_cast<int>(sizes.size()), sizes.data(), nullptr),
                     H5Sclose, path);
  const Hdf5Id creation(H5Pcreate(H5P_DATASET_CREATE), H5Pclose, path);
  require(H5Pset_obj_track_times(creation, false) >= 0, path);  // equal archives make equal files
  const Hdf5Id set(
      H5Dcreate2(file_, path.c_str(), H5T_IEEE_F64LE, space, H5P_DEFAULT, creation, H5P_DEFAULT),
      H5Dclose, path);
  require(H5Dwrite(set, H5T_NATIVE_DOUBLE, H5S_ALL, H5S_ALL, H5P_DEFAULT, values) >= 0, path);
}

void Hdf5Writer::text(const std::string& name, const std::string& value) {
  const Hdf5Id type = text_type(value.size());
  const Hdf5Id space(H5Screate(H5S_SCALAR), H5Sclose, name);
  const Hdf5Id attribute(H5Acreate2(file_, name.c_str(), type, space, H5P_DEFAULT, H5P_DEFAULT),
                         H5Aclose, name);
  require(H5Awrite(attribute, type, value.c_str()) >= 0, name);
}

std::string Hdf5Writer::image() {
  require(H5Fflush(file_, H5F_SCOPE_GLOBAL) >= 0, "the file");
  const ssize_t size = H5Fget_file_image(file_, nullptr, 0);
  require(size > 0, "the file's image");
  std::string bytes(static_cast<std::size_t>(size), '\0');
  require(H5Fget_file_image(file_, bytes.data(), bytes.size()) == size, "the file's image");
  return bytes;
}

Hdf5Reader::Hdf5Reader(const std::string& image) {
  const Hdf5Id access = memory_access();
  // HDF5 copies the bytes and does not change the original.
  require(H5Pset_file_image(access, const_cast<char*>(image.data()), image.size()) >= 0,
          "the file's image");
  file_ = Hdf5Id(H5Fopen("in memory", H5F_ACC_RDONLY, access), H5Fclose, "the file");
}

std::vector<std::string> Hdf5Reader::names(const std::string& group) const {
  const Hdf5Id id(H5Gopen2(file_, group.c_str(), H5P_DEFAULT), H5Gclose, group);
  std::vector<std::string> found;
  const auto add = [](hid_t, const char* name, const H5L_info_t*, void* list) -> herr_t {
    static_cast<std::vector<std::string>*>(list)->emplace_back(name);
    return 0;
  };
  require(H5Literate(id, H5_INDEX_NAME, H5_ITER_INC, nullptr, add, &found) >= 0, group);
  return found;
}

Hdf5Array Hdf5Reader::array(const std::string& path) const {
  const Hdf5Id set(H5Dopen2(file_, path.c_str(), H5P_DEFAULT), H5Dclose, path);
  const Hdf5Id space(H5Dget_space(set), H5Sclose, path);
  const int dimensions = H5Sget_simple_extent_ndims(space);
  const hssize_t count = H5Sget_simple_extent_npoints(space);
  require(dimensions >= 0 && count >= 0, path);
  Hdf5Array result;
  result.sizes.resize(static_cast<std::size_t>(dimensions));
  result.values.resize(static_cast<std::size_t>(count));
  H5Sget_simple_extent_dims(space, result.sizes.data(), nullptr);
  require(H5Dread(set, H5T_NATIVE_DOUBLE, H5S_ALL, H5S_ALL, H5P_DEFAULT, result.values.data()) >= 0,
          path);
  return result;
}

std::string Hdf5Reader::text(const std::string& name) const {
  const Hdf5Id attribute(H5Aopen(file_, name.c_str(), H5P_DEFAULT), H5Aclose, name);
  const Hdf5Id stored(H5Aget_type(attribute), H5Tclose, name);
  const Hdf5Id type = text_type(H5Tget_size(stored));
  std::string value(std::max<std::size_t>(H5Tget_size(stored), 1), '\0');
  require(H5Aread(attribute, type, value.data()) >= 0, name);
  return value.substr(0, value.find('\0'));
}

}  // namespace lidwright
