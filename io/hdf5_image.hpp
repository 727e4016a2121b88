#pragma once

#include <hdf5.h>

#include <string>
#include <utility>
#include <vector>

/// An HDF5 file in memory: nothing of HDF5 touches the disk, so that what is read has been checked
/// before and what is written can be checksummed and made durable by io/atomic_file. Members throw
/// std::runtime_error.
namespace lidwright {

/// One owner for an HDF5 identifier, any kind.
class Hdf5Id {
 public:
  Hdf5Id() = default;
  /// Throws naming `what` when HDF5 failed.
  Hdf5Id(hid_t raw, herr_t (*close)(hid_t), const std::string& what);
  Hdf5Id(Hdf5Id&& other) noexcept
      : raw_(std::exchange(other.raw_, H5I_INVALID_HID)), close_(other.close_) {}
  Hdf5Id& operator=(Hdf5Id&& other) noexcept {
    std::swap(raw_, other.raw_);
    std::swap(close_, other.close_);
    return *this;
  }
  ~Hdf5Id() {
    if (raw_ >= 0) close_(raw_);
  }
  operator hid_t() const { return raw_; }  // NOLINT: an identifier is meant to be passed to HDF5

 private:
  hid_t raw_ = H5I_INVALID_HID;
  herr_t (*close_)(hid_t) = nullptr;
};

/// HDF5 prints no errors of its own while one of these lives.
class QuietHdf5 {
 public:
  QuietHdf5();
  QuietHdf5(const QuietHdf5&) = delete;
  QuietHdf5& operator=(const QuietHdf5&) = delete;
  ~QuietHdf5();

 private:
  H5E_auto2_t function_ = nullptr;
  void* data_ = nullptr;
};

/// Numbers in rows; an empty list of sizes is a single number.
struct Hdf5Array {
  std::vector<hsize_t> sizes;
  std::vector<double> values;
};

class Hdf5Writer {
 public:
  Hdf5Writer();
  void group(const std::string& path);
  void array(const std::string& path, const std::vector<hsize_t>& sizes, const double* values);
  void number(const std::string& path, double value) { array(path, {}, &value); }
  /// An attribute of the file.
  void text(const std::string& name, const std::string& value);
  /// The bytes of the file, as HDF5 would have written them to the disk.
  std::string image();

 private:
  QuietHdf5 quiet_;
  Hdf5Id file_;
};

class Hdf5Reader {
 public:
  explicit Hdf5Reader(const std::string& image);
  /// Names in a group, in alphabetical order.
  std::vector<std::string> names(const std::string& group) const;
  Hdf5Array array(const std::string& path) const;
  double number(const std::string& path) const { return array(path).values.at(0); }
  std::string text(const std::string& name) const;

 private:
  QuietHdf5 quiet_;
  Hdf5Id file_;
};

}  // namespace lidwright
