// SPDX-License-Identifier: GPL-3.0-or-later
// A JSON object of a drop file, flat or with objects one or two levels deep; numbers keep their digits.
#pragma once

#include <optional>
#include <string>
#include <string_view>
#include <vector>

namespace tw::io {

struct JsonMember {
  enum class Kind { Null, Text, Number, Object, Other };  // Other: true, false, arrays, objects too deep
  std::string key;
  Kind kind = Kind::Null;
  std::string text;                 ///< of Text, Number (as written) and true or false
  std::vector<JsonMember> members;  ///< of Object
};

/// nullopt when it is no JSON object. Duplicate keys stay in order.
[[nodiscard]] std::optional<std::vector<JsonMember>> readJsonObject(std::string_view text);

/// The member of this lower-case key, in any case; nullptr when there is none.
[[nodiscard]] const JsonMember* findMember(const std::vector<JsonMember>& members, std::string_view key);

}  // namespace tw::io
