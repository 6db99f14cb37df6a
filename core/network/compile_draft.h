#pragma once
// Between the drawing and the network: every end as a point, every drawn pipe, terminal, plant, pump or valve as one
// link of one element. Private to compile_*.cpp.

#include <string>
#include <unordered_map>
#include <vector>

#include "core/network/network.h"

namespace ebbline::network {

/// One element between two points.
struct Link {
  int from = 0;
  int to = 0;
  int element = 0;  ///< In Draft::elements.
  std::string tag;
};

/// A point is one side of one joint.
struct DraftPoint {
  loop::End end;
  double elevation_m = 0;
  std::string tag;
  int degree = 0;     ///< Links that end here.
  bool kept = false;  ///< Must become a node.
};

struct Draft {
  const loop::Loop* loop = nullptr;
  Network network;                 ///< Laws, terminals, pumps; elements in the order of the links.
  std::vector<DraftPoint> points;  ///< In the order of the joints.
  std::vector<Link> links;
  std::unordered_map<loop::Id, int> joint_of;  ///< Index in Loop::joints.
  std::vector<int> first_point;                ///< Of each joint.
  std::vector<text::Remark> remarks;
  int datum_point = -1;

  void say(text::Code code, loop::Id id, const std::string& tag, std::vector<std::string> arguments = {}) {
    remarks.push_back({code, {{}, 0, id, tag}, std::move(arguments)});
  }
  /// Point of an end; −1 and a remark for the thing (id, tag) when the end is open or does not exist. `which` says
  /// which end in words.
  int pointOf(const loop::End& end, loop::Id id, const std::string& tag, const char* which);
};

/// Numbers as remarks print them.
std::string shown(double number);

/// Remarks when a number is not finite, or not > 0 (not ≥ 0). `name` in words with unit. True if it can be used.
bool needPositive(Draft& draft, double value, const char* name, loop::Id id, const std::string& tag);
bool needNotNegative(Draft& draft, double value, const char* name, loop::Id id, const std::string& tag);

void draftPoints(Draft& draft);    // compile_points.cpp
void draftParts(Draft& draft);     // compile_parts.cpp: links with their laws
void draftMachines(Draft& draft);  // compile_machines.cpp: terminals, plants, pumps, valves
void addPipeLaws(Draft& draft, Element& element, const loop::Pipe& pipe, loop::Id id, const std::string& tag);
bool addKnownLoss(Draft& draft, Element& element, const loop::KnownLoss& loss, const char* name, loop::Id id,
                  const std::string& tag);
void addLink(Draft& draft, const Element& element, int from, int to, const std::string& tag);
void draftFluid(Draft& draft);        // compile_fluid.cpp
void noteHeights(Draft& draft);       // buoyancy and boiling
void keepTaps(Draft& draft);          // compile_points.cpp: vessel, sensors, headers, flanges
void checkConnections(Draft& draft);  // compile_points.cpp: islands, dead ends, what is missing
void lump(Draft& draft);              // compile_lump.cpp: points and links to nodes and edges

}  // namespace ebbline::network
