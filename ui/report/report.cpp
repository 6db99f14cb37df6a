#include "ui/report/report.h"

#include <algorithm>
#include <numeric>

#include <QCoreApplication>

#include "ui/canvas/loop_picture.h"
#include "ui/report/head_flow_picture.h"
#include "ui/report/paper.h"
#include "ui/report/table_picture.h"
#include "ui/report/words.h"

namespace ebbline::report {
namespace {

using quantity::Quantity;
using theme::Text;

constexpr int kPages = 3;
constexpr double kTallBody = 1.4;  // height over width: A4 is taller, Letter is not and has less room for the plot
constexpr std::size_t kMostTerminals = 36;  // rows that fit the page under its title
constexpr double kLineBody = 20;            // px
constexpr double kLineNote = 15;
constexpr double kRow = 23;

QString tr(const char* english) {
  return QCoreApplication::translate("report", english);
}

class Report {
 public:
  Report(const ReportContent& content, const QString& path)
      : content_(content),
        paper_(path, content.units == quantity::UnitSystem::kSi ? Size::kA4 : Size::kLetter,
               QString::fromStdString(content.loop->project.title)) {}

  QString write() {
    if (!paper_.ok()) return tr("the file cannot be opened for writing");
    answerPage();
    paper_.nextPage();
    partLoadPage();
    paper_.nextPage();
    terminalPage();
    return paper_.finish() ? QString() : tr("the file could not be written whole");
  }

 private:
  const theme::Colours& ink() const { return paper_.look().colours; }
  double left() const { return paper_.body().left(); }
  double right() const { return paper_.body().right(); }

  // Running head; returns the y where the page may begin.
  double head(int page) {
    const double y = paper_.body().top() + 14;
    const QString title = QString::fromStdString(content_.loop->project.title);
    const double width = paper_.line({left(), y}, title, paper_.font(Text::kBody, 600), ink().ink1);
    QString subject = QString::fromStdString(content_.loop->project.subject);
    subject += subject.isEmpty() ? tr("part load") : tr(", part load");
    paper_.line({left() + width + 10, y}, subject, paper_.font(Text::kBody), ink().ink2);
    paper_.line({right(), y}, tr("page %1 of %2").arg(page).arg(kPages), paper_.font(Text::kLabel), ink().ink2,
                Qt::AlignRight);
    paper_.rule(y + 14, ink().ink1, 1.25);
    return y + 14;
  }

  void foot() {
    const double y = paper_.body().bottom();
    const QFont font = paper_.font(Text::kNote);
    paper_.rule(y - 18, ink().hairline);
    const QString residuals = footRight(content_);
    const double taken = paper_.line({right(), y - 2}, residuals, font, ink().ink2, Qt::AlignRight);
    const double room = right() - left() - taken - 12;
    paper_.line({left(), y - 2}, QFontMetricsF(font).elidedText(footLeft(content_), Qt::ElideRight, room), font,
                ink().ink2);
  }

  // "1  The loop …" under a hairline; returns the y below.
  double section(double y, int number, const QString& title) {
    paper_.rule(y, ink().hairline);
    paper_.line({left(), y + 21}, QString::number(number), paper_.font(Text::kBody, 600), ink().accent);
    paper_.line({left() + 14, y + 21}, title, paper_.font(Text::kBody, 600), ink().ink1);
    return y + 32;
  }

  double headline(double y) {
    const Headline said = headlineOf(content_);
    if (said.figure.isEmpty()) return y;
    QFont figure = paper_.question();
    figure.setPixelSize(84);
    QFont unit = paper_.question();
    unit.setPixelSize(34);
    const QColor colour = said.bad ? ink().under : ink().accent;
    double x = left() - 4;
    x += paper_.line({x, y + 72}, said.figure, figure, colour) + 6;
    x += paper_.line({x, y + 39}, said.unit, unit, colour);
    x = std::max(x + 22, left() + 104);
    paper_.line({x, y + 21}, said.strong, paper_.font(Text::kTitle), ink().ink1);
    const double end =
        paper_.paragraph({x, y + 30}, right() - x, said.words, paper_.font(Text::kBody), ink().ink1, kLineBody);
    return std::max(end, y + 82) + 16;
  }

  double column(double x, double y, double width, const QString& title, const QColor& title_ink, const QString& words) {
    paper_.line({x, y}, title, paper_.font(Text::kBody, 600), title_ink);
    return paper_.paragraph({x, y + 6}, width, words, paper_.font(Text::kNote), ink().ink2, kLineNote);
  }

  double columnsHeight(double width) const {
    const QFont font = paper_.font(Text::kNote);
    return 26 + std::max(paper_.paragraphHeight(width, assumedOf(content_), font, kLineNote),
                         paper_.paragraphHeight(width, cautionOf(content_), font, kLineNote));
  }

