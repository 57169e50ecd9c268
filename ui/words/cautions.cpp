// SPDX-License-Identifier: GPL-3.0-or-later
#include "ui/words/cautions.hpp"

#include <QCoreApplication>
#include <QStringList>

#include "io/recipe/cautions.hpp"

namespace tw::ui {
namespace {

// The texts come from the shared table; they stand here again only so that translators see them.
// tests/ui/cautions_test.cpp fails when the two part.
[[maybe_unused]] constexpr const char* kForTranslators[] = {
    QT_TRANSLATE_NOOP("Cautions", "Ammonia"),
    QT_TRANSLATE_NOOP("Cautions", "Gives off ammonia gas, the more so warm or above pH 9. Extraction on, goggles "
                      "and gloves; no hypochlorite anywhere near."),
    QT_TRANSLATE_NOOP("Cautions", "Cyanide"),
    QT_TRANSLATE_NOOP("Cautions", "Deadly if swallowed or breathed; any acid, acid salt or ammonium salt sets "
                      "hydrogen cyanide free. Never alone, never below pH 11, gas alarm working, site "
                      "medical plan at hand."),
    QT_TRANSLATE_NOOP("Cautions", "Caustic"),
    QT_TRANSLATE_NOOP("Cautions", "Burns skin and eyes and heats as it dissolves. Face shield; caustic into water "
                      "in small lots, never the reverse; let it cool between lots."),
    QT_TRANSLATE_NOOP("Cautions", "Acid"),
    QT_TRANSLATE_NOOP("Cautions", "Burns and splashes; foams with carbonate. Face shield; acid into water, never "
                      "the reverse; keep it away from cyanide, sulfite and hypochlorite."),
    QT_TRANSLATE_NOOP("Cautions", "Formaldehyde"),
    QT_TRANSLATE_NOOP("Cautions", "Irritates, sensitises and can cause cancer. Extraction on, gloves and goggles; "
                      "keep it away from strong acid."),
    QT_TRANSLATE_NOOP("Cautions", "Nickel salts"),
    QT_TRANSLATE_NOOP("Cautions", "Sensitises skin and airways for life and can cause cancer as dust or mist. No "
                      "dust, no bare skin; wash before eating."),
    QT_TRANSLATE_NOOP("Cautions", "Cadmium"),
    QT_TRANSLATE_NOOP("Cautions", "Harms kidneys and lungs and can cause cancer. No dust, no mist, no food nearby; "
                      "the site's medical checks apply."),
    QT_TRANSLATE_NOOP("Cautions", "Oxidiser"),
    QT_TRANSLATE_NOOP("Cautions", "Reacts hard with cyanide, ammonia, reducers and anything organic. Dilute first, "
                      "add slowly, store apart."),
    QT_TRANSLATE_NOOP("Cautions", "Hypophosphite"),
    QT_TRANSLATE_NOOP("Cautions", "A reducer: a large or hot dose can run away with hydrogen. Small steps into a "
                      "moving bath below its dosing temperature; no ignition source."),
    QT_TRANSLATE_NOOP("Cautions", "Hot liquor"),
    QT_TRANSLATE_NOOP("Cautions", "Scalds, mists and boils up when water or solids go in fast. Let it cool as the "
                      "procedure says, add slowly, keep freeboard."),
    QT_TRANSLATE_NOOP("Cautions", "Ventilation"),
    QT_TRANSLATE_NOOP("Cautions", "Prove that extraction runs before heating or dosing; stop when it fails."),
    QT_TRANSLATE_NOOP("Cautions", "Barium and fluoride"),
    QT_TRANSLATE_NOOP("Cautions", "Barium salts and fluorides poison when swallowed or breathed; fluoride with acid "
                      "gives hydrogen fluoride. Gloves, no dust; keep the spent flask apart."),
    QT_TRANSLATE_NOOP("Cautions", "Silver with ammonia"),
    QT_TRANSLATE_NOOP("Cautions", "Ammoniacal silver left to stand or dry can form an explosive. Never store it; "
                      "make it harmless the same day by the site's procedure."),
    QT_TRANSLATE_NOOP("Cautions", "Electrical"),
    QT_TRANSLATE_NOOP("Cautions", "Rectifier off or isolated before reaching in; no metal vessel over a live bar; "
                      "mind the wet floor."),
    QT_TRANSLATE_NOOP("Cautions", "Reminders only. Local codes and permits, the supplier's safety data sheet, and "
                      "trained and licensed practice on site decide."),
};

QString translated(const std::string& text) {
  return QCoreApplication::translate("Cautions", text.c_str());
}

}  // namespace

QString cautionText(const std::vector<std::string>& hazards) {
  QStringList lines;
  for (const std::string& key : hazards) {
    if (const io::Caution* caution = io::findCaution(key)) {
      lines << translated(caution->title) + QStringLiteral(": ") + translated(caution->text);
    }
  }
  if (lines.isEmpty()) return {};
  lines << translated(io::cautionFooter());
  return lines.join(QLatin1Char('\n'));
}

QString cautionTitles(const std::vector<std::string>& hazards) {
  QStringList titles;
  for (const std::string& key : hazards) {
    if (const io::Caution* caution = io::findCaution(key)) titles << translated(caution->title);
  }
  return titles.join(QStringLiteral(", "));
}

}  // namespace tw::ui
