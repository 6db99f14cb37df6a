#include "ui/page/part_load_model.h"

#include <algorithm>

#include "core/network/demand.h"

namespace ebbline::page {

namespace {

constexpr int kStillMs = 700;                // after this long without a move the second method is asked unbidden,
constexpr int kMostTerminalsUnbidden = 300;  // if the loop is small enough for it to be quick
constexpr int kWholeDriver = -2;
constexpr int kFirstTerminalDriver = 1'000'000;

std::vector<text::Remark> faultsOf(const std::vector<text::Remark>& remarks) {
  std::vector<text::Remark> faults;
  for (const text::Remark& remark : remarks)
    if (text::severityOf(remark.code) == text::Severity::kFault) faults.push_back(remark);
  return faults;
}

}  // namespace

/// Lives from job to job on the worker's thread.
struct PartLoadModel::Engine {
  unsigned long generation = 0;
  std::shared_ptr<const network::Network> network;
  std::unique_ptr<network::PartLoadSolver> solver;
  std::shared_ptr<const network::PartLoadGround> ground;
  std::vector<text::Remark> faults;

  void prepare(const loop::Loop& loop, unsigned long wanted, const std::stop_token& stop);
};

struct PartLoadModel::Answer {
  unsigned long generation = 0;
  std::shared_ptr<const network::Network> network;
  std::shared_ptr<const network::PartLoadGround> ground;
  std::shared_ptr<const network::PartLoadPicture> picture;
  std::optional<std::vector<network::Share>> fresh_shares;
  std::vector<text::Remark> faults;
};

void PartLoadModel::Engine::prepare(const loop::Loop& loop, unsigned long wanted, const std::stop_token& stop) {
  if (generation == wanted) return;
  network::Compiled compiled = network::compile(loop);
  solver.reset();
  ground.reset();
  network.reset();
  faults = faultsOf(compiled.remarks);
  if (faults.empty()) {
    network = std::make_shared<const network::Network>(std::move(compiled.network));
    solver = std::make_unique<network::PartLoadSolver>(network);
    ground =
        std::make_shared<const network::PartLoadGround>(solver->ground(network::speedRuleOf(loop, *network), stop));
  }
  generation = wanted;
}

PartLoadModel::PartLoadModel(document::Document& document, QObject* parent)
    : QObject(parent), document_(document), engine_(std::make_shared<Engine>()) {
  connect(&document_, &document::Document::replaced, this, [this] { onDocument(true); });
  connect(&document_, &document::Document::changed, this, [this] { onDocument(false); });
  connect(&worker_, &work::Worker::failed, this, &PartLoadModel::failed);
  connect(&checker_, &work::Worker::failed, this, &PartLoadModel::failed);
  stillTimer_.setSingleShot(true);
  stillTimer_.setInterval(kStillMs);
  connect(&stillTimer_, &QTimer::timeout, this, &PartLoadModel::checkNow);
  if (!document_.isEmpty()) onDocument(true);
}

void PartLoadModel::onDocument(bool replaced) {
  if (replaced) {
    chosenState_ = loop().load_states.empty() ? -1 : 0;
    moved_ = false;
    mode_ = loop::DemandKind::kRequest;
    shares_.reset();
  } else if (chosenState_ >= static_cast<int>(loop().load_states.size())) {
    chosenState_ = -1;
  }
  const bool same = !replaced && network_ && loop().terminals.size() == network_->terminals.size();
  rebuild(same);
}

void PartLoadModel::rebuild(bool keepShares) {
  if (!keepShares) shares_.reset();
  ++generation_;
  all_.clear();
  zoneMembers_.assign(loop().zones.size(), {});
  for (std::size_t i = 0; i < loop().terminals.size(); ++i) {
    all_.push_back(static_cast<int>(i));
    for (std::size_t z = 0; z < loop().zones.size(); ++z)
      if (loop().zones[z].id == loop().terminals[i].zone) zoneMembers_[z].push_back(static_cast<int>(i));
  }
  zonesShown_.clear();
  for (std::size_t z = 0; z < zoneMembers_.size(); ++z)
    if (!zoneMembers_[z].empty()) zonesShown_.push_back(static_cast<int>(z));
  ask();
}

void PartLoadModel::ask() {
  stillTimer_.stop();
  checker_.cancel();
  const bool wasChecked = checked_.kind != Checked::Kind::kNot;
  checked_ = {};
  if (wasChecked) emit checkedChanged();
  worker_.start([this, engine = engine_, loop = document_.snapshot(), generation = generation_, shares = shares_,
                 chosen = chosenState_](const work::Job& job) -> work::Then {
    engine->prepare(*loop, generation, job.stop());
    auto answer = std::make_shared<Answer>();
    answer->generation = generation;
    answer->network = engine->network;
    answer->ground = engine->ground;
    answer->faults = engine->faults;
    if (engine->network) {
      const loop::LoadState* state = chosen < 0 ? nullptr : &loop->load_states[static_cast<std::size_t>(chosen)];
      if (!shares) answer->fresh_shares = network::sharesOf(*loop, *engine->network, state);
      const network::Request request =
          network::requestOf(*engine->network, shares ? *shares : *answer->fresh_shares, engine->ground->rule);
      answer->picture = std::make_shared<const network::PartLoadPicture>(
          engine->solver->picture(request, *engine->ground, job.stop()));
    }
    return [this, answer] { take(*answer); };  // runs only while the worker, and so this model, lives
  });
}

void PartLoadModel::take(const Answer& answer) {
  if (answer.generation != generation_) return;  // the loop has changed again meanwhile
  if (answer.picture && answer.picture->summary.ended == network::Ended::kCancelled) return;
  const bool newNetwork = shownGeneration_ != answer.generation;
  shownGeneration_ = answer.generation;
  network_ = answer.network;
  ground_ = answer.ground;
  faults_ = answer.faults;
  picture_ = answer.picture;
  if (answer.fresh_shares && !shares_) {
    shares_ = answer.fresh_shares;
    driver_ = -1;
    const bool positions = std::any_of(shares_->begin(), shares_->end(),
                                       [](const auto& s) { return s.kind == loop::DemandKind::kPosition; });
    mode_ = positions ? loop::DemandKind::kPosition : loop::DemandKind::kRequest;
    loads_.clear();
    if (!newNetwork) emit sharesChanged();
  }
  if (newNetwork) {
    emit networkChanged();
    if (ground_) emit groundChanged();
    emit sharesChanged();
  }
  if (picture_) emit pictureChanged();
  scheduleCheck();
}

void PartLoadModel::chooseState(int index) {
  if (index < -1 || index >= static_cast<int>(loop().load_states.size())) return;
  chosenState_ = index;
  moved_ = false;
  shares_.reset();
  ask();
}

void PartLoadModel::setMode(loop::DemandKind mode) {
  if (mode == mode_ || !shares_ || !picture_ || !picture_->summary.usable()) return;
  mode_ = mode;
  driver_ = -1;
  if (mode == loop::DemandKind::kPosition) {
    loads_ = *shares_;
    shares_ = network::asPositions(*shares_, picture_->results);
  } else if (loads_.size() == shares_->size()) {
    shares_ = loads_;
  } else {
    shares_ = network::asLoads(*network_, picture_->results);
  }
  emit sharesChanged();
  ask();
}

double PartLoadModel::wholePercent() const {
  return network_ && shares_ ? network::meanPercent(*network_, *shares_, all_) : 0;
}

double PartLoadModel::zonePercent(int zone) const {
  if (!network_ || !shares_) return 0;
  return network::meanPercent(*network_, *shares_, zoneMembers_[static_cast<std::size_t>(zone)]);
}

double PartLoadModel::terminalPercent(int terminal) const {
  const auto index = static_cast<std::size_t>(terminal);
  return shares_ && index < shares_->size() ? (*shares_)[index].percent : 0;
}

void PartLoadModel::setWhole(double percent) {
  setGroup(kWholeDriver, all_, percent);
}

void PartLoadModel::setZone(int zone, double percent) {
  setGroup(zone, zoneMembers_[static_cast<std::size_t>(zone)], percent);
}

void PartLoadModel::setTerminal(int terminal, double percent) {
  setGroup(kFirstTerminalDriver + terminal, {terminal}, percent);
}

void PartLoadModel::setGroup(int driver, const std::vector<int>& members, double percent) {
  if (!network_ || !shares_) return;
  if (driver != driver_) {
    base_ = *shares_;
    driver_ = driver;
  }
  shares_ = network::movedTo(*network_, base_, members, percent);
  moved_ = true;
  emit sharesChanged();
  ask();
}

void PartLoadModel::scheduleCheck() {
  if (!picture_ || !picture_->summary.usable() || worker_.busy()) return;
  if (network_->terminals.size() <= kMostTerminalsUnbidden) stillTimer_.start();
}

void PartLoadModel::checkNow() {
  if (!network_ || !picture_ || !picture_->summary.usable()) return;
  stillTimer_.stop();
  checked_ = {};
  checked_.kind = Checked::Kind::kRunning;
  emit checkedChanged();
  checker_.start(
      [this, network = network_, picture = picture_](const work::Job& job) -> work::Then {
        auto opinion =
            std::make_shared<network::SecondOpinion>(network::secondOpinion(*network, picture->request, job.stop()));
        return [this, opinion, picture] {
          if (picture != picture_) return;
          checked_ = {Checked::Kind::kDone, std::move(*opinion), QDateTime::currentDateTime()};
          emit checkedChanged();
        };
      },
      work::IfBusy::kCancelRunning);
}

}  // namespace ebbline::page