  void answerPage() {
    double y = head(1) + 22;
    y = paper_.paragraph({left(), y}, right() - left(),
                         QString(questionOf(content_)).replace(u'\n', QChar::LineSeparator), paper_.question(),
                         ink().ink1, 36);
    y = headline(y + 12);
    y = section(y, 1, pictureTitle(content_));
    const double gap = 36;
    const double width = (right() - left() - gap) / 2;
    const double columns_top = paper_.body().bottom() - 30 - columnsHeight(width);
    const QRectF box(left(), y, right() - left(), columns_top - 40 - y);
    canvas::LoopPicture picture;
    picture.loop = content_.loop;
    picture.results = &content_.picture->results;
    picture.units = content_.units;
    canvas::PaintOptions options;
    options.key = false;
    paper_.painter().save();
    canvas::paintLoop(paper_.painter(), box, picture, paper_.look(), options);
    paper_.painter().restore();
    paper_.line({left(), columns_top - 18},
                tr("Line weight grows with flow; supply solid, return dashed. Bar in a terminal: how far its valve is "
                   "open."),
                paper_.font(Text::kNote), ink().ink2);
    paper_.rule(columns_top - 4, ink().hairline);
    column(left(), columns_top + 16, width, tr("Assumed"), ink().ink1, assumedOf(content_));
    column(left() + width + gap, columns_top + 16, width, tr("Caution"), ink().under, cautionOf(content_));
    foot();
  }

  // Numbers of a row from flow to shortfall.
  std::vector<Cell> sweepCells(const study::SweepRow& row) const {
    const auto number = [this](double base, Quantity quantity) { return shownNumber(base, quantity, content_.units); };
    const QString none(theme::kEnDash);
    std::vector<Cell> cells;
    if (!row.summary.usable()) {
      for (int i = 0; i < 6; ++i) cells.push_back({none});
      cells.push_back({tr("not solved"), true});
      return cells;
    }
    const bool power = row.shaft_power_w > 0;
    cells.push_back({number(row.flow_m3s, Quantity::kFlow)});
    cells.push_back({number(row.pressure_pa, Quantity::kPressure)});
    cells.push_back({number(row.head_m, Quantity::kHead)});
    cells.push_back({theme::numberText(100 * row.speed, 1)});
    cells.push_back({power ? theme::numberText(100 * row.efficiency, 1) : none});
    cells.push_back({power ? number(row.shaft_power_w, Quantity::kPower) : none});
    if (row.num_under_supplied == 0)
      cells.push_back({tr("none")});
    else
      cells.push_back(
          {tr("%1, %2 by %3 %")
               .arg(row.num_under_supplied)
               .arg(QString::fromStdString(row.worst_terminal), theme::numberText(100 * row.worst_shortfall, 0)),
           true});
    return cells;
  }

  std::vector<Column> sweepColumns(double flow, double pressure, double speed, double power) const {
    const quantity::UnitSystem units = content_.units;
    const double width = right() - left();
    return {{tr("flow %1").arg(unitOf(Quantity::kFlow, units)), flow * width},
            {tr("pressure %1").arg(unitOf(Quantity::kPressure, units)), pressure * width},
            {tr("head %1").arg(unitOf(Quantity::kHead, units)), (pressure + 0.09) * width},
            {tr("speed %"), speed * width},
            {tr("efficiency %"), (speed + 0.105) * width},
            {tr("shaft power %1").arg(unitOf(Quantity::kPower, units)), power * width},
            {tr("under-supplied"), width}};
  }

  double sweepTable(double y) {
    std::vector<Column> columns = sweepColumns(0.17, 0.30, 0.50, 0.75);
    columns.insert(columns.begin(), {tr("load %"), 0.06 * (right() - left())});
    std::vector<std::vector<Cell>> rows;
    for (const study::SweepRow& row : content_.rows) {
      rows.push_back(sweepCells(row));
      rows.back().insert(rows.back().begin(), {theme::numberText(row.load_percent, 0)});
    }
    return paintTable(paper_, y, columns, rows, kRow);
  }

  // As many load states of the file as fit above the foot.
  void stateTable(double y) {
    const double room = paper_.body().bottom() - 30 - y - 32 - 16;
    const std::size_t fit = room > kRow ? static_cast<std::size_t>(room / kRow) : 0;
    if (content_.state_rows.empty() || fit == 0) return;
    y = section(y, 4, tr("The load states of the file; %1").arg(QString::fromStdString(content_.strategy)));
    std::vector<Column> columns = sweepColumns(0.40, 0.515, 0.62, 0.765);
    columns.erase(columns.begin() + 4);  // no room for the efficiency
    columns.erase(columns.begin() + 2);  // nor for the head
    columns.insert(columns.begin(), {tr("load state"), 0, true});
    std::vector<std::vector<Cell>> rows;
    for (const study::SweepRow& row : content_.state_rows) {
      if (rows.size() == fit) break;
      std::vector<Cell> cells = sweepCells(row);
      cells.erase(cells.begin() + 4);
      cells.erase(cells.begin() + 2);
      cells.insert(cells.begin(), {QString::fromStdString(row.name)});
      rows.push_back(std::move(cells));
    }
    y = paintTable(paper_, y - 6, columns, rows, kRow);
    const std::size_t left_out = content_.state_rows.size() - rows.size();
    if (left_out > 0)
      paper_.paragraph(
          {left(), y + 2}, right() - left(),
          tr("%1 more load states of the file do not stand here; `sweep --states` lists all.").arg(left_out),
          paper_.font(Text::kNote), ink().ink2, kLineNote);
  }

