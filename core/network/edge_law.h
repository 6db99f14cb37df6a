#pragma once
// Loss and slope of every edge at a flow, for one request. Newton, Hardy Cross, residuals and results all use these
// laws; nothing else in core/network knows a formula of a part. Internal to core/network, tests and the benchmark.

#include <algorithm>
#include <cmath>
#include <cstdint>
#include <limits>
#include <vector>

#include "core/network/network.h"
#include "core/network/solver.h"
#include "core/part/friction_batch.h"
#include "core/part/valve.h"

namespace ebbline::network {

/// Drop of total pressure along an edge at a flow, and its derivatives.
struct LossSlope {
  double loss_pa = 0;           ///< Positive when pressure falls from → to; a pump makes it negative.
  double slope_pa_s_m3 = 0;     ///< dloss/dq; ≥ 0 unless a pump curve rises.
  double by_speed_squared = 0;  ///< dloss/d(n²); 0 without a pump, else < 0.
};

/// The laws of a network under one request, in flat arrays in the order of the edges. A terminal's edge runs in the
/// terminal's own direction and holds one terminal at most (compile sees to it).
///
/// A requesting terminal: `loss` is that of the wide open valve. `limit` is what it asks for: the edge's true law is
/// this loss up to q = limit, and q = limit at any larger pressure difference. limit 0 or shut: no flow either way.
/// A terminal with given position, and every other edge: limit is infinite and the loss is the law.
class EdgeLaws {
 public:
  explicit EdgeLaws(const Network& network);  ///< `network` must outlive the object; every terminal wide open.
  EdgeLaws(const Network& network, const Request& request) : EdgeLaws(network) { setRequest(request); }

  /// REQUIRES: one demand per terminal.
  void setRequest(const Request& request);
  /// Forgets what earlier evaluations left behind, so that equal work gives equal bits.
  void forget();

  int numEdges() const { return static_cast<int>(rows_.size()); }
  /// Loss of an edge at a flow. Not const: each pipe remembers its last root (speed only, not the answer).
  LossSlope evaluate(int edge, double flow_m3s, double speed_squared);

  /// Many edges at once, block by block, for rounds in which flows move little. In each block: setFlow() for all its
  /// edges, then evaluateBlock(), then evaluated() of the edges wanted, with the flow that was set. The laws are those
  /// of evaluate(), to rounding.
  struct Block {
    int first_edge = 0;
    int last_edge = 0;  ///< One past the last.
    int first_pipe = 0;
    int num_pipes = 0;
  };
  const std::vector<Block>& blocks() const { return blocks_; }
  void setFlow(const Block& block, int edge, double flow_m3s) {
    double* flow = block_flow_.data() + (rows_[edge].first_pipe - block.first_pipe);
    std::fill_n(flow, rows_[edge].num_pipes, flow_m3s);
  }
  void evaluateBlock(const Block& block) {
    pipes_.nearby(block.first_pipe, block.num_pipes, block_flow_.data(), block_loss_.data(), block_slope_.data());
  }
  LossSlope evaluated(const Block& block, int edge, double flow_m3s, double speed_squared);

  /// Largest flow the edge's terminal lets through [m³/s]; infinity without a requesting terminal.
  double limit(int edge) const { return rows_[edge].limit; }
  /// No flow either way: a shut valve, or a terminal asked for nothing or without any Kv at its stroke.
  bool shut(int edge) const { return rows_[edge].limit <= 0 || rows_[edge].always_shut != 0; }
  /// True if some element is a shut valve, whatever the terminals do.
  bool alwaysShut(int edge) const { return rows_[edge].always_shut != 0; }
  bool hasPump(int edge) const { return rows_[edge].num_pumps > 0; }
  int terminal(int edge) const { return rows_[edge].terminal; }  ///< Index in Network::terminals, or −1.
  int edgeOfTerminal(int terminal) const { return edge_of_terminal_[terminal]; }
  int edgeOfPump(int pump) const { return edge_of_pump_[pump]; }
  /// Resistance of the terminal's control valve in use [Pa s²/m⁶]: open under a request, else at its stroke;
  /// infinity when it is shut.
  double valveResistance(int terminal) const { return valve_resistance_[terminal]; }
  const part::Characteristic& characteristic(int terminal) const { return characteristics_[terminal]; }

  /// Loss of one element in the edge's direction, the control valve of a requesting terminal open.
  LossSlope evaluateElement(int index, double flow_m3s, double speed_squared) const;

