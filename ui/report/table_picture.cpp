#include "ui/report/table_picture.h"

namespace ebbline::report {
namespace {

constexpr double kHeadHeight = 22;
constexpr double kTriangle = 8;  // px wide

void triangle(QPainter& painter, QPointF middle, const QColor& ink) {
  const QPointF corners[] = {middle + QPointF(-kTriangle / 2, -kTriangle / 2),
                             middle + QPointF(kTriangle / 2, -kTriangle / 2), middle + QPointF(0, kTriangle / 2)};
  painter.setPen(Qt::NoPen);
  painter.setBrush(ink);
  painter.drawPolygon(corners, 3);
  painter.setBrush(Qt::NoBrush);
}

void paintCell(Paper& paper, const Column& column, const Cell& cell, double baseline, bool first) {
  const theme::Colours& ink = paper.look().colours;
  const double x = paper.body().left() + column.right;
  const int weight = first || cell.bad ? 600 : 400;
  const QFont font = paper.font(theme::Text::kLabel, weight);
  const QColor colour = cell.bad ? ink.under : ink.ink1;
  const double width = paper.line({x, baseline}, cell.text, font, colour, column.left ? Qt::AlignLeft : Qt::AlignRight);
  if (cell.bad && !column.left) triangle(paper.painter(), {x - width - 9, baseline - 4}, ink.under);
}

}  // namespace

double paintTable(Paper& paper, double top, const std::vector<Column>& columns,
                  const std::vector<std::vector<Cell>>& rows, double row_height) {
  const theme::Colours& ink = paper.look().colours;
  for (const Column& column : columns)
    paper.line({paper.body().left() + column.right, top + kHeadHeight - 8}, column.head, paper.font(theme::Text::kNote),
               ink.ink3, column.left ? Qt::AlignLeft : Qt::AlignRight);
  double y = top + kHeadHeight;
  paper.rule(y, ink.rule);
  for (const std::vector<Cell>& row : rows) {
    for (std::size_t c = 0; c < columns.size() && c < row.size(); ++c)
      paintCell(paper, columns[c], row[c], y + row_height / 2 + 4, c == 0);
    y += row_height;
    paper.rule(y, ink.hairline, 0.75);
  }
  return y;
}

}  // namespace ebbline::report
