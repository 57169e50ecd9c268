// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/theme/style.hpp"

#include <QApplication>
#include <QFont>
#include <QPalette>
#include <QStyleFactory>

namespace tw::ui {

QFont textFont(int pixelSize, bool bold) {
  QFont font(QStringLiteral("DejaVu Sans"));
  font.setStyleHint(QFont::SansSerif);
  font.setPixelSize(pixelSize);
  font.setBold(bold);
  return font;
}

QString styleSheet(const Theme& theme) {
  const auto name = [&](Role role) { return theme.color(role).name(); };
  // %1 surface %2 raised %3 edge %4 ink %5 press %6 press ink %7 focus %8 soft ink
  return QStringLiteral(
             "QPushButton { min-height: 42px; padding: 0 14px; border: 1px solid %3; border-radius: 5px;"
             "  background: %1; color: %4; }"
             "QPushButton:hover { background: %2; border-color: %4; }"
             "QPushButton:pressed { background: %3; }"
             "QPushButton[primary=\"true\"] { background: %5; color: %6; border-color: %5; font-weight: bold; }"
             "QPushButton:checked { background: %5; color: %6; border-color: %5; }"
             "QPushButton:disabled { background: %1; color: %8; border: 1px dashed %3; }"
             "QLineEdit { min-height: 42px; padding: 0 10px; border: 1px solid %3; border-radius: 5px;"
             "  background: %1; color: %4; }"
             "QPushButton:focus { border: 3px solid %7; padding: 0 12px; min-height: 38px; }"
             "QLineEdit:focus { border: 3px solid %7; padding: 0 8px; min-height: 38px; }"
             "QComboBox { min-height: 40px; }"
             "QToolTip { background: %1; color: %4; border: 1px solid %3; padding: 6px; }"
             "QScrollArea, QScrollArea > QWidget > QWidget { background: transparent; border: none; }"
             "QScrollBar:horizontal { height: 14px; background: transparent; }"
             "QScrollBar:vertical { width: 14px; background: transparent; }"
             "QScrollBar::handle { background: %3; border-radius: 3px; margin: 4px; min-width: 44px;"
             "  min-height: 44px; }"
             "QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; }"
             "QScrollBar::add-page, QScrollBar::sub-page { background: transparent; }")
      .arg(name(Role::Surface), name(Role::Raised), name(Role::Edge), name(Role::Ink), name(Role::Press),
           name(Role::PressInk), name(Role::Focus), name(Role::InkSoft));
}

void applyTheme(QApplication& application, const Theme& theme) {
  QApplication::setStyle(QStyleFactory::create(QStringLiteral("Fusion")));
  QPalette palette;
  palette.setColor(QPalette::Window, theme.color(Role::Window));
  palette.setColor(QPalette::WindowText, theme.color(Role::Ink));
  palette.setColor(QPalette::Base, theme.color(Role::Surface));
  palette.setColor(QPalette::AlternateBase, theme.color(Role::Raised));
  palette.setColor(QPalette::Text, theme.color(Role::Ink));
  palette.setColor(QPalette::Button, theme.color(Role::Surface));
  palette.setColor(QPalette::ButtonText, theme.color(Role::Ink));
  palette.setColor(QPalette::ToolTipBase, theme.color(Role::Surface));
  palette.setColor(QPalette::ToolTipText, theme.color(Role::Ink));
  palette.setColor(QPalette::PlaceholderText, theme.color(Role::InkSoft));
  palette.setColor(QPalette::Highlight, theme.color(Role::Press));
  palette.setColor(QPalette::HighlightedText, theme.color(Role::PressInk));
  palette.setColor(QPalette::Link, theme.color(Role::Focus));
  QApplication::setPalette(palette);
  QApplication::setFont(textFont(kTextPx));
  application.setStyleSheet(styleSheet(theme));
}

}  // namespace tw::ui
