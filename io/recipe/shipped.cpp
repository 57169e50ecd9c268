// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/shipped.hpp"

#include <string>
#include <system_error>

namespace tw::io {

std::filesystem::path shippedBaths() {
  namespace fs = std::filesystem;
  std::error_code error;
  const fs::path program = fs::read_symlink("/proc/self/exe", error);
  if (!error) {
    const fs::path beside = program.parent_path().parent_path() / "share" / "tankward" / "baths";
    if (fs::is_directory(beside, error)) return beside;
    const bool fromBuild = program.string().rfind(std::string(TW_BUILD_DIR) + "/", 0) == 0;
    if (fromBuild) return TW_BATHS_SOURCE_DIR;
  }
  return TW_BATHS_INSTALL_DIR;
}

}  // namespace tw::io
