#include <QApplication>
#include <QChart>
#include <QClipboard>
#include <QContextMenuEvent>
#include <QFile>
#include <QFileDialog>
#include <QFileInfo>
#include <QMenu>
#include <QMimeData>
#include <QPageSize>
#include <QPainter>
#include <QPdfWriter>
#include <QSaveFile>
#include <QSvgGenerator>

#include "ui/plot/plot.h"

namespace ebbline::plot {

QString Plot::csv() const {
  const auto quoted = [](QString text) { return '"' + text.replace('"', QStringLiteral("\"\"")) + '"'; };
  const auto number = [](double value) { return QString::number(value, 'g', 10); };
  QString out = QStringLiteral("line,") + quoted(x_.title) + ',' + quoted(y_.title) + '\n';
  for (const Line& line : lines_)
    for (const QPointF& point : line.points)
      out += quoted(line.words) + ',' + number(point.x()) + ',' + number(point.y()) + '\n';
  for (const Mark& mark : marks_)
    out += quoted(mark.words) + ',' + number(mark.at.x()) + ',' + number(mark.at.y()) + '\n';
  return out;
}

bool Plot::savePicture(const QString& path) {
  const QRect source = viewport()->rect();
  const QString suffix = QFileInfo(path).suffix().toLower();
  const std::optional<Hovered> hovered = std::exchange(hovered_, std::nullopt);
  const std::optional<QPointF> pointer = std::exchange(pointer_, std::nullopt);
  bool saved = false;
  if (suffix == QStringLiteral("svg")) {
    QSvgGenerator generator;
    generator.setFileName(path);
    generator.setSize(source.size());
    generator.setViewBox(source);
    generator.setTitle(title_);
    QPainter painter;
    saved = painter.begin(&generator);
    if (saved) render(&painter, QRectF(source), source);
  } else if (suffix == QStringLiteral("pdf")) {
    QPdfWriter writer(path);
    writer.setPageSize(QPageSize(QSizeF(source.size()) * 0.75, QPageSize::Point));
    writer.setPageMargins({});
    writer.setTitle(title_);
    QPainter painter;
    saved = painter.begin(&writer);
    if (saved) render(&painter, QRectF(0, 0, writer.width(), writer.height()), source);
  } else {
    QPixmap picture(source.size() * 2);
    picture.fill(look().colours.panel);
    QPainter painter(&picture);
    render(&painter, QRectF(QPointF(0, 0), QSizeF(picture.size())), source);
    painter.end();
    saved = picture.save(path, "PNG");
  }
  hovered_ = hovered;
  pointer_ = pointer;
  return saved;
}

void Plot::saveAs(const QString& suffix, const QString& filter) {
  QString path = QFileDialog::getSaveFileName(this, tr("Save plot"), QStringLiteral("plot.") + suffix, filter);
  if (path.isEmpty()) return;
  if (QFileInfo(path).suffix().toLower() != suffix) path += '.' + suffix;
  if (suffix != QStringLiteral("csv")) {
    if (!savePicture(path)) setToolTip(tr("%1 could not be written.").arg(path));
    return;
  }
  QSaveFile file(path);
  const QByteArray bytes = csv().toUtf8();
  if (!file.open(QIODevice::WriteOnly) || file.write(bytes) != bytes.size() || !file.commit())
    setToolTip(tr("%1 could not be written: %2.").arg(path, file.errorString()));
}

void Plot::contextMenuEvent(QContextMenuEvent* event) {
  QMenu menu(this);
  menu.addAction(tr("Copy picture"), this, [this] { QApplication::clipboard()->setPixmap(grab()); });
  menu.addAction(tr("Copy data"), this, [this] { QApplication::clipboard()->setText(csv()); });
  menu.addSeparator();
  menu.addAction(tr("Save as PNG…"), this, [this] { saveAs(QStringLiteral("png"), tr("PNG picture (*.png)")); });
  menu.addAction(tr("Save as SVG…"), this, [this] { saveAs(QStringLiteral("svg"), tr("SVG picture (*.svg)")); });
  menu.addAction(tr("Save as PDF…"), this, [this] { saveAs(QStringLiteral("pdf"), tr("PDF (*.pdf)")); });
  menu.addAction(tr("Save data as CSV…"), this, [this] { saveAs(QStringLiteral("csv"), tr("CSV table (*.csv)")); });
  menu.addSeparator();
  QAction* reset = menu.addAction(tr("Reset zoom"), this, &Plot::resetZoom);
  reset->setEnabled(shownX_.low != x_.low || shownX_.high != x_.high || shownY_.low != y_.low ||
                    shownY_.high != y_.high);
  menu.exec(event->globalPos());
}

}  // namespace ebbline::plot
