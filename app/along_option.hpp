#pragma once

#include <string>
#include <vector>

#include "io/case_file.hpp"

/// `--along KEY=FROM:TO:COUNT`: the values of a key at which steady states are wanted.
namespace lidwright {

struct Along {
  NumberKey key;
  std::vector<double> values;
  bool logarithmic = false;  ///< evenly spaced in the logarithm
};

/// Throws InputError.
Along read_along(const std::string& text);

/// A case whose one key takes many values. Errors are InputErrors; nothing here is collective.
class CaseAlong {
 public:
  CaseAlong(std::string text, std::string name, std::vector<std::string> settings, Along along)
      : text_(std::move(text)),
        name_(std::move(name)),
        settings_(std::move(settings)),
        along_(std::move(along)) {}

  const Along& along() const { return along_; }
  Case at(double value) const;
  /// "numbers.rayleigh = 10000".
  std::string text_of(double value) const;
  /// Unless the case is a good one at all values and its equations change.
  void refuse_bad_values() const;

 private:
  std::string text_, name_;
  std::vector<std::string> settings_;
  Along along_;
};

}  // namespace lidwright
