#include "ui/page/terminal_table.h"

#include <algorithm>
#include <numeric>

#include <QHeaderView>
#include <QPainter>
#include <QResizeEvent>

#include "ui/page/terminal_delegate.h"

namespace ebbline::page {

using quantity::Quantity;

namespace {

QString unitText(Quantity quantity, quantity::UnitSystem units) {
  const std::string_view label = quantity::unitLabel(quantity, units);
  return QString::fromUtf8(label.data(), static_cast<qsizetype>(label.size()));
}

}  // namespace

TerminalTableModel::TerminalTableModel(QObject* parent) : QAbstractTableModel(parent) {}

void TerminalTableModel::setResults(std::vector<network::TerminalResult> results, std::vector<bool> requests) {
  const bool sameRows = results.size() == results_.size();
  if (!sameRows) beginResetModel();
  results_ = std::move(results);
  requests_ = std::move(requests);
  if (!sameRows) {
    order_.resize(results_.size());
    std::iota(order_.begin(), order_.end(), 0);
    reorder();
    return endResetModel();
  }
  if (reorder()) emit layoutChanged();
  if (!order_.empty()) emit dataChanged(index(0, 0), index(rowCount() - 1, kNumColumns - 1));
}

void TerminalTableModel::clear() {
  beginResetModel();
  results_.clear();
  requests_.clear();
  order_.clear();
  endResetModel();
}

void TerminalTableModel::setUnits(quantity::UnitSystem units) {
  units_ = units;
  emit headerDataChanged(Qt::Horizontal, 0, kNumColumns - 1);
  if (!order_.empty()) emit dataChanged(index(0, 0), index(rowCount() - 1, kNumColumns - 1));
}

void TerminalTableModel::setUnderFirst(bool first) {
  underFirst_ = first;
  reorder();
  emit layoutChanged();
}

void TerminalTableModel::sortBy(int column, bool descending) {
  sortColumn_ = column;
  descending_ = descending;
  reorder();
  emit layoutChanged();
}

double TerminalTableModel::keyOf(int terminal) const {
  const network::TerminalResult& result = results_[static_cast<std::size_t>(terminal)];
  switch (sortColumn_) {
    case kRequested:
      return result.requested_m3s;
    case kDelivered:
      return result.delivered_m3s;
    case kShortfall:
      return result.shortfall;
    case kOpening:
      return result.stroke;
    case kPressure:
      return result.available_pa;
    default:
      return terminal;
  }
}

// True if any row moved.
bool TerminalTableModel::reorder() {
  std::vector<int> order(results_.size());
  std::iota(order.begin(), order.end(), 0);
  std::stable_sort(order.begin(), order.end(), [this](int a, int b) {
    const network::TerminalResult& first = results_[static_cast<std::size_t>(a)];
    const network::TerminalResult& second = results_[static_cast<std::size_t>(b)];
    if (underFirst_ && first.under_supplied != second.under_supplied) return first.under_supplied;
    if (sortColumn_ < 0 && underFirst_ && first.under_supplied) return first.shortfall > second.shortfall;
    return descending_ ? keyOf(a) > keyOf(b) : keyOf(a) < keyOf(b);
  });
  if (order == order_) return false;
  order_ = std::move(order);
  return true;
}

int TerminalTableModel::rowOf(loop::Id id) const {
  for (std::size_t row = 0; row < order_.size(); ++row)
    if (results_[static_cast<std::size_t>(order_[row])].id == id) return static_cast<int>(row);
  return -1;
}

loop::Id TerminalTableModel::idAt(int row) const {
  if (row < 0 || row >= rowCount()) return 0;
  return results_[static_cast<std::size_t>(order_[static_cast<std::size_t>(row)])].id;
}

int TerminalTableModel::rowCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : static_cast<int>(order_.size());
}

int TerminalTableModel::columnCount(const QModelIndex& parent) const {
  return parent.isValid() ? 0 : kNumColumns;
}

QString TerminalTableModel::cell(const network::TerminalResult& terminal, bool request, int column) const {
  const auto shown = [this](double base, Quantity quantity) {
    return theme::numberText(quantity::toShown(base, quantity, units_), quantity::decimals(quantity, units_));
  };
  switch (column) {
    case kTag:
      return QString::fromStdString(terminal.tag);
    case kRequested:
      return request ? shown(terminal.requested_m3s, Quantity::kFlow) : QString(theme::kEnDash);
    case kDelivered:
      return shown(terminal.delivered_m3s, Quantity::kFlow);
    case kShortfall:
      if (!request) return QString(theme::kEnDash);
      return terminal.under_supplied ? theme::numberText(100 * terminal.shortfall, 1) : tr("none");
    case kOpening:
      return theme::numberText(100 * terminal.stroke, 0);
    case kPressure:
      return shown(terminal.available_pa, Quantity::kPressure);
    default:
      return {};
  }
}

