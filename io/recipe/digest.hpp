// SPDX-License-Identifier: GPL-3.0-or-later
// SHA-256 (FIPS 180-4) through libsodium.
#pragma once

#include <string>
#include <string_view>

namespace tw::io {

/// 64 lower-case hexadecimal digits.
[[nodiscard]] std::string sha256Hex(std::string_view bytes);

}  // namespace tw::io
