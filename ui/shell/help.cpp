#include "ui/shell/help.h"

#include <QCoreApplication>
#include <QDialog>
#include <QDialogButtonBox>
#include <QLabel>
#include <QScrollArea>
#include <QVBoxLayout>

namespace ebbline::shell {

namespace {

QString words(const char* english) {
  return QCoreApplication::translate("Help", english);
}

void showText(QWidget* parent, const QString& title, const QString& html) {
  auto* dialog = new QDialog(parent);
  dialog->setAttribute(Qt::WA_DeleteOnClose);
  dialog->setWindowTitle(title);
  auto* label = new QLabel(html);
  label->setWordWrap(true);
  label->setTextFormat(Qt::RichText);
  label->setTextInteractionFlags(Qt::TextSelectableByMouse | Qt::TextSelectableByKeyboard);
  label->setAlignment(Qt::AlignTop);
  label->setMargin(8);
  auto* scroll = new QScrollArea;
  scroll->setWidgetResizable(true);
  scroll->setWidget(label);
  auto* buttons = new QDialogButtonBox(QDialogButtonBox::Close);
  QObject::connect(buttons, &QDialogButtonBox::rejected, dialog, &QDialog::close);
  auto* column = new QVBoxLayout(dialog);
  column->setContentsMargins(16, 16, 16, 16);
  column->addWidget(scroll, 1);
  column->addWidget(buttons);
  dialog->resize(560, 480);
  dialog->show();
}

}  // namespace

QString aboutText() {
  return words(
             "<h3>Ebbline %1</h3>"
             "<p>Decides how a branched chilled- or hot-water loop behaves at part load, and proves it.</p>"
             "<p><b>Caution.</b> Results are steady-state estimates for engineering judgement. Check them against "
             "local "
             "codes and the makers' data; have a licensed engineer sign what is built. Relief, expansion, water "
             "treatment, freeze protection and minimum plant flow are not replaced by this program.</p>"
             "<p>Test a lower set-point on site only at steady load near design, with the plant's minimum flow "
             "watched, "
             "essential terminals excluded and the restore point written down. A failed sensor needs a stated fail "
             "action: a fallback speed, never zero. Mind rapid flow change through chillers, boiler over-run and the "
             "heat dump of solid fuel, hygiene in warm water, thermal relief of sealed sections, dead-heading, and "
             "that ethylene glycol is poisonous.</p>"
             "<p><b>Licence.</b> GNU General Public License, version 3 or later. No warranty.</p>"
             "<p>Uses Qt 6 with Qt Charts (GPL-3.0), Eigen (MPL-2.0), nlohmann/json (MIT), tl::expected (CC0), {fmt} "
             "(MIT), oneTBB (Apache-2.0), CLI11 (BSD-3-Clause) and the typeface Lato (OFL-1.1).</p>"
             "<p>The buildings and makers' curves of the samples are invented.</p>")
      .arg(QCoreApplication::applicationVersion());
}

QString keyboardText() {
  const auto row = [](const char* key, const char* what) {
    return QStringLiteral("<tr><td><b>%1</b>&nbsp;&nbsp;&nbsp;</td><td>%2</td></tr>").arg(words(key), words(what));
  };
  return QStringLiteral("<table cellspacing=4>") + row("Ctrl+O, Ctrl+S, Ctrl+Shift+S", "open, save, save as") +
         row("Ctrl+P", "save the report as PDF") + row("Ctrl+Z, Ctrl+Shift+Z", "undo, redo") +
         row("Ctrl+R", "check this result with the second method") +
         row("Ctrl+U, Ctrl+T", "SI or IP units, light or dark") + row("Ctrl+0", "whole loop in view") +
         row("Ctrl+L", "go to the slider of the whole loop") +
         row("Tab, Shift+Tab", "next and previous part of the window") +
         row("arrow keys", "slider: 1 % a step; table: next terminal; plot: next mark; loop: next thing") +
         row("Page Up, Page Down", "slider: 10 % a step") +
         row("Enter on a terminal", "go to that terminal's own slider") +
         row("+ and −", "zoom in the loop or the plot that has the focus") +
         row("Enter, Esc in a field", "set the entry, take it back") + row("Alt+F, E, L, V, H", "menus") +
         QStringLiteral("</table>");
}

void showAbout(QWidget* parent) {
  showText(parent, words("About Ebbline"), aboutText());
}

void showKeyboard(QWidget* parent) {
  showText(parent, words("Keyboard"), keyboardText());
}

}  // namespace ebbline::shell
