#include "ui/page/terminal_delegate.h"

#include <algorithm>

#include <QPainter>
#include <QPainterPath>

#include "ui/page/terminal_table.h"

namespace ebbline::page {

namespace {

constexpr double kBarWidth = 56;
constexpr double kPad = 8;

void paintGround(QPainter& painter, const QRectF& box, const theme::Theme& theme, bool chosen) {
  if (chosen) painter.fillRect(box, theme.colours.selection);
  painter.fillRect(QRectF(box.left(), box.bottom() - 1, box.width(), 1), theme.colours.hairline);
}

void paintBar(QPainter& painter, const QRectF& box, double share, const theme::Colours& colours) {
  const QRectF whole(box.right() - kPad - kBarWidth, box.center().y() - 3.5, kBarWidth, 7);
  painter.fillRect(whole, colours.hairline);
  painter.fillRect(QRectF(whole.topLeft(), QSizeF(kBarWidth * std::clamp(share, 0.0, 1.0), 7)), colours.ink3);
}

void paintTriangle(QPainter& painter, QPointF centre, const QColor& ink) {
  QPainterPath path(centre + QPointF(-5, -4));
  path.lineTo(centre + QPointF(5, -4));
  path.lineTo(centre + QPointF(0, 5));
  path.closeSubpath();
  painter.fillPath(path, ink);
}

}  // namespace

TerminalDelegate::TerminalDelegate(const theme::ThemeHolder& holder, QObject* parent)
    : QStyledItemDelegate(parent), holder_(holder) {}

void TerminalDelegate::paint(QPainter* painter, const QStyleOptionViewItem& option, const QModelIndex& index) const {
  const theme::Theme& theme = holder_.theme();
  const bool chosen = option.state.testFlag(QStyle::State_Selected);
  const bool under = index.data(TerminalTableModel::kUnder).toBool();
  const QRectF box(option.rect);
  painter->save();
  painter->setRenderHint(QPainter::Antialiasing);
  paintGround(*painter, box, theme, chosen);
  QRectF words = box.adjusted(kPad, 0, -kPad, 0);
  if (const QVariant share = index.data(TerminalTableModel::kShare); share.isValid()) {
    paintBar(*painter, box, share.toDouble(), theme.colours);
    words.setRight(words.right() - kBarWidth - 8);
  }
  const bool strong = chosen || under || index.column() == TerminalTableModel::kTag;
  painter->setFont(theme.font(theme::Text::kBody, strong ? 600 : 400));
  const QString text = index.data().toString();
  const bool quiet = index.column() == TerminalTableModel::kShortfall && !under;
  painter->setPen(under ? theme.colours.under : quiet ? theme.colours.ink3 : theme.colours.ink1);
  painter->drawText(words, index.data(Qt::TextAlignmentRole).toInt(), text);
  if (under) {
    const double width = painter->fontMetrics().horizontalAdvance(text);
    paintTriangle(*painter, {words.right() - width - 12, box.center().y()}, theme.colours.under);
  }
  if (index.data(TerminalTableModel::kEssential).toBool()) {
    painter->setFont(theme.font(theme::Text::kNote));
    painter->setPen(theme.colours.ink3);
    painter->drawText(words, Qt::AlignRight | Qt::AlignVCenter, TerminalTableModel::tr("essential"));
  }
  painter->restore();
}

}  // namespace ebbline::page
