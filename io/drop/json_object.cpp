// SPDX-License-Identifier: GPL-3.0-or-later
#include "io/drop/json_object.hpp"

#include <nlohmann/json.hpp>

#include "io/drop/rows.hpp"

namespace tw::io {
namespace {

/// {values: {copper: {V: 12.3}}} is the deepest that means anything here.
constexpr std::size_t kDeepest = 3;

/// Builds members straight from parser events: the usual tree would lose how a number was written.
class MemberBuilder final : public nlohmann::json_sax<nlohmann::json> {
 public:
  bool null() override { return add(JsonMember::Kind::Null, {}); }
  bool boolean(bool value) override { return add(JsonMember::Kind::Other, value ? "true" : "false"); }
  bool number_integer(number_integer_t value) override {
    return add(JsonMember::Kind::Number, std::to_string(value));
  }
  bool number_unsigned(number_unsigned_t value) override {
    return add(JsonMember::Kind::Number, std::to_string(value));
  }
  bool number_float(number_float_t /*value*/, const string_t& text) override {
    return add(JsonMember::Kind::Number, text);
  }
  bool string(string_t& text) override { return add(JsonMember::Kind::Text, std::move(text)); }
  bool binary(binary_t& /*value*/) override { return false; }
  bool start_object(std::size_t /*size*/) override {
    if (m_skipping > 0 || m_open.size() >= kDeepest) return skip();
    if (m_open.empty()) {
      if (m_begun) return false;
      m_begun = true;
      m_open.push_back(&m_root);
      return true;
    }
    JsonMember& member = m_open.back()->emplace_back();
    member.key = std::move(m_key);
    member.kind = JsonMember::Kind::Object;
    m_open.push_back(&member.members);
    return true;
  }
  bool key(string_t& key) override {
    if (m_skipping == 0) m_key = std::move(key);
    return true;
  }
  bool end_object() override {
    if (m_skipping > 0) {
      --m_skipping;
    } else {
      m_open.pop_back();
    }
    return true;
  }
  bool start_array(std::size_t /*size*/) override { return !m_open.empty() && skip(); }
  bool end_array() override {
    --m_skipping;
    return true;
  }
  bool parse_error(std::size_t, const std::string&, const nlohmann::detail::exception&) override {
    return false;
  }

  std::vector<JsonMember> take() { return std::move(m_root); }
  [[nodiscard]] bool begun() const { return m_begun; }

 private:
  bool add(JsonMember::Kind kind, std::string text) {
    if (m_skipping > 0) return true;
    if (m_open.empty()) return false;
    m_open.back()->push_back({std::move(m_key), kind, std::move(text), {}});
    return true;
  }
  bool skip() {
    if (m_skipping == 0) m_open.back()->push_back({std::move(m_key), JsonMember::Kind::Other, {}, {}});
    ++m_skipping;
    return true;
  }

  std::vector<JsonMember> m_root;
  std::vector<std::vector<JsonMember>*> m_open;
  std::string m_key;
  std::size_t m_skipping = 0;
  bool m_begun = false;
};

}  // namespace

std::optional<std::vector<JsonMember>> readJsonObject(std::string_view text) {
  MemberBuilder builder;
  if (!nlohmann::json::sax_parse(text.begin(), text.end(), &builder) || !builder.begun()) {
    return std::nullopt;
  }
  return builder.take();
}

const JsonMember* findMember(const std::vector<JsonMember>& members, std::string_view key) {
  for (const JsonMember& member : members) {
    if (member.key.size() == key.size() && lowerCase(member.key) == key) return &member;
  }
  return nullptr;
}

}  // namespace tw::io
