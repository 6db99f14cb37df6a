#include "ui/page/remark_list.h"

#include <QHBoxLayout>
#include <QScrollArea>
#include <QVBoxLayout>

namespace ebbline::page {

namespace {
constexpr std::size_t kMostShown = 200;
}

RemarkList::RemarkList(QWidget* parent) : QWidget(parent) {
  title_ = new QLabel;
  title_->setProperty("look", "title");
  title_->setWordWrap(true);
  auto* inside = new QWidget;
  list_ = new QVBoxLayout(inside);
  list_->setContentsMargins(0, 0, 8, 0);
  list_->setSpacing(12);
  auto* scroll = new QScrollArea;
  scroll->setWidgetResizable(true);
  scroll->setWidget(inside);
  scroll->setAccessibleName(tr("What is wrong"));
  back_ = new QPushButton(tr("Back to the loop"));
  auto* another = new QPushButton(tr("Open another file…"));
  auto* buttons = new QHBoxLayout;
  buttons->addWidget(another);
  buttons->addWidget(back_);
  buttons->addStretch(1);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(24, 24, 24, 16);
  column->setSpacing(16);
  column->addWidget(title_);
  column->addWidget(scroll, 1);
  column->addLayout(buttons);
  connect(back_, &QPushButton::clicked, this, &RemarkList::back);
  connect(another, &QPushButton::clicked, this, &RemarkList::openAnother);
}

void RemarkList::show(const QString& title, const std::vector<text::Remark>& remarks, bool hasLoop) {
  title_->setText(title);
  while (QLayoutItem* item = list_->takeAt(0)) {
    delete item->widget();
    delete item;
  }
  shown_ = 0;
  for (const text::Remark& remark : remarks) {
    if (static_cast<std::size_t>(shown_) == kMostShown) break;
    add(remark);
  }
  if (remarks.size() > kMostShown) list_->addWidget(new QLabel(tr("and %1 more").arg(remarks.size() - kMostShown)));
  list_->addStretch(1);
  back_->setVisible(hasLoop);
}

void RemarkList::add(const text::Remark& remark) {
  const bool fault = text::severityOf(remark.code) == text::Severity::kFault;
  auto* row = new QLabel;
  row->setTextFormat(Qt::RichText);
  row->setWordWrap(true);
  row->setTextInteractionFlags(Qt::TextBrowserInteraction);
  const QString what = QString::fromStdString(text::sentence(remark)).toHtmlEscaped();
  const QString where = QString::fromStdString(text::placeInWords(remark.place)).toHtmlEscaped();
  const QString remedy = QString::fromStdString(text::remedy(remark)).toHtmlEscaped();
  QString html = (fault ? QStringLiteral("<b>%1</b>") : QStringLiteral("%1")).arg(what);
  if (!where.isEmpty())
    html += remark.place.id != 0 ? QStringLiteral("<br><a href=\"%1\">%2</a>").arg(remark.place.id).arg(where)
                                 : QStringLiteral("<br>%1").arg(where);
  if (!remedy.isEmpty()) html += QStringLiteral("<br>") + remedy;
  row->setText(html);
  connect(row, &QLabel::linkActivated, this, [this](const QString& id) { emit pointedAt(id.toUInt()); });
  list_->addWidget(row);
  ++shown_;
}

QString RemarkList::text() const {
  QStringList lines{title_->text()};
  for (int i = 0; i < list_->count(); ++i)
    if (auto* label = qobject_cast<QLabel*>(list_->itemAt(i)->widget())) lines << label->text();
  return lines.join('\n');
}

}  // namespace ebbline::page
