#include <QLocale>
#include <algorithm>
#include <cmath>

#include "ui/theme/theme.h"

namespace ebbline::theme {
namespace {

// Digits of "%.*f" grouped by three before the point; four digits stay together only below 1 000.
QString grouped(QString digits) {
  const qsizetype point = digits.indexOf('.');
  for (qsizetype at = (point < 0 ? digits.size() : point) - 3; at > 0; at -= 3) digits.insert(at, kThinSpace);
  return digits;
}

}  // namespace

QString numberText(double value, int decimals) {
  if (!std::isfinite(value)) return kEnDash;
  const QString digits = QString::number(std::abs(value), 'f', std::clamp(decimals, 0, 12));
  const bool zero = std::all_of(digits.begin(), digits.end(), [](QChar c) { return c == '0' || c == '.'; });
  return (value < 0 && !zero ? QString(kMinus) : QString()) + grouped(digits);
}

QString roundedText(double value, int figures) {
  if (!std::isfinite(value)) return kEnDash;
  if (value == 0) return "0";
  const int magnitude = static_cast<int>(std::floor(std::log10(std::abs(value))));
  return numberText(value, std::clamp(figures - 1 - magnitude, 0, 12));
}

QString residualText(double value) {
  if (!std::isfinite(value)) return kEnDash;
  if (value == 0) return "0";
  const int power = static_cast<int>(std::floor(std::log10(std::abs(value))));
  int digit = static_cast<int>(std::ceil(std::abs(value) / std::pow(10.0, power) - 1e-9));  // never shown smaller
  const int shown = digit >= 10 ? power + 1 : power;
  if (digit >= 10) digit = 1;
  return QString("%1e%2%3").arg(digit).arg(shown < 0 ? "-" : "").arg(std::abs(shown));
}

double contrast(const QColor& a, const QColor& b) {
  // Published: W3C, Web Content Accessibility Guidelines 2.1, "relative luminance" and "contrast ratio".
  const auto linear = [](double c) { return c <= 0.04045 ? c / 12.92 : std::pow((c + 0.055) / 1.055, 2.4); };
  const auto luminance = [&](const QColor& c) {
    return 0.2126 * linear(c.redF()) + 0.7152 * linear(c.greenF()) + 0.0722 * linear(c.blueF());
  };
  const double la = luminance(a), lb = luminance(b);
  return (std::max(la, lb) + 0.05) / (std::min(la, lb) + 0.05);
}

}  // namespace ebbline::theme
