#pragma once
// The two pages of help that belong to the window itself.

#include <QString>

class QWidget;

namespace ebbline::shell {

/// Shows cautions and licences; not modal.
void showAbout(QWidget* parent);
/// Shows the keys; not modal.
void showKeyboard(QWidget* parent);

QString aboutText();
QString keyboardText();

}  // namespace ebbline::shell
