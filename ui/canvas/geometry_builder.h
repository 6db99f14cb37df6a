#pragma once
// Private to geometry: the stages that share the points of the joints. Runs are laid first, then symbols with their
// legs; crossings are cut last (crossings.h).

#include <unordered_map>
#include <vector>

#include "ui/canvas/crossings.h"
#include "ui/canvas/geometry.h"

namespace ebbline::canvas {

class GeometryBuilder {
 public:
  GeometryBuilder(const loop::Loop& loop, const Topology& topology, double scale, const GeometryOptions& options);
  Geometry build();

 private:
  struct JointPoints {
    QPointF supply;  ///< Also the point of a single joint.
    QPointF back;
  };

  // geometry_runs.cpp
  void placeJoints();
  JointPoints placeJoint(const loop::Joint& joint) const;
  void setApart(const loop::Joint& joint, JointPoints& points) const;
  std::vector<QPointF> directionsAt(loop::Id joint) const;
  std::vector<QPointF> waysTakenAt(const loop::End& end) const;
  QPointF pairShift(const std::vector<QPointF>& directions) const;
  QPointF px(loop::Point at) const;
  QPointF pointOf(const loop::End& end) const;
  void layPairedRuns();
  void layPipeRuns();
  std::vector<QPointF> singleRoute(const loop::PipeRun& run) const;
  int addStrand(Strand strand);
  void addLine(std::vector<QPointF> points, int strand);

  // geometry_marks.cpp
  void layTerminals();
  void layPlants();
  void layInline(const PartRef& part, loop::Id id, Symbol symbol, const loop::End& from, const loop::End& to,
                 loop::Point at);
  void layPumpsAndValves();
  void layTaps();
  void terminalLeg(const loop::Terminal& terminal, const Mark& mark, const loop::End& end, double offset);
  void plantLeg(const loop::Plant& plant, const loop::End& end, QPointF port, double outward);
  bool mainPasses(const loop::End& end, double toRight) const;
  void markJoints();
  QPointF tapCorner(const loop::End& end, QPointF to) const;
  bool crossesTerminal(QPointF a, QPointF b) const;
  void measure();

  const loop::Loop& loop_;
  const Topology& topology_;
  double scale_;
  GeometryOptions options_;
  Geometry out_;
  std::vector<Line> lines_;
  std::unordered_map<loop::Id, JointPoints> joints_;
};

}  // namespace ebbline::canvas
