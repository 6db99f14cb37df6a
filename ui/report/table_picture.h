#pragma once
// Tables on paper: quiet head with units, hairlines between rows, numbers to the right.

#include <vector>

#include "ui/report/paper.h"

namespace ebbline::report {

struct Column {
  QString head;
  double right = 0;   ///< Right edge, or left edge of a column set to the left; px from the table's left.
  bool left = false;  ///< Words to the left instead of numbers to the right.
};

struct Cell {
  QString text;
  bool bad = false;  ///< In the colour of the under-supplied, with the inverted triangle before it.
};

/// Paints the table at `top` and returns the y below its last line.
double paintTable(Paper& paper, double top, const std::vector<Column>& columns,
                  const std::vector<std::vector<Cell>>& rows, double row_height);

}  // namespace ebbline::report
