// SPDX-License-Identifier: GPL-3.0-or-later
// Private to io/store/: the folder that holds store and lock.
#pragma once

#include <filesystem>
#include <string>

#include "model/result.hpp"

namespace tw::io::store {

/// Makes the folder with the ones above it and leaves it to its owner alone (0700).
model::Result<model::Done> makeDataDir(const std::filesystem::path& dataDir);

/// `store_open`, kind Machine: "could not <purpose>: <the system's words>".
[[nodiscard]] model::Fault dataDirFault(const std::filesystem::path& path, const std::string& purpose,
                                        int systemError);

}  // namespace tw::io::store
