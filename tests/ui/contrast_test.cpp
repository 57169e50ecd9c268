// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme/contrast.hpp"

#include <gtest/gtest.h>

#include <array>
#include <tuple>

#include "ui/theme/palette.hpp"

namespace tw::ui {
namespace {

// WCAG 2.2, glossary "contrast ratio": black on white is 21:1.
TEST(Contrast, BlackOnWhiteIsTwentyOne) {
  EXPECT_NEAR(contrastRatio(QColor(Qt::black), QColor(Qt::white)), 21.0, 1e-9);
  EXPECT_NEAR(contrastRatio(QColor(Qt::white), QColor(Qt::white)), 1.0, 1e-9);
}

// sRGB 119 is the darkest grey that fails 4.5:1 on white, 118 the lightest that passes (from the formula:
// L = 0.1845 and 0.1812 against the needed 1.05/4.5 - 0.05 = 0.1833).
TEST(Contrast, SitsBetweenTheTwoGreysAroundTheTextLimit) {
  EXPECT_LT(contrastRatio(QColor(119, 119, 119), Qt::white), kTextContrast);
  EXPECT_GT(contrastRatio(QColor(118, 118, 118), Qt::white), kTextContrast);
}

struct Meeting {
  const char* name;
  Role ink;
  Role ground;
  double least;
};

class ThemeContrast : public ::testing::TestWithParam<std::tuple<ThemeName, Meeting>> {};

TEST_P(ThemeContrast, PassesWcagAa) {
  const auto& [name, meeting] = GetParam();
  const Theme theme(name);
  EXPECT_GE(contrastRatio(theme.color(meeting.ink), theme.color(meeting.ground)), meeting.least)
      << meeting.name << ": " << theme.color(meeting.ink).name().toStdString() << " on "
      << theme.color(meeting.ground).name().toStdString();
}

constexpr std::array kMeetings = {
    Meeting{"ink_on_window", Role::Ink, Role::Window, kTextContrast},
    Meeting{"ink_on_surface", Role::Ink, Role::Surface, kTextContrast},
    Meeting{"ink_on_raised", Role::Ink, Role::Raised, kTextContrast},
    Meeting{"soft_on_window", Role::InkSoft, Role::Window, kTextContrast},
    Meeting{"soft_on_surface", Role::InkSoft, Role::Surface, kTextContrast},
    Meeting{"soft_on_raised", Role::InkSoft, Role::Raised, kTextContrast},
    Meeting{"press", Role::PressInk, Role::Press, kTextContrast},
    Meeting{"lost_banner", Role::LostInk, Role::LostFill, kTextContrast},
    Meeting{"fine_on_surface", Role::Fine, Role::Surface, kTextContrast},
    Meeting{"fine_on_window", Role::Fine, Role::Window, kTextContrast},
    Meeting{"drifting_on_surface", Role::Drifting, Role::Surface, kTextContrast},
    Meeting{"drifting_on_window", Role::Drifting, Role::Window, kTextContrast},
    Meeting{"tight_on_surface", Role::Tight, Role::Surface, kTextContrast},
    Meeting{"tight_on_window", Role::Tight, Role::Window, kTextContrast},
    Meeting{"brink_on_surface", Role::Brink, Role::Surface, kTextContrast},
    Meeting{"brink_on_window", Role::Brink, Role::Window, kTextContrast},
    Meeting{"sludging_on_surface", Role::Sludging, Role::Surface, kTextContrast},
    Meeting{"sludging_on_window", Role::Sludging, Role::Window, kTextContrast},
    Meeting{"sludging_reversed", Role::SludgingInk, Role::SludgingFill, kTextContrast},
    Meeting{"stale_on_surface", Role::Stale, Role::Surface, kTextContrast},
    Meeting{"stale_on_window", Role::Stale, Role::Window, kTextContrast},
    Meeting{"caution_line", Role::Caution, Role::Surface, kTextContrast},
    Meeting{"act_line", Role::Act, Role::Surface, kTextContrast},
    Meeting{"curve", Role::Curve, Role::Surface, kTextContrast},
    Meeting{"curve_on_band", Role::Curve, Role::Band, kGraphicContrast},
    Meeting{"edge_on_surface", Role::Edge, Role::Surface, kGraphicContrast},
    Meeting{"edge_on_window", Role::Edge, Role::Window, kGraphicContrast},
    Meeting{"focus_on_surface", Role::Focus, Role::Surface, kGraphicContrast},
    Meeting{"focus_on_window", Role::Focus, Role::Window, kGraphicContrast},
};

INSTANTIATE_TEST_SUITE_P(Pairs, ThemeContrast,
                         ::testing::Combine(::testing::Values(ThemeName::Light, ThemeName::Dark),
                                            ::testing::ValuesIn(kMeetings)),
                         [](const auto& tested) {
                           return themeId(std::get<0>(tested.param)).toStdString() + '_' +
                                  std::get<1>(tested.param).name;
                         });

TEST(Theme, KnowsItsNamesOnTheCommandLine) {
  EXPECT_EQ(themeFromId(QStringLiteral("dark")), ThemeName::Dark);
  EXPECT_EQ(themeFromId(QStringLiteral("light")), ThemeName::Light);
  EXPECT_EQ(themeFromId(QStringLiteral("Dark ")), std::nullopt);
}

}  // namespace
}  // namespace tw::ui
