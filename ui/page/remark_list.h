#pragma once
// Remarks in place of a page: what is wrong, where, what to do.

#include <vector>

#include <QLabel>
#include <QPushButton>
#include <QWidget>

#include "core/text/remark.h"

class QVBoxLayout;

namespace ebbline::page {

class RemarkList : public QWidget {
  Q_OBJECT
 public:
  explicit RemarkList(QWidget* parent = nullptr);
  /// `hasLoop`: there is an earlier loop to go back to.
  void show(const QString& title, const std::vector<text::Remark>& remarks, bool hasLoop);
  int numShown() const { return shown_; }
  QString text() const;

 signals:
  void back();
  void openAnother();
  void pointedAt(unsigned id);  ///< A part of the loop was clicked.

 private:
  void add(const text::Remark& remark);
  QLabel* title_ = nullptr;
  QVBoxLayout* list_ = nullptr;
  QPushButton* back_ = nullptr;
  int shown_ = 0;
};

}  // namespace ebbline::page
