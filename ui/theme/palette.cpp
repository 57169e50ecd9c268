// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme/palette.hpp"

#include <array>

namespace tw::ui {
namespace {

struct Pair {
  Role role;
  QRgb light, dark;
};

// In the order of Role. Contrast of every pair that meets on screen is measured in
// tests/ui/contrast_test.cpp.
constexpr std::array<Pair, 25> kColors = {{
    {Role::Window, 0xffe9edf0, 0xff10161c},
    {Role::Surface, 0xffffffff, 0xff19222b},
    {Role::Raised, 0xfff3f6f8, 0xff232e39},
    {Role::Hairline, 0xffcbd4da, 0xff33414e},
    {Role::Edge, 0xff73828e, 0xff75889a},
    {Role::Ink, 0xff16212b, 0xffe9eff4},
    {Role::InkSoft, 0xff4a5964, 0xffaebbc6},
    {Role::Press, 0xff22364a, 0xffd5e0e9},
    {Role::PressInk, 0xffffffff, 0xff13202b},
    {Role::Focus, 0xff00696b, 0xff63d2cb},
    {Role::Gap, 0xffffffff, 0xffd9e2e9},
    {Role::Band, 0xffe4edf1, 0xff22303b},
    {Role::Caution, 0xff8a5a00, 0xffdcab47},
    {Role::Act, 0xff7b2d63, 0xffdf95c6},
    {Role::Curve, 0xff1f4e79, 0xff8cc0e8},
    {Role::Fine, 0xff4a5b68, 0xffa6b6c4},
    {Role::Drifting, 0xff2a628f, 0xff7fb5de},
    {Role::Tight, 0xff835500, 0xffdcab47},
    {Role::Brink, 0xff7b2d63, 0xffdf95c6},
    {Role::Sludging, 0xff4d113d, 0xfff0b7dd},
    {Role::SludgingFill, 0xff4d113d, 0xff7a2464},
    {Role::SludgingInk, 0xffffffff, 0xffffffff},
    {Role::Stale, 0xff5c656c, 0xff9ea8b0},
    {Role::LostFill, 0xff16212b, 0xffe9eff4},
    {Role::LostInk, 0xffffffff, 0xff10161c},
}};

}  // namespace

QColor Theme::color(Role role) const {
  const Pair& pair = kColors[static_cast<std::size_t>(role)];
  return QColor::fromRgb(m_name == ThemeName::Light ? pair.light : pair.dark);
}

QColor Theme::condition(model::Condition condition) const {
  switch (condition) {
    case model::Condition::Fine: return color(Role::Fine);
    case model::Condition::Drifting: return color(Role::Drifting);
    case model::Condition::Tight: return color(Role::Tight);
    case model::Condition::Brink: return color(Role::Brink);
    case model::Condition::Sludging: return color(Role::Sludging);
    case model::Condition::Stale: return color(Role::Stale);
  }
  return color(Role::Ink);
}

QString themeId(ThemeName name) {
  return name == ThemeName::Light ? QStringLiteral("light") : QStringLiteral("dark");
}

std::optional<ThemeName> themeFromId(const QString& id) {
  if (id == QLatin1String("light")) return ThemeName::Light;
  if (id == QLatin1String("dark")) return ThemeName::Dark;
  return std::nullopt;
}

}  // namespace tw::ui
