#include "ui/page/part_load_page.h"

#include <algorithm>

#include <QHBoxLayout>
#include <QSplitter>
#include <QVBoxLayout>

namespace ebbline::page {

PartLoadPage::PartLoadPage(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), model_(model), holder_(holder) {
  control_ = new ControlLine(model.document(), holder);
  plot_ = new plot::HeadFlowPlot(holder);
  plot_->setObjectName("headFlowPlot");
  auto* heading = new QLabel(tr("Terminals"));
  heading->setProperty("look", "title");
  count_ = new QLabel;
  count_->setProperty("look", "quiet");
  count_->setFixedSize(320, 20);
  underFirst_ = new QPushButton(tr("under-supplied first"));
  underFirst_->setProperty("look", "pill");
  underFirst_->setCheckable(true);
  underFirst_->setChecked(true);
  table_ = new TerminalTable(holder);
  table_->setObjectName("terminalTable");

  auto* line = new QHBoxLayout;
  line->setSpacing(12);
  line->addWidget(heading);
  line->addWidget(count_);
  line->addStretch(1);
  line->addWidget(underFirst_);
  auto* below = new QWidget;
  auto* belowColumn = new QVBoxLayout(below);
  belowColumn->setContentsMargins(0, 8, 0, 0);
  belowColumn->setSpacing(4);
  belowColumn->addLayout(line);
  belowColumn->addWidget(table_, 1);
  auto* split = new QSplitter(Qt::Vertical);
  split->setChildrenCollapsible(false);
  split->addWidget(plot_);
  split->addWidget(below);
  split->setStretchFactor(0, 11);
  split->setStretchFactor(1, 9);
  split->setSizes({430, 330});
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(24, 12, 24, 8);
  column->setSpacing(12);
  column->addWidget(control_);
  column->addWidget(split, 1);

  connect(underFirst_, &QPushButton::toggled, table_->terminals(), &TerminalTableModel::setUnderFirst);
  connect(table_, &TerminalTable::picked, this, &PartLoadPage::picked);
  connect(&model_, &PartLoadModel::groundChanged, this, &PartLoadPage::showGround);
  connect(&model_, &PartLoadModel::networkChanged, this, [this] {
    std::vector<bool> essential;
    for (const loop::Terminal& terminal : model_.loop().terminals) essential.push_back(terminal.essential);
    table_->terminals()->setEssential(std::move(essential));
  });
  connect(&model_, &PartLoadModel::pictureChanged, this, &PartLoadPage::showPicture);
}

void PartLoadPage::setUnits(quantity::UnitSystem units) {
  units_ = units;
  control_->setUnits(units);
  table_->terminals()->setUnits(units);
  plot_->setUnits(units);
  if (model_.ground()) showGround();
  if (model_.picture()) showPicture();
}

void PartLoadPage::showGround() {
  plot_->setGround(*model_.ground(), ControlLine::seriesKey(model_.loop().control.strategy),
                   tr("strategy: %1").arg(ControlLine::words(model_.loop(), units_)),
                   ControlLine::shortWords(model_.loop(), holder_.theme()));
}

void PartLoadPage::showPicture() {
  const network::PartLoadPicture& picture = *model_.picture();
  plot_->setPicture(picture);
  if (!picture.summary.usable()) {
    table_->terminals()->clear();
    count_->setText(tr("not solved"));
    return;
  }
  std::vector<bool> requests;
  requests.reserve(picture.request.terminals.size());
  for (const network::TerminalDemand& demand : picture.request.terminals)
    requests.push_back(demand.kind == loop::DemandKind::kRequest);
  table_->terminals()->setResults(picture.results.terminals, std::move(requests));
  const auto total = picture.results.terminals.size();
  const auto& asked = picture.request.terminals;
  const bool nothingAsked = std::none_of(asked.begin(), asked.end(), [](const network::TerminalDemand& demand) {
    return demand.kind == loop::DemandKind::kRequest;
  });
  if (nothingAsked) return count_->setText(tr("valves at given positions: nobody is judged"));
  count_->setText(picture.under_supplied > 0 ? tr("%1 of %2 under-supplied").arg(picture.under_supplied).arg(total)
                                             : tr("all %1 supplied").arg(total));
}

void PartLoadPage::select(loop::Id id) {
  table_->select(id);
}

}  // namespace ebbline::page