  /// Largest pressure the pumps can give at no flow and this speed [Pa]; what pressure residuals are relative to.
  double pumpPressure(double speed_squared) const;

 private:
  struct Row {
    double quadratic = 0;  // all that goes with q|q|, the terminal's control valve included
    double limit = std::numeric_limits<double>::infinity();
    int first_pipe = 0;
    int terminal = -1;
    std::uint16_t num_pipes = 0;
    std::uint8_t num_powers = 0;
    std::uint8_t num_pumps = 0;
    std::uint8_t always_shut = 0;
  };
  struct PumpRow {
    const part::PumpCurve* curve = nullptr;
    double sign = 1;
  };
  void addEdge(int edge);
  void findBlocks();
  /// The law without its pipes, added to what they lose.
  LossSlope completed(int edge, double flow_m3s, double speed_squared, LossSlope sum) const;
  part::PipeConstants constantsOf(const PipeLaw& pipe) const;
  LossSlope pumpLoss(const PumpRow& pump, double flow_m3s, double speed_squared) const;

  const Network* network_;
  std::vector<Row> rows_;
  std::vector<double> fixed_quadratic_;  // of each edge, without control valves
  std::vector<int> first_power_;         // of each edge
  std::vector<int> first_pump_;
  part::FrictionColumns pipes_;
  std::vector<Block> blocks_;
  std::vector<double> block_flow_;  // of each pipe of the block in work
  std::vector<double> block_loss_;
  std::vector<double> block_slope_;
  std::vector<PowerLaw> powers_;
  std::vector<PumpRow> pumps_;
  std::vector<int> edge_of_terminal_;
  std::vector<int> edge_of_pump_;
  std::vector<double> valve_resistance_;
  std::vector<part::Characteristic> characteristics_;
  double pressure_per_head_ = 9806.65;  // ρ g
};

/// The law as it is; only in a copy that a test must catch the slope of a square law forgets its 2.
inline LossSlope withFault(LossSlope law) {
#ifdef EBBLINE_SEEDED_FAULT_SLOPE
  law.slope_pa_s_m3 *= 0.5;
#endif
  return law;
}

inline LossSlope EdgeLaws::completed(int edge, double flow_m3s, double speed_squared, LossSlope sum) const {
  const Row& row = rows_[edge];
  const double q = std::abs(flow_m3s);
  sum.loss_pa += row.quadratic * q * flow_m3s;
  sum.slope_pa_s_m3 += 2 * row.quadratic * q;
  if (row.num_powers == 0 && row.num_pumps == 0) return withFault(sum);
  for (int i = first_power_[edge]; i < first_power_[edge] + row.num_powers; ++i) {
    const part::ValueSlope loss = part::powerLoss(powers_[i].coefficient, powers_[i].exponent, flow_m3s);
    sum.loss_pa += loss.value;
    sum.slope_pa_s_m3 += loss.slope;
  }
  for (int i = first_pump_[edge]; i < first_pump_[edge] + row.num_pumps; ++i) {
    const LossSlope loss = pumpLoss(pumps_[i], flow_m3s, speed_squared);
    sum.loss_pa += loss.loss_pa;
    sum.slope_pa_s_m3 += loss.slope_pa_s_m3;
    sum.by_speed_squared += loss.by_speed_squared;
  }
  return withFault(sum);
}

inline LossSlope EdgeLaws::evaluate(int edge, double flow_m3s, double speed_squared) {
  const Row& row = rows_[edge];
  LossSlope sum;
  for (int i = row.first_pipe; i < row.first_pipe + row.num_pipes; ++i) {
    const part::ValueSlope loss = pipes_.one(i, flow_m3s);
    sum.loss_pa += loss.value;
    sum.slope_pa_s_m3 += loss.slope;
  }
  return completed(edge, flow_m3s, speed_squared, sum);
}

inline LossSlope EdgeLaws::evaluated(const Block& block, int edge, double flow_m3s, double speed_squared) {
  const Row& row = rows_[edge];
  LossSlope sum;
  for (int i = row.first_pipe; i < row.first_pipe + row.num_pipes; ++i) {
    const int at = i - block.first_pipe;
    part::ValueSlope loss{block_loss_[at], block_slope_[at]};
    if (loss.slope == part::FrictionColumns::kNotNear) loss = pipes_.one(i, flow_m3s);
    sum.loss_pa += loss.value;
    sum.slope_pa_s_m3 += loss.slope;
  }
  return completed(edge, flow_m3s, speed_squared, sum);
}

}  // namespace ebbline::network
