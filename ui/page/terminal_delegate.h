#pragma once
// Paints a row of the terminal table: hairlines, the chosen row, the shortfall's triangle, the bar of the valve.

#include <QStyledItemDelegate>

#include "ui/theme/theme.h"

namespace ebbline::page {

class TerminalDelegate : public QStyledItemDelegate {
  Q_OBJECT
 public:
  explicit TerminalDelegate(const theme::ThemeHolder& holder, QObject* parent = nullptr);
  void paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const override;

 private:
  const theme::ThemeHolder& holder_;
};

}  // namespace ebbline::page
