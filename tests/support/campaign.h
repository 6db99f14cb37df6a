#pragma once
// Solves many random loops by both methods and judges every answer on its drawing. The tests of the real solver and
// of its seeded faults run this same code.

#include <cstdint>
#include <map>
#include <string>
#include <vector>

namespace ebbline::test {

/// What became of the loops.
struct Tally {
  int loops = 0;
  int refused = 0;        ///< Not compiled.
  int unconverged = 0;    ///< Newton ended otherwise than converged.
  int slow = 0;           ///< Newton took more rounds than right slopes ever need here.
  int flow = 0;           ///< Flow residual beyond 1e-9, by the solver's or the independent account.
  int pressure = 0;       ///< The same of the pressure residual.
  int request = 0;        ///< A terminal got more than it asked for, or a shut part let something through.
  int control = 0;        ///< The speed is not what the rule asks for.
  int agreed = 0;         ///< Hardy Cross within 1e-6.
  int most_rounds = 0;    ///< Of Newton.
  double worst_flow = 0;  ///< Independent residuals, largest of all loops.
  double worst_pressure = 0;
  double worst_control = 0;
  double worst_difference = 0;              ///< Newton against Hardy Cross where both ended.
  std::map<std::string, int> not_compared;  ///< Loops without a comparison of the methods, by reason.
  std::map<std::string, int> kinds;
  std::vector<std::string> first_failures;  ///< In words, a few.

  std::vector<std::string> apart;  ///< Loops where the two methods differ by more.

  int failures() const { return refused + unconverged + slow + flow + pressure + request + control; }
  std::string print() const;
};

/// Runs loops 0 … count − 1 of `seed`.
Tally runCampaign(std::uint64_t seed, int count);

}  // namespace ebbline::test
