#include "ui/theme/theme.h"

#include <gtest/gtest.h>

#include <QApplication>
#include <QFontInfo>
#include <QFontMetricsF>
#include <QJsonArray>
#include <QJsonDocument>
#include <QJsonObject>
#include <QPushButton>
#include <QSignalSpy>
#include <QTest>
#include <cmath>
#include <limits>

#include "tests/ui/application.h"
#include "ui/theme/controls.h"

namespace ebbline::theme {
namespace {

QColor token(Mode mode, const QString& name) {
  const QJsonObject all = QJsonDocument::fromJson(tokensJson()).object();
  const char* theme = mode == Mode::kDark ? "dark" : "light";
  return QColor(all["themes"].toObject()[QLatin1String(theme)].toObject()["colour"].toObject()[name].toString());
}

class Themes : public testing::TestWithParam<Mode> {};
INSTANTIATE_TEST_SUITE_P(LightAndDark, Themes, testing::Values(Mode::kLight, Mode::kDark));

TEST_P(Themes, EveryInkReachesItsContrastOnEverySurfaceItIsUsedOn) {
  const QJsonObject all = QJsonDocument::fromJson(tokensJson()).object();
  const char* name = GetParam() == Mode::kDark ? "dark" : "light";
  const QJsonArray pairs = all["themes"].toObject()[QLatin1String(name)].toObject()["contrast"].toArray();
  ASSERT_GT(pairs.size(), 40);
  for (const QJsonValue& each : pairs) {
    const QJsonObject pair = each.toObject();
    const double ratio = contrast(token(GetParam(), pair["ink"].toString()), token(GetParam(), pair["on"].toString()));
    EXPECT_GE(ratio, pair["least"].toDouble())
        << pair["ink"].toString().toStdString() << " on " << pair["on"].toString().toStdString();
    EXPECT_NEAR(ratio, pair["ratio"].toDouble(), 0.01);
  }
}

TEST(Contrast, IsOneToTwentyOneFromWhiteOnWhiteToBlackOnWhite) {
  EXPECT_NEAR(contrast(Qt::white, Qt::white), 1, 1e-12);
  EXPECT_NEAR(contrast(Qt::black, Qt::white), 21, 1e-9);
  EXPECT_LT(contrast(QColor("#9a9a9a"), Qt::white), 4.5);  // seeded fault: a grey too light for text is seen as such
}

TEST_P(Themes, SeriesTextReachesFourAndAHalfAndLinesThree) {
  const Theme theme = makeTheme(GetParam());
  ASSERT_EQ(theme.series.size(), 9u);
  for (const Series& series : theme.series) {
    EXPECT_GE(contrast(series.label, theme.colours.sheet), 4.5) << series.key.toStdString();
    EXPECT_GE(contrast(series.colour, theme.colours.sheet), 3.0) << series.key.toStdString();
    for (const Series& other : theme.series)
      EXPECT_EQ(other.marker == series.marker, &other == &series) << "a marker stands for one strategy";
  }
  EXPECT_EQ(theme.seriesOf("quadratic").words, "quadratic curve");
  EXPECT_THROW(theme.seriesOf("no such"), std::logic_error);
}

TEST_P(Themes, ScalesGrowLighterWithTheNumberInBothThemes) {
  const Theme theme = makeTheme(GetParam());
  for (const ColourScale* scale : {&theme.cividis, &theme.viridis}) {
    double before = 0;
    for (int i = 0; i <= 50; ++i) {
      const double now = contrast(scale->at(i / 50.0), Qt::black);
      EXPECT_GE(now, before - 0.02);
      before = std::max(before, now);
    }
    EXPECT_EQ(scale->at(-3), scale->stops.front());
    EXPECT_EQ(scale->at(7), scale->stops.back());
    EXPECT_EQ(scale->at(std::numeric_limits<double>::quiet_NaN()), scale->stops.front());
  }
}

TEST(Numbers, AreWrittenWithThinSpacesAndTrueMinus) {
  EXPECT_EQ(numberText(8818, 0), QString("8") + kThinSpace + "818");
  EXPECT_EQ(numberText(-1234567.891, 2), QString(kMinus) + "1" + kThinSpace + "234" + kThinSpace + "567.89");
  EXPECT_EQ(numberText(-0.001, 2), "0.00");
  EXPECT_EQ(numberText(999, 0), "999");
  EXPECT_EQ(numberText(std::nan(""), 1), QString(kEnDash));
  EXPECT_EQ(roundedText(0.012345), "0.0123");
  EXPECT_EQ(roundedText(4.8549), "4.85");
  EXPECT_EQ(roundedText(0), "0");
}

TEST(Numbers, ResidualsAreNeverShownSmallerThanTheyAre) {
  EXPECT_EQ(residualText(3e-13), "3e-13");
  EXPECT_EQ(residualText(3.0001e-13), "4e-13");
  EXPECT_EQ(residualText(9.5e-8), "1e-7");
  EXPECT_EQ(residualText(0), "0");
}

TEST_P(Themes, StyleSheetIsReadWithoutComplaintAndLeavesNoNameOpen) {
  static QStringList complaints;
  complaints.clear();
  const auto before =
      qInstallMessageHandler([](QtMsgType, const QMessageLogContext&, const QString& text) { complaints << text; });
  applyTheme(*qApp, makeTheme(GetParam()));
  QPushButton button("x");
  button.ensurePolished();
  qInstallMessageHandler(before);
  for (const QString& each : complaints) EXPECT_FALSE(each.contains("parse")) << each.toStdString();
  EXPECT_FALSE(styleSheet(makeTheme(GetParam())).contains('@'));
  EXPECT_EQ(qApp->palette().color(QPalette::Window), makeTheme(GetParam()).colours.panel);
}

TEST(Fonts, AreLatoWithDigitsOfOneWidth) {
  const QFont font = makeTheme(Mode::kLight).font(Text::kBody);
  ASSERT_EQ(QFontInfo(font).family(), "Lato") << "install fonts-lato";
  const QFontMetricsF metrics(font);
  for (const QChar digit : QString("123456789"))
    EXPECT_NEAR(metrics.horizontalAdvance(digit), metrics.horizontalAdvance('0'), 1e-6);
}

TEST(Holder, TellsOfAChangeOnceAndOfNoChangeNever) {
  ThemeHolder holder(Mode::kLight);
  QSignalSpy changes(&holder, &ThemeHolder::changed);
  holder.setMode(Mode::kLight);
  EXPECT_EQ(changes.count(), 0);
  holder.setMode(Mode::kDark);
  EXPECT_EQ(changes.count(), 1);
  EXPECT_TRUE(holder.theme().dark());
  holder.setPresenting(true);
  EXPECT_EQ(holder.theme().font(Text::kBody).pixelSize(), 21);  // 13 px × 1.6
}

TEST(SegmentedSwitch, FollowsMouseAndArrowKeysOfTheWindow) {
  ThemeHolder holder(Mode::kLight);
  SegmentedSwitch units({"SI", "IP"}, holder);
  QSignalSpy chosen(&units, &SegmentedSwitch::chosenChanged);
  units.show();
  ASSERT_TRUE(QTest::qWaitForWindowExposed(&units));
  QTest::mouseClick(units.windowHandle(), Qt::LeftButton, {}, {units.width() - 12, units.height() / 2});
  EXPECT_EQ(units.chosen(), 1);
  QTest::mouseClick(units.windowHandle(), Qt::LeftButton, {}, {units.width() - 12, units.height() / 2});
  EXPECT_EQ(chosen.count(), 1) << "choosing what is chosen tells nothing";
  units.setFocus();
  QTest::keyClick(units.windowHandle(), Qt::Key_Left);
  EXPECT_EQ(units.chosen(), 0);
}

TEST(TextTabs, KeepTheirWidthsWhenTheChosenOneTurnsBold) {
  ThemeHolder holder(Mode::kLight);
  TextTabs tabs(holder);
  for (const char* word : {"Draw", "Design load", "Part load"}) tabs.addTab(word);
  tabs.show();
  const QRect before = tabs.tabRect(2);
  tabs.setCurrentIndex(1);
  EXPECT_EQ(tabs.tabRect(2), before);
}

}  // namespace
}  // namespace ebbline::theme
