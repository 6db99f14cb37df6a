#pragma once
// The rounds of Newton's method behind Solver. Node-head form (Todini & Pilati 1988, from memory), incremental.
// Internal to core/network.

#include <memory>
#include <stop_token>
#include <vector>

#include "core/network/edge_law.h"
#include "core/network/fundamental_loops.h"
#include "core/network/linear_system.h"
#include "core/network/solver.h"
#include "core/network/speed_border.h"

namespace ebbline::network {

/// What an edge is doing in the present round.
enum class Standing : char {
  kOpen,  ///< Follows its law.
  kHeld,  ///< Its terminal holds the requested flow; the valve takes up the rest.
  kShut,  ///< No flow either way.
};

class Newton {
 public:
  Newton(const Network& network, Tolerance tolerance);
  Summary solve(const Request& request, State& state, const std::stop_token& stop);

 private:
  /// What the rounds touch of an edge.
  struct Row {
    int from = 0;  // steps of LinearSystem
    int to = 0;
    double flow = 0;
    double surplus = 0;      // p_from − p_to − loss
    double conductance = 0;  // 1/slope; 0 unless open
    int terminal = -1;
    Standing standing = Standing::kOpen;
  };

  // newton.cpp
  void rounds(const std::stop_token& stop);
  bool solveRound();
  void chooseSpeed();
  void takeStep();
  bool moveEdge(int edge, double slack);
  void openEdge(int edge, double flow);
  void followLaw(int edge, const LossSlope& law);
  void noteEdge(int edge);
  void holdEdge(int edge);
  void assemble();
  void assembleEdge(int edge);
  bool settled();
  bool tapsSettled();
  bool flowsSettled();
  void watchProgress();
  double pressureScale() const;

  // newton_start.cpp
  std::optional<text::Remark> unusable(const Request& request) const;
  void start(const Request& request, const State& state);
  void coldStart();
  void warmStart(const State& state);
  bool followValve(int edge);
  bool isOwn(const State& state) const;
  double freeFlow(int edge, double pressure_pa);
  void setFlow(int edge, double flow, bool held);
  void leave(const Request& request, State& state);

  // newton_parts.cpp: parts of the network that nothing connects with the datum
  bool alwaysConnected() const;
  bool findParts();

  // newton_residuals.cpp
  void flowResidual();
  void pressureResidual();
  bool confirm();
  void refuse(text::Remark remark);
  void giveUp();
  void gather();
  void gatherForTaps();

  const Network& network_;
  Tolerance tolerance_;
  EdgeLaws laws_;
  FundamentalLoops loops_;
  LinearSystem system_;
  SpeedBorder border_;
  bool always_connected_ = false;
  double reference_flow_ = 0;  // sum of what terminals and draws ask for by design [m³/s]

  std::vector<Row> rows_;
  std::vector<double> held_loss_;   // of each terminal: loss of its edge at the limit with the valve open, once held
  std::vector<double> limit_;       // of each terminal
  std::vector<double> resistance_;  // of each terminal's valve when it was last solved for
  std::vector<double> by_speed_;    // dloss/d(n²), pumps only
  std::vector<int> pump_edges_;
  std::vector<double> pressure_;   // by steps, datum last
  std::vector<double> right_;      // right-hand side of the next round, by steps
  std::vector<double> change_;     // Newton's step in pressure, by steps
  std::vector<double> by_border_;  // the same for a change of x = n²
  std::vector<double> draw_;       // fixed draws by steps
  std::vector<int> pinned_;        // steps tied because their part has no datum
  std::vector<TapResponse> responses_;
  std::vector<TapTerm> terms_;
  double speed_squared_ = 1;
  double row_speed_squared_ = -1;  // that of the state last left
  double speed_change_ = 0;
  double least_slope_ = 0;
  double worst_surplus_ = 0;  // largest |surplus| of an open edge
  int worst_edge_ = -1;
  double worst_shift_ = 0;  // largest flow that a surplus would still drive [m³/s]
  double last_shift_ = 0;   // the same when flowsSettled() was asked before
  double largest_flow_ = 0;
  int flips_ = 0;     // edges that changed their standing in the last step
  double share_ = 1;  // of the full step
  double best_ = 0;
  int rounds_without_gain_ = 0;
  std::vector<double> node_pressure_;  // by nodes and edges, for taps and residuals
  std::vector<double> edge_flow_;
  std::vector<double> edge_loss_;
  std::vector<Hold> hold_;
  Summary summary_;
};

}  // namespace ebbline::network
