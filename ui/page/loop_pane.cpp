#include "ui/page/loop_pane.h"

#include <QActionGroup>
#include <QHBoxLayout>
#include <QMenu>
#include <QVBoxLayout>

namespace ebbline::page {

LoopPane::LoopPane(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), model_(model) {
  setProperty("look", "sheet");
  setAttribute(Qt::WA_StyledBackground);
  chooser_ = new QToolButton;
  chooser_->setProperty("look", "heading");
  chooser_->setPopupMode(QToolButton::InstantPopup);
  chooser_->setToolButtonStyle(Qt::ToolButtonTextBesideIcon);
  chooser_->setFocusPolicy(Qt::StrongFocus);
  chooser_->setMenu(new QMenu(chooser_));
  chooser_->setAccessibleName(tr("Load state"));
  chooser_->setFont(holder.theme().font(theme::Text::kTitle));
  share_ = new QLabel;
  share_->setProperty("look", "quiet");
  share_->setAlignment(Qt::AlignRight | Qt::AlignVCenter);
  share_->setFixedSize(150, 20);  // of one size: a new number must not lay the window out again
  canvas_ = new canvas::LoopCanvas(holder);
  sliders_ = new LoadSliders(model, holder);
  auto* rule = new QFrame;
  rule->setProperty("look", "rule");

  auto* heading = new QHBoxLayout;
  heading->setContentsMargins(12, 10, 20, 4);
  heading->addWidget(chooser_);
  heading->addStretch(1);
  heading->addWidget(share_);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(0, 0, 0, 0);
  column->setSpacing(0);
  column->addLayout(heading);
  column->addWidget(canvas_, 1);
  column->addWidget(rule);
  column->addWidget(sliders_);

  connect(canvas_, &canvas::LoopCanvas::picked, this, [this](loop::Id id) {
    sliders_->setSelected(id);
    emit picked(id);
  });
  connect(canvas_, &canvas::LoopCanvas::activated, this, [this](loop::Id) {
    if (sliders_->terminal()->isVisible()) sliders_->terminal()->slider()->setFocus(Qt::ShortcutFocusReason);
  });
  connect(&model_.document(), &document::Document::replaced, this, &LoopPane::showLoop);
  connect(&model_.document(), &document::Document::changed, this, [this] {
    canvas_->setLoop(model_.loop(), true);
    fillStates();
  });
  connect(&model_, &PartLoadModel::sharesChanged, this, &LoopPane::fillStates);
  connect(&model_, &PartLoadModel::networkChanged, this, [this] {
    if (!model_.network()) canvas_->clearResults();
  });
  connect(&model_, &PartLoadModel::pictureChanged, this, &LoopPane::showPicture);
  showLoop();
}

QString LoopPane::stateName() const {
  const auto& states = model_.loop().load_states;
  const int chosen = model_.chosenState();
  const QString name =
      chosen < 0 ? tr("Design load") : QString::fromStdString(states[static_cast<std::size_t>(chosen)].name);
  return model_.isMoved() ? tr("%1, moved").arg(name) : name;
}

void LoopPane::fillStates() {
  if (chooser_->text() != stateName()) chooser_->setText(stateName());
  const auto& states = model_.loop().load_states;
  QMenu* menu = chooser_->menu();
  if (menu->actions().size() == static_cast<qsizetype>(states.size()) + 1) {
    menu->actions().at(model_.chosenState() + 1)->setChecked(true);
    return;
  }
  menu->clear();
  delete menu->findChild<QActionGroup*>();
  auto* group = new QActionGroup(menu);
  for (int i = -1; i < static_cast<int>(states.size()); ++i) {
    const QString name = i < 0 ? tr("Design load") : QString::fromStdString(states[static_cast<std::size_t>(i)].name);
    QAction* action = menu->addAction(name, this, [this, i] { model_.chooseState(i); });
    action->setCheckable(true);
    action->setChecked(i == model_.chosenState());
    group->addAction(action);
  }
}

void LoopPane::showLoop() {
  const bool drawn = !model_.document().isEmpty();
  chooser_->setVisible(drawn);
  sliders_->setVisible(drawn);
  chooser_->menu()->clear();
  canvas_->clearResults();
  canvas_->setLoop(model_.loop());
  sliders_->setSelected(0);
  share_->clear();
  fillStates();
}

void LoopPane::showPicture() {
  const network::PartLoadPicture& picture = *model_.picture();
  if (!picture.summary.usable()) {
    canvas_->clearResults();
    share_->setText(tr("not solved"));
    return;
  }
  canvas_->setResults(picture.results);
  share_->setText(tr("%1 % of design flow").arg(theme::numberText(100 * picture.delivered_share, 0)));
}

void LoopPane::select(loop::Id id) {
  canvas_->select(id);
  sliders_->setSelected(id);
}

}  // namespace ebbline::page
