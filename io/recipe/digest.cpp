// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/recipe/digest.hpp"

#include <sodium.h>

#include <array>

namespace tw::io {

std::string sha256Hex(std::string_view bytes) {
  std::array<unsigned char, crypto_hash_sha256_BYTES> hash{};
  crypto_hash_sha256(hash.data(), reinterpret_cast<const unsigned char*>(bytes.data()), bytes.size());
  std::array<char, 2 * crypto_hash_sha256_BYTES + 1> hex{};
  sodium_bin2hex(hex.data(), hex.size(), hash.data(), hash.size());
  return hex.data();
}

}  // namespace tw::io
