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
  // %1 window %2 surface %3 raised %4 edge %5 ink %6 press %7 press ink %8 focus %9 soft ink
  return QStringLiteral(
             "QPushButton, QToolButton, QComboBox { min-height: 42px; padding: 0 14px; border: 1px solid %4;"
             "  border-radius: 5px; background: %2; color: %5; }"
             "QPushButton:hover, QToolButton:hover, QComboBox:hover { background: %3; border-color: %5; }"
             "QPushButton:pressed, QToolButton:pressed { background: %4; }"
             "QPushButton[primary=\"true\"] { background: %6; color: %7; border-color: %6;"
             "  font-weight: bold; }"
             "QPushButton:checked, QToolButton:checked { background: %6; color: %7; border-color: %6; }"
             "QPushButton:focus, QToolButton:focus, QComboBox:focus, QLineEdit:focus, QPlainTextEdit:focus"
             "  { border: 3px solid %8; padding: 0 12px; }"
             "QPushButton:disabled { color: %9; border-style: dashed; }"
             "QLineEdit { min-height: 42px; padding: 0 10px; border: 1px solid %4; border-radius: 5px;"
             "  background: %2; color: %5; }"
             "QComboBox QAbstractItemView { background: %2; color: %5; selection-background-color: %6;"
             "  selection-color: %7; }"
             "QToolTip { background: %2; color: %5; border: 1px solid %4; padding: 6px; }"
             "QScrollArea, QScrollArea > QWidget > QWidget { background: transparent; border: none; }"
             "QScrollBar:horizontal { height: 16px; background: transparent; }"
             "QScrollBar:vertical { width: 16px; background: transparent; }"
             "QScrollBar::handle { background: %4; border-radius: 5px; margin: 3px; min-width: 44px;"
             "  min-height: 44px; }"
             "QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; }"
             "QScrollBar::add-page, QScrollBar::sub-page { background: transparent; }")
      .arg(name(Role::Window), name(Role::Surface), name(Role::Raised), name(Role::Edge), name(Role::Ink),
           name(Role::Press), name(Role::PressInk), name(Role::Focus), name(Role::InkSoft));
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
