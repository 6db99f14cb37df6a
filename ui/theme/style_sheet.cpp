#include <QApplication>
#include <QHash>
#include <QRegularExpression>
#include <QToolTip>

#include "ui/theme/theme.h"

namespace ebbline::theme {
namespace {

// @name stands for a colour of the tokens, #name for a size; filled in by styleSheet().
const char* const kBase = R"(
QWidget { color: @ink1; selection-background-color: @selection; selection-color: @ink1; }
QMainWindow, QDialog, QWizard { background: @panel; }
QWidget[look="sheet"] { background: @sheet; }
QWidget[look="panel"] { background: @panel; }
QWidget[look="bar"] { background: @panel; border: 0; border-bottom: 1px solid @hairline; }
QWidget[look="strip"] { background: @panel; border: 0; border-top: 1px solid @hairline; }
QFrame[look="card"] { background: @card; border: 1px solid @rule; border-radius: #cardpx; }
QFrame[look="rule"] { background: @hairline; border: 0; max-height: 1px; min-height: 1px; }
QLabel { background: transparent; }
QLabel[look="title"] { font-size: #titlepx; font-weight: 600; }
QLabel[look="note"] { font-size: #notepx; color: @ink3; }
QLabel[look="quiet"] { font-size: #labelpx; color: @ink2; }
QLabel[look="strong"] { font-weight: 600; }
QLabel[look="figure"] { font-size: #figurepx; }
QLabel[look="big"] { font-size: #bigpx; font-weight: 300; }
QLabel[look="under"] { color: @under; font-weight: 600; }
QLabel[look="ok"] { color: @ok; }
QLabel[look="caution"] { color: @caution; }
QToolTip { background: @card; color: @ink1; border: 1px solid @rule; padding: 4px 8px; font-size: #labelpx; }
QSplitter::handle { background: @hairline; }
QSplitter::handle:horizontal { width: 1px; }
QSplitter::handle:vertical { height: 1px; }
QScrollArea { border: 0; background: transparent; }
)";

const char* const kMenus = R"(
QMenuBar { background: @panel; border: 0; padding: 0 8px; }
QMenuBar::item { background: transparent; padding: 4px 8px; border-radius: #buttonpx; }
QMenuBar::item:selected, QMenuBar::item:pressed { background: @accentWash; color: @accent; }
QMenu { background: @card; border: 1px solid @rule; padding: 4px 0; }
QMenu::item { padding: 5px 24px 5px 24px; }
QMenu::item:selected { background: @selection; }
QMenu::item:disabled { color: @ink4; }
QMenu::separator { height: 1px; background: @hairline; margin: 4px 0; }
QTabWidget::pane { border: 0; }
QTabBar { background: transparent; border: 0; qproperty-drawBase: 0; }
QTabBar::tab { background: transparent; color: @ink2; border: 0; border-bottom: 3px solid transparent; padding: 6px 2px 5px 2px; margin-right: 24px; }
QTabBar::tab:hover { color: @ink1; }
QTabBar::tab:selected { color: @ink1; border-bottom: 3px solid @accent; }
)";

const char* const kButtons = R"(
QPushButton { background: @field; border: 1px solid @rule; border-radius: #buttonpx; padding: 0 12px; min-height: 26px; }
QPushButton:hover { border-color: @accent; color: @accent; }
QPushButton:pressed { background: @accentWash; }
QPushButton:checked { background: @accentWash; color: @accent; border-color: @accent; }
QPushButton:focus { border: 2px solid @focus; padding: 0 11px; min-height: 24px; }
QPushButton:disabled { color: @ink4; border-color: @hairline; }
QPushButton[look="primary"] { background: @accent; color: @onAccent; border-color: @accent; font-weight: 600; }
QPushButton[look="primary"]:hover { background: @accentHover; color: @onAccent; }
QPushButton[look="primary"]:focus { border: 2px solid @ink1; }
QPushButton[look="primary"]:disabled { background: @hairline; color: @ink3; border-color: @hairline; }
QPushButton[look="quiet"], QToolButton[look="quiet"] { background: transparent; border: 1px solid transparent; color: @accent; padding: 0 4px; }
QPushButton[look="quiet"]:hover, QToolButton[look="quiet"]:hover { color: @accentHover; text-decoration: underline; }
QPushButton[look="quiet"]:focus, QToolButton[look="quiet"]:focus { border: 2px solid @focus; padding: 0 3px; }
QPushButton[look="pill"] { background: transparent; color: @ink2; border: 1px solid @hairline; border-radius: 12px; min-height: 22px; font-size: #labelpx; }
QPushButton[look="pill"]:checked { background: @accentWash; color: @accent; border-color: @accent; font-weight: 600; }
QPushButton[look="pill"]:focus { border: 2px solid @focus; min-height: 20px; padding: 0 11px; }
QToolButton { background: transparent; border: 1px solid transparent; border-radius: #buttonpx; padding: 3px 6px; }
QToolButton:hover { background: @hairline; }
QToolButton:checked { background: @accentWash; color: @accent; }
QToolButton:focus { border: 2px solid @focus; padding: 2px 5px; }
QToolButton:disabled { color: @ink4; }
QToolButton[look="tool"] { color: @ink2; font-size: #notepx; padding: 6px 2px; min-width: 56px; min-height: 44px; }
QToolButton[look="tool"]:checked { color: @accent; font-weight: 600; background: @accentWash; }
QCheckBox, QRadioButton { spacing: 8px; background: transparent; }
QCheckBox::indicator, QRadioButton::indicator { width: 14px; height: 14px; border: 1px solid @rule; background: @field; }
QCheckBox::indicator { border-radius: #fieldpx; }
QRadioButton::indicator { border-radius: 8px; }
QCheckBox::indicator:checked { background: @accent; border: 4px solid @field; width: 8px; height: 8px; outline: 1px solid @accent; }
QRadioButton::indicator:checked { background: @accent; border: 4px solid @field; width: 8px; height: 8px; }
QCheckBox:focus, QRadioButton:focus { color: @accent; text-decoration: underline; }
)";

const char* const kFields = R"(
QLineEdit, QAbstractSpinBox, QComboBox, QPlainTextEdit, QTextEdit { background: @field; border: 1px solid @rule; border-radius: #fieldpx; padding: 0 8px; min-height: 26px; }
QLineEdit:focus, QAbstractSpinBox:focus, QComboBox:focus, QPlainTextEdit:focus, QTextEdit:focus { border: 2px solid @focus; padding: 0 7px; min-height: 24px; }
QLineEdit[wrong="true"], QAbstractSpinBox[wrong="true"] { border: 2px solid @under; padding: 0 7px; min-height: 24px; }
QLineEdit:disabled, QAbstractSpinBox:disabled, QComboBox:disabled { color: @ink4; border-color: @hairline; }
QComboBox::drop-down { border: 0; width: 20px; }
QComboBox QAbstractItemView { background: @card; border: 1px solid @rule; selection-background-color: @selection; selection-color: @ink1; outline: 0; }
QAbstractSpinBox::up-button, QAbstractSpinBox::down-button { width: 0; border: 0; }
QSlider { min-height: 24px; background: transparent; }
QSlider::groove:horizontal { height: 2px; background: @rule; border-radius: 1px; }
QSlider::sub-page:horizontal { height: 2px; background: @accent; border-radius: 1px; }
QSlider::add-page:horizontal { height: 2px; background: @rule; border-radius: 1px; }
QSlider::handle:horizontal { width: 12px; height: 12px; margin: -7px 0; border: 2px solid @accent; border-radius: 8px; background: @field; }
QSlider::handle:horizontal:hover { background: @accentWash; }
QSlider::handle:horizontal:focus { background: @accent; }
QSlider::handle:horizontal:disabled { border-color: @ink4; }
QProgressBar { background: @hairline; border: 0; max-height: 2px; min-height: 2px; text-align: right; }
QProgressBar::chunk { background: @accent; }
)";

const char* const kTables = R"(
QAbstractItemView { background: transparent; alternate-background-color: transparent; border: 0; outline: 0; gridline-color: @hairline; selection-background-color: @selection; selection-color: @ink1; }
QTableView::item, QTreeView::item, QListView::item { border: 0; border-bottom: 1px solid @hairline; padding: 0 8px; }
QTableView::item:selected, QTreeView::item:selected, QListView::item:selected { background: @selection; color: @ink1; }
QHeaderView { background: transparent; border: 0; }
QHeaderView::section { background: transparent; color: @ink3; border: 0; border-bottom: 1px solid @rule; padding: 4px 8px; font-size: #notepx; font-weight: 400; }
QTableCornerButton::section { background: transparent; border: 0; }
QScrollBar { background: transparent; border: 0; }
QScrollBar:vertical { width: 10px; margin: 0; }
QScrollBar:horizontal { height: 10px; margin: 0; }
QScrollBar::handle { background: @hairline; border-radius: 3px; margin: 2px; }
QScrollBar::handle:hover { background: @ink4; }
QScrollBar::handle:vertical { min-height: 24px; }
QScrollBar::handle:horizontal { min-width: 24px; }
QScrollBar::add-line, QScrollBar::sub-line { width: 0; height: 0; border: 0; }
QScrollBar::add-page, QScrollBar::sub-page { background: transparent; }
QStatusBar { background: @panel; border-top: 1px solid @hairline; color: @ink2; font-size: #labelpx; }
QStatusBar::item { border: 0; }
)";

QHash<QString, QString> wordsOf(const Theme& theme) {
  const Colours& c = theme.colours;
  const std::pair<const char*, QColor> colours[] = {{"sheet", c.sheet},
                                                    {"panel", c.panel},
                                                    {"card", c.card},
                                                    {"field", c.field},
                                                    {"ink1", c.ink1},
                                                    {"ink2", c.ink2},
                                                    {"ink3", c.ink3},
                                                    {"ink4", c.ink4},
                                                    {"hairline", c.hairline},
                                                    {"rule", c.rule},
                                                    {"accent", c.accent},
                                                    {"accentHover", c.accentHover},
                                                    {"accentWash", c.accentWash},
                                                    {"onAccent", c.onAccent},
                                                    {"selection", c.selection},
                                                    {"focus", c.focus},
                                                    {"under", c.under},
                                                    {"ok", c.ok},
                                                    {"caution", c.caution}};
  QHash<QString, QString> words;
  for (const auto& [name, colour] : colours) words["@" + QString(name)] = colour.name();
  const std::pair<const char*, int> sizes[] = {{"card", theme.radius.card},
                                               {"button", theme.radius.button},
                                               {"field", theme.radius.field},
                                               {"note", theme.font(Text::kNote).pixelSize()},
                                               {"label", theme.font(Text::kLabel).pixelSize()},
                                               {"title", theme.font(Text::kTitle).pixelSize()},
                                               {"figure", theme.font(Text::kFigure).pixelSize()},
                                               {"big", theme.font(Text::kBig).pixelSize()}};
  for (const auto& [name, size] : sizes) words["#" + QString(name) + "px"] = QString("%1px").arg(size);
  return words;
}

}  // namespace

QString styleSheet(const Theme& theme) {
  const QHash<QString, QString> words = wordsOf(theme);
  const QString source = QString(kBase) + kMenus + kButtons + kFields + kTables;
  static const QRegularExpression kWord("[@#][A-Za-z0-9]+");
  QString out;
  qsizetype done = 0;
  for (auto found = kWord.globalMatch(source); found.hasNext();) {
    const QRegularExpressionMatch match = found.next();
    const auto word = words.find(match.captured());
    Q_ASSERT(word != words.end());
    out += source.mid(done, match.capturedStart() - done) + word.value();
    done = match.capturedEnd();
  }
  return out + source.mid(done);
}

QPalette palette(const Theme& theme) {
  const Colours& c = theme.colours;
  QPalette out;
  const std::pair<QPalette::ColorRole, QColor> roles[] = {{QPalette::Window, c.panel},
                                                          {QPalette::WindowText, c.ink1},
                                                          {QPalette::Base, c.field},
                                                          {QPalette::AlternateBase, c.panel},
                                                          {QPalette::ToolTipBase, c.card},
                                                          {QPalette::ToolTipText, c.ink1},
                                                          {QPalette::PlaceholderText, c.ink3},
                                                          {QPalette::Text, c.ink1},
                                                          {QPalette::Button, c.panel},
                                                          {QPalette::ButtonText, c.ink1},
                                                          {QPalette::BrightText, c.under},
                                                          {QPalette::Light, c.card},
                                                          {QPalette::Midlight, c.hairline},
                                                          {QPalette::Mid, c.rule},
                                                          {QPalette::Dark, c.ink3},
                                                          {QPalette::Shadow, c.ink1},
                                                          {QPalette::Highlight, c.selection},
                                                          {QPalette::HighlightedText, c.ink1},
                                                          {QPalette::Link, c.accent},
                                                          {QPalette::LinkVisited, c.accent}};
  for (const auto& [role, colour] : roles) out.setColor(role, colour);
  for (const QPalette::ColorRole role : {QPalette::WindowText, QPalette::Text, QPalette::ButtonText})
    out.setColor(QPalette::Disabled, role, c.ink4);
  return out;
}

void applyTheme(QApplication& application, const Theme& theme) {
  application.setFont(theme.font(Text::kBody));
  application.setPalette(palette(theme));
  QToolTip::setPalette(palette(theme));
  application.setStyleSheet(styleSheet(theme));
}

}  // namespace ebbline::theme
