#include "ui/report/paper.h"

#include <QPageSize>
#include <QTextLayout>

namespace ebbline::report {
namespace {

constexpr int kDotsPerInch = 1200;
constexpr double kPxPerInch = 96;
constexpr double kSideMargin = 60;  // px, as the pictures of the look have it
constexpr double kTopMargin = 44;
constexpr double kBottomMargin = 40;
constexpr double kQuestionPx = 20 * kPxPerInch / 72;  // tokens.json, print_pt

void layOut(QTextLayout& layout, double width, double line_height, QPointF top, double& bottom) {
  layout.beginLayout();
  double y = top.y();
  for (QTextLine line = layout.createLine(); line.isValid(); line = layout.createLine()) {
    line.setLineWidth(width);
    line.setPosition({top.x(), y + (line_height - line.height()) / 2});
    y += line_height;
  }
  layout.endLayout();
  bottom = y;
}

}  // namespace

Paper::Paper(const QString& path, Size size, const QString& title) : look_(theme::printTheme()), writer_(path) {
  writer_.setPageSize(QPageSize(size == Size::kA4 ? QPageSize::A4 : QPageSize::Letter));
  writer_.setPageMargins(QMarginsF(0, 0, 0, 0));
  writer_.setResolution(kDotsPerInch);
  writer_.setTitle(title);
  writer_.setCreator(QStringLiteral("Ebbline " EBBLINE_VERSION));
  if (!painter_.begin(&writer_)) return;
  painter_.scale(kDotsPerInch / kPxPerInch, kDotsPerInch / kPxPerInch);
  painter_.setRenderHint(QPainter::Antialiasing);
}

Paper::~Paper() {
  if (painter_.isActive()) painter_.end();
}

bool Paper::finish() {
  return painter_.end();
}

QRectF Paper::body() const {
  const QSizeF page = writer_.pageLayout().pageSize().size(QPageSize::Point) * (kPxPerInch / 72);
  return QRectF(QPointF(0, 0), page).adjusted(kSideMargin, kTopMargin, -kSideMargin, -kBottomMargin);
}

void Paper::nextPage() {
  writer_.newPage();
}

QFont Paper::font(theme::Text text, int weight) const {
  QFont font = weight == 0 ? look_.font(text) : look_.font(text, weight);
  font.setHintingPreference(QFont::PreferNoHinting);
  // A letter spacing, even of the natural 100 %, keeps Qt from ligatures, which readers cannot search for or copy.
  font.setLetterSpacing(QFont::PercentageSpacing, 100);
  return font;
}

QFont Paper::question() const {
  QFont font = Paper::font(theme::Text::kBig, 300);
  font.setPixelSize(qRound(kQuestionPx));
  return font;
}

double Paper::line(QPointF baseline, const QString& text, const QFont& font, const QColor& ink,
                   Qt::Alignment alignment) {
  const double width = QFontMetricsF(font).horizontalAdvance(text);
  if (alignment & Qt::AlignRight) baseline.rx() -= width;
  if (alignment & Qt::AlignHCenter) baseline.rx() -= width / 2;
  painter_.setFont(font);
  painter_.setPen(ink);
  painter_.drawText(baseline, text);
  return width;
}

double Paper::paragraph(QPointF top, double width, const QString& text, const QFont& font, const QColor& ink,
                        double line_height) {
  QTextLayout layout(text, font);
  double bottom = top.y();
  layOut(layout, width, line_height, top, bottom);
  painter_.setPen(ink);
  layout.draw(&painter_, {0, 0});
  return bottom;
}

double Paper::paragraphHeight(double width, const QString& text, const QFont& font, double line_height) const {
  QTextLayout layout(text, font);
  double bottom = 0;
  layOut(layout, width, line_height, {0, 0}, bottom);
  return bottom;
}

void Paper::rule(double y, const QColor& ink, double width) {
  rule(body().left(), body().right(), y, ink, width);
}

void Paper::rule(double left, double right, double y, const QColor& ink, double width) {
  painter_.setPen(QPen(ink, width));
  painter_.drawLine(QPointF(left, y), QPointF(right, y));
}

}  // namespace ebbline::report
