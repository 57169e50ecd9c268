// SPDX-License-Identifier: GPL-3.0-or-later
// Bytes of a file to UTF-8 text, whatever program wrote them. Pure.
#pragma once

#include <string>
#include <string_view>

namespace tw::io {

/// Always valid UTF-8 without a byte order mark. A mark decides; then UTF-16 shows by its zero bytes;
/// then `hint` ("utf-8", "utf-16", "utf-16le", "utf-16be", "latin1", "windows-1252"; any case); then
/// bytes that are valid UTF-8 are taken as such and others as Windows-1252, which holds Latin-1's
/// printable characters. What cannot be decoded becomes U+FFFD.
[[nodiscard]] std::string decodeText(std::string_view bytes, const std::string& hint = {});

/// True when the bytes are well-formed UTF-8 (Unicode 15, table 3-7).
[[nodiscard]] bool isUtf8(std::string_view bytes);

}  // namespace tw::io
