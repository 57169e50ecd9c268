// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/text_encoding.hpp"

#include <algorithm>
#include <array>
#include <cstddef>
#include <cstdint>

namespace tw::io {
namespace {

constexpr char32_t kReplacement = 0xFFFD;

unsigned byteAt(std::string_view bytes, std::size_t i) {
  return static_cast<unsigned char>(bytes[i]);
}

void appendUtf8(std::string& out, char32_t c) {
  const auto put = [&out](char32_t value) { out += static_cast<char>(value); };
  if (c < 0x80) {
    put(c);
  } else if (c < 0x800) {
    put(0xC0 | (c >> 6));
    put(0x80 | (c & 0x3F));
  } else if (c < 0x10000) {
    put(0xE0 | (c >> 12));
    put(0x80 | ((c >> 6) & 0x3F));
    put(0x80 | (c & 0x3F));
  } else {
    put(0xF0 | (c >> 18));
    put(0x80 | ((c >> 12) & 0x3F));
    put(0x80 | ((c >> 6) & 0x3F));
    put(0x80 | (c & 0x3F));
  }
}

/// Length of the well-formed sequence at `i`, 0 when there is none.
std::size_t sequenceLength(std::string_view bytes, std::size_t i) {
  const unsigned lead = byteAt(bytes, i);
  if (lead < 0x80) return 1;
  unsigned low = 0x80, high = 0xBF;
  std::size_t length = 0;
  if (lead >= 0xC2 && lead <= 0xDF) {
    length = 2;
  } else if (lead >= 0xE0 && lead <= 0xEF) {
    length = 3;
    if (lead == 0xE0) low = 0xA0;
    if (lead == 0xED) high = 0x9F;
  } else if (lead >= 0xF0 && lead <= 0xF4) {
    length = 4;
    if (lead == 0xF0) low = 0x90;
    if (lead == 0xF4) high = 0x8F;
  } else {
    return 0;
  }
  if (bytes.size() - i < length) return 0;
  if (byteAt(bytes, i + 1) < low || byteAt(bytes, i + 1) > high) return 0;
  for (std::size_t k = 2; k < length; ++k) {
    if (byteAt(bytes, i + k) < 0x80 || byteAt(bytes, i + k) > 0xBF) return 0;
  }
  return length;
}

std::string mendUtf8(std::string_view bytes) {
  if (isUtf8(bytes)) return std::string(bytes);
  std::string out;
  out.reserve(bytes.size());
  for (std::size_t i = 0; i < bytes.size();) {
    const std::size_t length = sequenceLength(bytes, i);
    if (length == 0) {
      appendUtf8(out, kReplacement);
      ++i;
    } else {
      out.append(bytes.substr(i, length));
      i += length;
    }
  }
  return out;
}

std::string fromUtf16(std::string_view bytes, bool bigEndian) {
  const auto unit = [&](std::size_t i) -> char32_t {
    const unsigned a = byteAt(bytes, i), b = byteAt(bytes, i + 1);
    return bigEndian ? (a << 8) | b : (b << 8) | a;
  };
  std::string out;
  out.reserve(bytes.size() / 2);
  for (std::size_t i = 0; i + 1 < bytes.size(); i += 2) {
    char32_t c = unit(i);
    if (c >= 0xD800 && c <= 0xDBFF && i + 3 < bytes.size() && unit(i + 2) >= 0xDC00 &&
        unit(i + 2) <= 0xDFFF) {
      c = 0x10000 + ((c - 0xD800) << 10) + (unit(i + 2) - 0xDC00);
      i += 2;
    } else if (c >= 0xD800 && c <= 0xDFFF) {
      c = kReplacement;
    }
    appendUtf8(out, c);
  }
  if (bytes.size() % 2 != 0) appendUtf8(out, kReplacement);
  return out;
}

/// Windows-1252, bytes 80 to 9F (Unicode mapping table CP1252); unassigned ones stay control characters.
constexpr std::array<char16_t, 32> kWindows1252 = {
    0x20AC, 0x0081, 0x201A, 0x0192, 0x201E, 0x2026, 0x2020, 0x2021, 0x02C6, 0x2030, 0x0160,
    0x2039, 0x0152, 0x008D, 0x017D, 0x008F, 0x0090, 0x2018, 0x2019, 0x201C, 0x201D, 0x2022,
    0x2013, 0x2014, 0x02DC, 0x2122, 0x0161, 0x203A, 0x0153, 0x009D, 0x017E, 0x0178};

std::string fromWindows1252(std::string_view bytes) {
  std::string out;
  out.reserve(bytes.size() + bytes.size() / 8);
  for (std::size_t i = 0; i < bytes.size(); ++i) {
    const unsigned byte = byteAt(bytes, i);
    appendUtf8(out, byte >= 0x80 && byte <= 0x9F ? char32_t{kWindows1252[byte - 0x80]} : byte);
  }
  return out;
}

enum class Utf16 { No, Little, Big };

/// Tables are mostly ASCII, so UTF-16 without a mark has zeros in every other byte.
Utf16 looksLikeUtf16(std::string_view bytes) {
  constexpr std::size_t kSample = 512;
  const std::size_t size = std::min(bytes.size(), kSample) & ~std::size_t{1};
  if (size < 8) return Utf16::No;
  std::size_t evenZeros = 0, oddZeros = 0;
  for (std::size_t i = 0; i < size; i += 2) {
    evenZeros += byteAt(bytes, i) == 0 ? 1 : 0;
    oddZeros += byteAt(bytes, i + 1) == 0 ? 1 : 0;
  }
  const std::size_t most = size / 2 * 3 / 4, few = size / 2 / 16;
  if (oddZeros >= most && evenZeros <= few) return Utf16::Little;
  if (evenZeros >= most && oddZeros <= few) return Utf16::Big;
  return Utf16::No;
}

std::string normalised(const std::string& hint) {
  std::string out;
  for (const char c : hint) {
    if (c >= 'A' && c <= 'Z') {
      out += static_cast<char>(c + 32);
    } else if (c != '-' && c != '_' && c != ' ') {
      out += c;
    }
  }
  return out;
}

}  // namespace

bool isUtf8(std::string_view bytes) {
  for (std::size_t i = 0; i < bytes.size();) {
    const std::size_t length = sequenceLength(bytes, i);
    if (length == 0) return false;
    i += length;
  }
  return true;
}

std::string decodeText(std::string_view bytes, const std::string& hint) {
  if (bytes.substr(0, 3) == "\xEF\xBB\xBF") return mendUtf8(bytes.substr(3));
  if (bytes.substr(0, 2) == "\xFF\xFE") return fromUtf16(bytes.substr(2), false);
  if (bytes.substr(0, 2) == "\xFE\xFF") return fromUtf16(bytes.substr(2), true);
  const std::string named = normalised(hint);
  const Utf16 seen = looksLikeUtf16(bytes);
  if (seen != Utf16::No) return fromUtf16(bytes, seen == Utf16::Big);
  if (named == "utf16" || named == "utf16le") return fromUtf16(bytes, false);
  if (named == "utf16be") return fromUtf16(bytes, true);
  if (named == "utf8") return mendUtf8(bytes);
  if (named == "latin1" || named == "iso88591" || named == "windows1252" || named == "cp1252") {
    return fromWindows1252(bytes);
  }
  return isUtf8(bytes) ? std::string(bytes) : fromWindows1252(bytes);
}

}  // namespace tw::io