  void partLoadPage() {
    double y =
        section(head(2) + 20, 2, tr("The pump in the state “%1”").arg(QString::fromStdString(content_.state_name)));
    const QRectF box(left(), y, right() - left(),
                     paper_.body().height() > kTallBody * paper_.body().width() ? 370 : 300);
    HeadFlowPicture picture;
    picture.ground = content_.ground;
    picture.picture = content_.picture;
    picture.series_key = QString::fromStdString(content_.series_key);
    picture.control_words = QString::fromStdString(content_.strategy);
    picture.units = content_.units;
    paintHeadFlow(paper_.painter(), box, picture, paper_.look(), paper_.font(Text::kNote));
    y = paper_.paragraph(
        {left(), box.bottom() + 6}, right() - left(),
        tr("Thin lines: the pump at each speed, and equal pump efficiency. Bold: the pump and the loop in "
           "this state; the ring is where they meet. Dashed: the loop at design load. Coloured: where "
           "the control moves the pump when all terminals close alike."),
        paper_.font(Text::kNote), ink().ink2, kLineNote);
    y = section(y + 14, 3,
                tr("Part load, all terminals closing alike; %1").arg(QString::fromStdString(content_.strategy)));
    y = sweepTable(y - 6) + 8;
    QStringList notes;
    for (const study::SweepRow& row : content_.rows)
      if (row.beyond_data) {
        notes << tr("Some rows lie past the last reading of the pump curve: head and power there are a guess.");
        break;
      }
    const QString minimum = minimumFlowSentence(content_);
    if (!minimum.isEmpty()) notes << minimum;
    if (!notes.isEmpty())
      y = paper_.paragraph({left(), y}, right() - left(), notes.join(QLatin1Char(' ')), paper_.font(Text::kNote),
                           ink().ink2, kLineNote);
    stateTable(y + 12);
    foot();
  }

  // The under-supplied first, then the order of the document.
  std::vector<std::size_t> terminalOrder() const {
    const auto& terminals = content_.picture->results.terminals;
    std::vector<std::size_t> order(terminals.size());
    std::iota(order.begin(), order.end(), std::size_t{0});
    if (terminals.size() <= kMostTerminals) return order;
    std::stable_sort(order.begin(), order.end(),
                     [&](std::size_t a, std::size_t b) { return terminals[a].shortfall > terminals[b].shortfall; });
    order.resize(kMostTerminals);
    return order;
  }

  std::vector<Cell> terminalRow(std::size_t index) const {
    const network::TerminalResult& terminal = content_.picture->results.terminals[index];
    const auto number = [this](double base, Quantity quantity) { return shownNumber(base, quantity, content_.units); };
    QString tag = QString::fromStdString(terminal.tag);
    if (content_.loop->terminals[index].essential) tag += tr(" essential");
    return {{tag},
            {number(terminal.requested_m3s, Quantity::kFlow)},
            {number(terminal.delivered_m3s, Quantity::kFlow)},
            {theme::numberText(100 * terminal.stroke, 0)},
            {number(terminal.available_pa, Quantity::kPressure)},
            {terminal.under_supplied ? theme::numberText(-100 * terminal.shortfall, 0) : tr("none"),
             terminal.under_supplied}};
  }

  void terminalPage() {
    double y =
        section(head(3) + 20, 5, tr("Terminals in the state “%1”").arg(QString::fromStdString(content_.state_name)));
    const quantity::UnitSystem units = content_.units;
    const double width = right() - left();
    const std::vector<Column> columns = {{tr("terminal"), 0, true},
                                         {tr("requested %1").arg(unitOf(Quantity::kFlow, units)), 0.36 * width},
                                         {tr("delivered %1").arg(unitOf(Quantity::kFlow, units)), 0.52 * width},
                                         {tr("valve open %"), 0.66 * width},
                                         {tr("available %1").arg(unitOf(Quantity::kPressure, units)), 0.82 * width},
                                         {tr("shortfall %"), width}};
    std::vector<std::vector<Cell>> rows;
    for (const std::size_t index : terminalOrder()) rows.push_back(terminalRow(index));
    y = paintTable(paper_, y - 6, columns, rows, 23) + 10;
    const std::size_t all = content_.picture->results.terminals.size();
    if (rows.size() < all)
      paper_.paragraph({left(), y}, width,
                       tr("%1 of %2 terminals, the under-supplied first.").arg(rows.size()).arg(all),
                       paper_.font(Text::kNote), ink().ink2, kLineNote);
    foot();
  }

  const ReportContent& content_;
  Paper paper_;
};

}  // namespace

QString writeReport(const ReportContent& content, const QString& path) {
  return Report(content, path).write();
}

int pageCount(const ReportContent&) {
  return kPages;
}

}  // namespace ebbline::report
