#pragma once
// What the part-load page shows and moves, without a widget: the shares of the terminals as the sliders stand, and the
// picture solved from them away from the UI thread. Nothing is computed here; core/network/part_load.h does.

#include <memory>
#include <optional>
#include <vector>

#include <QDateTime>
#include <QObject>
#include <QTimer>

#include "core/network/network.h"
#include "core/network/part_load.h"
#include "ui/document/document.h"
#include "ui/work/worker.h"

namespace ebbline::page {

/// What is known of the second method for the picture shown.
struct Checked {
  enum class Kind { kNot, kRunning, kDone } kind = Kind::kNot;
  network::SecondOpinion opinion;  ///< kDone.
  QDateTime at;
};

class PartLoadModel : public QObject {
  Q_OBJECT
 public:
  explicit PartLoadModel(document::Document& document, QObject* parent = nullptr);

  const loop::Loop& loop() const { return document_.loop(); }
  document::Document& document() { return document_; }
  /// nullptr until compiled, or when the loop cannot be solved: see faults().
  const network::Network* network() const { return network_.get(); }
  std::shared_ptr<const network::Network> networkShared() const { return network_; }
  const std::vector<text::Remark>& faults() const { return faults_; }
  const network::PartLoadGround* ground() const { return ground_.get(); }
  /// The last answer; nullptr until there is one. Check summary.usable() before drawing it.
  const network::PartLoadPicture* picture() const { return picture_.get(); }
  const Checked& checked() const { return checked_; }

  /// Load state of the document the sliders were set from; -1 = design load.
  int chosenState() const { return chosenState_; }
  /// True once a slider was moved from the chosen state.
  bool isMoved() const { return moved_; }
  void chooseState(int index);

  loop::DemandKind mode() const { return mode_; }
  /// By position starts from where the valves stand; by load goes back to the loads there were.
  void setMode(loop::DemandKind mode);

  double wholePercent() const;
  double zonePercent(int zone) const;
  double terminalPercent(int terminal) const;
  void setWhole(double percent);
  void setZone(int zone, double percent);
  void setTerminal(int terminal, double percent);
  /// Zones that have terminals, as indices in Loop::zones.
  const std::vector<int>& zonesShown() const { return zonesShown_; }

  /// Asks the second method for the picture shown, away from the UI thread.
  void checkNow();
  /// True while a newer picture is being solved.
  bool busy() const { return worker_.busy(); }

 signals:
  void networkChanged();  ///< Another network, or faults instead of one.
  void groundChanged();
  void sharesChanged();
  void pictureChanged();
  void checkedChanged();
  void failed(const QString& message);

 private:
  struct Engine;
  struct Answer;
  void onDocument(bool replaced);
  void rebuild(bool keepShares);
  void ask();
  void take(const Answer& answer);
  void setGroup(int driver, const std::vector<int>& members, double percent);
  void scheduleCheck();

  document::Document& document_;
  std::shared_ptr<Engine> engine_;  // touched by the worker's jobs alone
  std::shared_ptr<const network::Network> network_;
  std::shared_ptr<const network::PartLoadGround> ground_;
  std::shared_ptr<const network::PartLoadPicture> picture_;
  std::vector<text::Remark> faults_;
  unsigned long generation_ = 0;
  unsigned long shownGeneration_ = 0;

  std::optional<std::vector<network::Share>> shares_;  // none: to be taken from the chosen state
  std::vector<network::Share> base_;                   // where the group being moved started
  std::vector<network::Share> loads_;                  // kept while in position mode
  int driver_ = -1;                                    // which slider moves base_
  std::vector<int> all_;
  std::vector<std::vector<int>> zoneMembers_;
  std::vector<int> zonesShown_;
  int chosenState_ = -1;
  bool moved_ = false;
  loop::DemandKind mode_ = loop::DemandKind::kRequest;

  Checked checked_;
  QTimer stillTimer_;
  work::Worker worker_;
  work::Worker checker_;
};

}  // namespace ebbline::page
