#pragma once
// One line that says how the pump's speed is set, with what can be set edited in place.

#include <functional>
#include <vector>

#include <QLabel>
#include <QLineEdit>
#include <QWidget>

#include "core/quantity/quantity.h"
#include "ui/document/document.h"
#include "ui/theme/theme.h"

class QHBoxLayout;

namespace ebbline::page {

/// A number of the document with its unit; a bad entry keeps its text and says why.
class SetPointField : public QLineEdit {
  Q_OBJECT
 public:
  SetPointField(quantity::Quantity quantity, QWidget* parent = nullptr);
  void showValue(double fileValue, quantity::UnitSystem units);

 signals:
  void entered(double fileValue, const QString& typed);
  void refused(const QString& why);  ///< Empty: right again.

 protected:
  void keyPressEvent(QKeyEvent* event) override;

 private:
  void enter();
  void setWrong(const QString& why);
  quantity::Quantity quantity_;
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  QString shown_;
};

class ControlLine : public QWidget {
  Q_OBJECT
 public:
  ControlLine(document::Document& document, const theme::ThemeHolder& holder, QWidget* parent = nullptr);
  void setUnits(quantity::UnitSystem units);
  const std::vector<SetPointField*>& fields() const { return fields_; }
  /// Key of the strategy's series in the tokens.
  static QString seriesKey(loop::Strategy strategy);
  /// "field sensor S1, 83 kPa": second line of the plot and words in the report.
  static QString words(const loop::Loop& loop, quantity::UnitSystem units);
  /// "field sensor": direct label of the control's path.
  static QString shortWords(const loop::Loop& loop, const theme::Theme& theme);

 private:
  void rebuild();
  void fill();
  void addStrategies();
  void addField(const QString& before, quantity::Quantity quantity, double value,
                std::function<loop::Change(double, const QString&)> change);
  void push(const loop::Change& change);

  document::Document& document_;
  const theme::ThemeHolder& holder_;
  quantity::UnitSystem units_ = quantity::UnitSystem::kSi;
  QHBoxLayout* row_ = nullptr;
  QLabel* reason_ = nullptr;
  std::vector<SetPointField*> fields_;
  loop::Control shownControl_;
};

}  // namespace ebbline::page
