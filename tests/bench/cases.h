#pragma once
// What is timed: one campus of N terminals, solved by Ebbline's solver and by the comparisons, in the same states.

#include <Eigen/SparseCholesky>
#include <memory>
#include <random>
#include <vector>

#include "core/network/solver.h"
#include "tests/bench/equations.h"
#include "tests/bench/kinsol_newton.h"
#include "tests/bench/klu_newton.h"

namespace ebbline::bench {

/// Which valves move between two solves.
enum class Move { kAll, kOne };

/// Everything for one size. Each step…() does the work of one timed call and throws when a solve fails.
class Case {
 public:
  explicit Case(int terminals);

  /// Moves valves for the next calls: all by up to ±5 % of their stroke about 70 %, or one of them.
  void move(Move which);

  void stepFactor();        ///< F: numeric SimplicialLDLT of the node matrix of the lumped network.
  void stepCold();          ///< Ebbline, standard cold start, positions, speed fixed.
  void stepWarm();          ///< Ebbline from the state before.
  void stepWarmHeld();      ///< The same with the loop's own sensor holding its pressure.
  void stepWarmRequests();  ///< Requests instead of positions: the terminals ask for the flows of those positions.
  void stepKluCold();
  void stepKluWarm();
  void stepKinsolWarm();

  int terminals() const { return static_cast<int>(network_.terminals.size()); }
  int nodes() const { return network_.num_nodes; }
  int warmRounds() const { return warm_rounds_; }
  /// Largest difference of flows between Ebbline's warm answer and the comparisons', relative to the largest flow.
  double disagreement() const;

 private:
  void solve(const network::Request& request, network::State& state);
  void buildMatrix();

  network::Network network_;
  network::Request positions_;
  network::Request held_;
  network::Request requests_;
  std::vector<double> reference_flow_;  // what the terminals get at 70 % stroke
  std::unique_ptr<network::Solver> solver_;
  std::unique_ptr<network::Solver> held_solver_;
  std::unique_ptr<network::Solver> request_solver_;
  network::State warm_, held_state_, request_state_;
  std::unique_ptr<Equations> equations_;
  std::unique_ptr<KluNewton> klu_;
  std::unique_ptr<KinsolNewton> kinsol_;
  Unknowns klu_x_, kinsol_x_;
  Eigen::SparseMatrix<double> matrix_;
  Eigen::SimplicialLDLT<Eigen::SparseMatrix<double>> factor_;
  std::mt19937_64 dice_{7};
  std::size_t next_valve_ = 0;
  int warm_rounds_ = 0;
};

}  // namespace ebbline::bench
