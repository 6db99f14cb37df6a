#include "ui/page/load_sliders.h"

#include <algorithm>

#include <QGridLayout>
#include <QHBoxLayout>
#include <QScrollArea>
#include <QVBoxLayout>

namespace ebbline::page {

namespace {
constexpr int kWholeWidth = 120;  // px
constexpr int kZoneWidth = 80;    // px, the least at which name and number stand beside each other
constexpr int kZoneGap = 12;
constexpr int kMostZoneRows = 2;  // further ones scroll
constexpr int kZoneRow = 48;
}  // namespace

LoadSliders::LoadSliders(PartLoadModel& model, const theme::ThemeHolder& holder, QWidget* parent)
    : QWidget(parent), model_(model) {
  whole_ = new NamedSlider(tr("whole loop"), true);
  whole_->setFixedWidth(kWholeWidth);
  zoneGrid_ = new QGridLayout;
  zoneGrid_->setContentsMargins(0, 0, 0, 0);
  zoneGrid_->setHorizontalSpacing(kZoneGap);
  zoneGrid_->setVerticalSpacing(4);
  zoneArea_ = new QWidget;
  zoneArea_->setLayout(zoneGrid_);
  auto* scroll = new QScrollArea;
  scroll->setWidgetResizable(true);
  scroll->setWidget(zoneArea_);
  scroll->setHorizontalScrollBarPolicy(Qt::ScrollBarAlwaysOff);
  scroll->setFixedHeight(kZoneRow);
  scroll->viewport()->setAutoFillBackground(false);
  zoneArea_->setAutoFillBackground(false);
  scroll->setFocusPolicy(Qt::NoFocus);
  scroll->setObjectName("zoneScroll");

  terminal_ = new NamedSlider({});
  terminal_->setFixedWidth(220);
  terminal_->hide();
  hint_ = new QLabel(tr("Bar in a terminal: how far its valve is open. Select one for its own slider."));
  hint_->setProperty("look", "note");
  hint_->setWordWrap(true);
  mode_ = new theme::SegmentedSwitch({tr("by load"), tr("by position")}, holder);
  mode_->setAccessibleName(tr("Sliders set loads or valve positions"));
  mode_->setToolTip(
      tr("By load: terminals ask for a share of their design flow.\n"
         "By position: control valves stand where the slider says."));

  auto* top = new QHBoxLayout;
  top->setSpacing(24);
  top->addWidget(whole_, 0, Qt::AlignTop);
  top->addWidget(scroll, 1, Qt::AlignTop);
  auto* foot = new QHBoxLayout;
  foot->setSpacing(16);
  foot->addWidget(hint_, 1);
  foot->addWidget(terminal_);
  foot->addStretch(0);
  foot->addWidget(mode_);
  auto* column = new QVBoxLayout(this);
  column->setContentsMargins(20, 12, 20, 12);
  column->setSpacing(4);
  column->addLayout(top);
  column->addLayout(foot);

  connect(whole_, &NamedSlider::moved, this, [this](double percent) { model_.setWhole(percent); });
  connect(terminal_, &NamedSlider::moved, this, [this](double percent) {
    if (terminalIndex_ >= 0) model_.setTerminal(terminalIndex_, percent);
  });
  connect(mode_, &theme::SegmentedSwitch::chosenChanged, this, [this](int chosen) {
    model_.setMode(chosen == 0 ? loop::DemandKind::kRequest : loop::DemandKind::kPosition);
    show();
  });
  connect(&model_, &PartLoadModel::networkChanged, this, &LoadSliders::buildZones);
  connect(&model_, &PartLoadModel::sharesChanged, this, &LoadSliders::show);
  buildZones();
}

void LoadSliders::buildZones() {
  setEnabled(model_.network() != nullptr);
  qDeleteAll(zones_);
  zones_.clear();
  for (const int zone : model_.zonesShown()) {
    const std::string& name = model_.loop().zones[static_cast<std::size_t>(zone)].name;
    auto* slider = new NamedSlider(QString::fromStdString(name));
    connect(slider, &NamedSlider::moved, this, [this, zone](double percent) { model_.setZone(zone, percent); });
    zones_.push_back(slider);
  }
  columns_ = 0;
  placeZones();
  setSelected(selected_);
}

void LoadSliders::placeZones() {
  const int space = width() - 40 - kWholeWidth - 24;
  const int count = static_cast<int>(zones_.size());
  const int fitting = std::max(1, (space + kZoneGap) / (kZoneWidth + kZoneGap));
  const int columns = count == 0 ? 0 : std::min(count, fitting);
  if (columns == columns_ && columns > 0) return;
  columns_ = columns;
  for (int i = 0; i < count; ++i) zoneGrid_->addWidget(zones_[static_cast<std::size_t>(i)], i / columns, i % columns);
  const int rows = columns > 0 ? (count + columns - 1) / columns : 1;
  if (auto* scroll = findChild<QScrollArea*>("zoneScroll"))
    scroll->setFixedHeight(kZoneRow * std::min(rows, kMostZoneRows));
}

void LoadSliders::resizeEvent(QResizeEvent* event) {
  QWidget::resizeEvent(event);
  placeZones();
}

void LoadSliders::setSelected(loop::Id id) {
  selected_ = id;
  terminalIndex_ = -1;
  const std::vector<loop::Terminal>& terminals = model_.loop().terminals;
  for (std::size_t i = 0; i < terminals.size(); ++i)
    if (id != 0 && terminals[i].id == id) terminalIndex_ = static_cast<int>(i);
  if (terminalIndex_ >= 0)
    terminal_->setName(QString::fromStdString(terminals[static_cast<std::size_t>(terminalIndex_)].tag));
  terminal_->setVisible(terminalIndex_ >= 0);
  hint_->setVisible(terminalIndex_ < 0);
  show();
}

void LoadSliders::show() {
  mode_->setChosen(model_.mode() == loop::DemandKind::kRequest ? 0 : 1);
  whole_->showPercent(model_.wholePercent());
  for (std::size_t i = 0; i < zones_.size() && i < model_.zonesShown().size(); ++i)
    zones_[i]->showPercent(model_.zonePercent(model_.zonesShown()[i]));
  if (terminalIndex_ >= 0) terminal_->showPercent(model_.terminalPercent(terminalIndex_));
}

}  // namespace ebbline::page