QVariant TerminalTableModel::data(const QModelIndex& index, int role) const {
  if (!index.isValid() || index.row() >= rowCount()) return {};
  const int at = order_[static_cast<std::size_t>(index.row())];
  const network::TerminalResult& terminal = results_[static_cast<std::size_t>(at)];
  const bool request = requests_[static_cast<std::size_t>(at)];
  switch (role) {
    case Qt::DisplayRole:
      return cell(terminal, request, index.column());
    case Qt::TextAlignmentRole:
      return QVariant::fromValue(index.column() == kTag ? Qt::AlignLeft | Qt::AlignVCenter
                                                        : Qt::AlignRight | Qt::AlignVCenter);
    case kShare:
      return index.column() == kOpening ? QVariant(terminal.stroke) : QVariant();
    case kUnder:
      return terminal.under_supplied && index.column() == kShortfall;
    case kEssential:
      return index.column() == kTag && static_cast<std::size_t>(at) < essential_.size() &&
             essential_[static_cast<std::size_t>(at)];
    case Qt::AccessibleTextRole:
      return headerData(index.column(), Qt::Horizontal, Qt::DisplayRole).toString() + ' ' +
             cell(terminal, request, index.column());
    default:
      return {};
  }
}

QVariant TerminalTableModel::headerData(int section, Qt::Orientation orientation, int role) const {
  if (orientation != Qt::Horizontal) return {};
  if (role == Qt::TextAlignmentRole)
    return QVariant::fromValue((section == kTag ? Qt::AlignLeft : Qt::AlignRight) | Qt::AlignVCenter);
  if (role != Qt::DisplayRole) return {};
  switch (section) {
    case kTag:
      return tr("terminal");
    case kRequested:
      return tr("requested %1").arg(unitText(Quantity::kFlow, units_));
    case kDelivered:
      return tr("delivered %1").arg(unitText(Quantity::kFlow, units_));
    case kShortfall:
      return tr("shortfall %");
    case kOpening:
      return tr("valve open %");
    case kPressure:
      return tr("pressure difference %1").arg(unitText(Quantity::kPressure, units_));
    default:
      return {};
  }
}

TerminalTable::TerminalTable(const theme::ThemeHolder& holder, QWidget* parent) : QTableView(parent), holder_(holder) {
  model_ = new TerminalTableModel(this);
  setModel(model_);
  setItemDelegate(new TerminalDelegate(holder, this));
  setSelectionBehavior(QAbstractItemView::SelectRows);
  setSelectionMode(QAbstractItemView::SingleSelection);
  setEditTriggers(QAbstractItemView::NoEditTriggers);
  setShowGrid(false);
  setTabKeyNavigation(false);
  setVerticalScrollMode(QAbstractItemView::ScrollPerPixel);
  setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  setAccessibleName(tr("Terminals"));
  verticalHeader()->hide();
  verticalHeader()->setSectionResizeMode(QHeaderView::Fixed);
  verticalHeader()->setDefaultSectionSize(holder.theme().space.row);
  horizontalHeader()->setSectionResizeMode(QHeaderView::Fixed);
  horizontalHeader()->setHighlightSections(false);
  horizontalHeader()->setSectionsClickable(true);
  connect(horizontalHeader(), &QHeaderView::sectionClicked, this, [this](int section) {
    const bool again = model_->sortColumn() == section;
    model_->sortBy(section, again != horizontalHeader()->property("descending").toBool());
    horizontalHeader()->setProperty("descending", again != horizontalHeader()->property("descending").toBool());
    followSelection(true);
  });
  connect(model_, &QAbstractItemModel::layoutChanged, this, [this] { followSelection(false); });
  connect(model_, &QAbstractItemModel::modelReset, this, [this] { followSelection(false); });
  connect(selectionModel(), &QItemSelectionModel::currentRowChanged, this, [this](const QModelIndex& now) {
    if (quiet_ || !now.isValid()) return;
    selected_ = model_->idAt(now.row());
    emit picked(selected_);
  });
}

void TerminalTable::select(loop::Id id) {
  selected_ = id;
  followSelection(true);
}

// Rows move under the chosen terminal while a slider moves; the choice stays with the terminal.
void TerminalTable::followSelection(bool scroll) {
  quiet_ = true;
  const int row = model_->rowOf(selected_);
  if (row < 0) {
    selectionModel()->clear();
  } else {
    selectionModel()->setCurrentIndex(model_->index(row, 0),
                                      QItemSelectionModel::ClearAndSelect | QItemSelectionModel::Rows);
    if (scroll) scrollTo(model_->index(row, 0));
  }
  quiet_ = false;
}

void TerminalTable::paintEvent(QPaintEvent* event) {
  QTableView::paintEvent(event);
  if (!hasFocus()) return;
  QPainter painter(viewport());
  painter.setPen(QPen(holder_.theme().colours.focus, 2));
  const QRect row = currentIndex().isValid() ? visualRect(currentIndex()) : QRect();
  const QRect ring = row.isValid() ? QRect(0, row.top(), viewport()->width(), row.height()) : viewport()->rect();
  painter.setRenderHint(QPainter::Antialiasing);
  painter.drawRoundedRect(QRectF(ring).adjusted(1, 1, -1, -1), 3, 3);
}

void TerminalTable::resizeEvent(QResizeEvent* event) {
  QTableView::resizeEvent(event);
  const int width = viewport()->width();
  const double shares[] = {0.14, 0.15, 0.15, 0.14, 0.20, 0.22};
  for (int column = 0; column < TerminalTableModel::kNumColumns; ++column)
    setColumnWidth(column, static_cast<int>(width * shares[column]));
}

}  // namespace ebbline::page
