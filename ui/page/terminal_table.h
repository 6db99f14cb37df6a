#pragma once
// What each terminal asks for and gets, under-supplied ones first if wished.

#include <vector>

#include <QAbstractTableModel>
#include <QTableView>

#include "core/network/results.h"
#include "core/quantity/quantity.h"
#include "ui/theme/theme.h"

namespace ebbline::page {

class TerminalTableModel : public QAbstractTableModel {
  Q_OBJECT
 public:
  enum Column { kTag, kRequested, kDelivered, kShortfall, kOpening, kPressure, kNumColumns };
  enum Role { kShare = Qt::UserRole, kUnder, kEssential };  ///< kShare: 0…1 of a bar; invalid = no bar.

  explicit TerminalTableModel(QObject* parent = nullptr);
  /// `requests`: per terminal, whether it asks for a flow (else its valve stands at a given place).
  void setResults(std::vector<network::TerminalResult> results, std::vector<bool> requests);
  void setEssential(std::vector<bool> essential) { essential_ = std::move(essential); }
  void clear();
  void setUnits(quantity::UnitSystem units);
  void setUnderFirst(bool first);
  /// Sorts by a column; the same column again turns the order round; -1 = order of the file.
  void sortBy(int column, bool descending);
  int sortColumn() const { return sortColumn_; }
  int rowOf(loop::Id id) const;
  loop::Id idAt(int row) const;

  int rowCount(const QModelIndex& parent = {}) const override;
  int columnCount(const QModelIndex& parent = {}) const override;
  QVariant data(const QModelIndex& index, int role) const override;
  QVariant headerData(int section, Qt::Orientation orientation, int role) const override;

 private:
  bool reorder();
  QString cell(const network::TerminalResult& terminal, bool request, int column) const;
  double keyOf(int terminal) const;

  std::vector<network::TerminalResult> results_;
  std::vector<bool> requests_;
  std::vector<bool> essential_;
  std::vector<int> order_;  // row → terminal
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  bool underFirst_ = true;
  int sortColumn_ = -1;
  bool descending_ = false;
};

class TerminalTable : public QTableView {
  Q_OBJECT
 public:
  explicit TerminalTable(const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  TerminalTableModel* terminals() { return model_; }
  void select(loop::Id id);  ///< From outside; emits nothing.
  loop::Id selected() const { return selected_; }

 signals:
  void picked(ebbline::loop::Id id);

 protected:
  void paintEvent(QPaintEvent* event) override;
  void resizeEvent(QResizeEvent* event) override;

 private:
  void followSelection(bool scroll);
  const theme::ThemeHolder& holder_;
  TerminalTableModel* model_ = nullptr;
  loop::Id selected_ = 0;
  bool quiet_ = false;
};

}  // namespace ebbline::page
