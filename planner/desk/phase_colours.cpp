// SPDX-License-Identifier: GPL-3.0-or-later
#include "phase_colours.h"

#include <QImage>
#include <QPainter>
#include <QTransform>
#include <iterator>

namespace soak::desk {
namespace {

struct Row {
    const char* label;
    const char* light;
    const char* dark;
    Hatch hatch;
};

// Colours: the colour-blind-safe set of M. Okabe and K. Ito (2002), seen: memory - orange E69F00, sky blue 56B4E9,
// bluish green 009E73, yellow F0E442, blue 0072B2, vermilion D55E00, reddish purple CC79A7 - and tints of them.
// Order is the order in a ribbon from the left.
constexpr Row kTable[] = {
    // matrix: quiet greys
    {"austenite", "#e3e5e8", "#565b61", Hatch::none},
    {"ferrite", "#bcc1c7", "#3c4147", Hatch::none},
    {"delta ferrite", "#a3a9b0", "#6f757c", Hatch::falling},
    {"cr-rich ferrite", "#8f959c", "#83898f", Hatch::level},
    {"aluminium", "#e3e5e8", "#565b61", Hatch::none},
    {"liquid", "#f6f2e6", "#2c2f33", Hatch::dots},
    // carbides: blues
    {"cementite", "#a9cbe6", "#8fb8d8", Hatch::level},
    {"m23c6", "#56b4e9", "#56b4e9", Hatch::rising},
    {"m7c3", "#0072b2", "#2f8fc9", Hatch::none},
    {"m6c", "#3f93c9", "#3f93c9", Hatch::upright},
    {"m2c", "#7fbfe8", "#7fbfe8", Hatch::crossed},
    {"m3c2", "#2b83bd", "#3f93c9", Hatch::dots},
    {"m5c2", "#c4dcee", "#a9cbe6", Hatch::falling},
    {"xi carbide", "#8db9dc", "#8db9dc", Hatch::dense},
    {"moc", "#6aa8d6", "#6aa8d6", Hatch::dots},
    {"hexagonal mc", "#1b62a0", "#4388c4", Hatch::falling},
    {"hexagonal", "#9cc9e9", "#9cc9e9", Hatch::dots},
    // nitrides and MX: bluish greens
    {"mx", "#009e73", "#1fb48a", Hatch::dots},
    {"mn", "#33b18f", "#33b18f", Hatch::upright},
    {"cr2n", "#4fbf9f", "#4fbf9f", Hatch::level},
    {"aln", "#8fd6c1", "#8fd6c1", Hatch::dots},
    {"z", "#007a5a", "#2a9d7c", Hatch::level},
    {"fe4n", "#b5e3d5", "#9fd9c8", Hatch::falling},
    // intermetallics: vermilion, always hatched
    {"sigma", "#d55e00", "#e2701a", Hatch::crossed},
    {"chi", "#e58441", "#e58441", Hatch::upright},
    {"laves", "#c24f00", "#d2661b", Hatch::dense},
    {"mu", "#efad82", "#efad82", Hatch::falling},
    {"r", "#f3c3a3", "#e7b08a", Hatch::level},
    {"ni3ti", "#da7a36", "#da7a36", Hatch::dots},
    // copper and graphite: yellow-browns
    {"copper", "#e69f00", "#e69f00", Hatch::none},
    {"graphite", "#8a6d1d", "#b08f35", Hatch::dense},
    {"gas", "#f0e442", "#d9cd3a", Hatch::dots},
    // hardening phases of aluminium: blue to purple
    {"theta", "#4a6fb5", "#6d8fd0", Hatch::none},
    {"mg2si", "#cc79a7", "#cc79a7", Hatch::rising},
    {"s", "#7a6fc0", "#9389d4", Hatch::falling},
    {"t", "#a48ad0", "#a48ad0", Hatch::level},
    {"eta", "#8a5aa8", "#a97cc4", Hatch::upright},
    {"silicon", "#b79b5b", "#b79b5b", Hatch::dots},
};

QString plain(const QString& label) { return label.toLower().replace(QLatin1Char('_'), QLatin1Char(' ')).trimmed(); }

constexpr int kMatrixRows = 6;  // the first block

PhaseLook lookOf(const Row& row, int order) {
    return {order, order < kMatrixRows, QColor(QLatin1String(row.light)), QColor(QLatin1String(row.dark)), row.hatch};
}

/// Reddish purples of changing lightness for labels that the table does not know.
PhaseLook unknownLook(const QString& label) {
    int sum = 0;
    for (const QChar letter : label) sum = (sum * 31 + letter.unicode()) % 997;
    const QColor colour = QColor(0xcc, 0x79, 0xa7).lighter(85 + sum % 5 * 10);
    const Hatch hatches[] = {Hatch::crossed, Hatch::rising, Hatch::falling, Hatch::level, Hatch::upright};
    return {int(std::size(kTable)) + sum, false, colour, colour, hatches[sum % 5]};
}

void drawTile(QPainter& painter, Hatch hatch, double size) {
    const auto line = [&](double x1, double y1, double x2, double y2) {
        painter.drawLine(QPointF(x1 * size, y1 * size), QPointF(x2 * size, y2 * size));
    };
    switch (hatch) {
        case Hatch::none:
            break;
        case Hatch::dots:
            painter.drawPoint(QPointF(0.25 * size, 0.25 * size));
            painter.drawPoint(QPointF(0.75 * size, 0.75 * size));
            break;
        case Hatch::crossed:
            line(-0.5, 0.5, 0.5, -0.5), line(0, 1, 1, 0), line(0.5, 1.5, 1.5, 0.5);
            line(-0.5, 0.5, 0.5, 1.5), line(0, 0, 1, 1), line(0.5, -0.5, 1.5, 0.5);
            break;
        case Hatch::rising:
            line(-0.5, 0.5, 0.5, -0.5), line(0, 1, 1, 0), line(0.5, 1.5, 1.5, 0.5);
            break;
        case Hatch::falling:
            line(-0.5, 0.5, 0.5, 1.5), line(0, 0, 1, 1), line(0.5, -0.5, 1.5, 0.5);
            break;
        case Hatch::level:
            line(0, 0.5, 1, 0.5);
            break;
        case Hatch::upright:
            line(0.5, 0, 0.5, 1);
            break;
        case Hatch::dense:
            line(0, 0.25, 1, 0.25), line(0, 0.75, 1, 0.75), line(0.5, 0, 0.5, 1);
            break;
    }
}

}  // namespace

PhaseLook phaseLook(const QString& label) {
    const QString wanted = plain(label);
    for (size_t i = 0; i < std::size(kTable); ++i)
        if (wanted == QLatin1String(kTable[i].label)) return lookOf(kTable[i], int(i));
    return unknownLook(wanted);
}

QBrush hatchBrush(Hatch hatch, const QColor& ink, double scale) {
    if (hatch == Hatch::none) return Qt::NoBrush;
    constexpr double kSize = 7;  // points of the screen between two lines
    const int pixels = qMax(1, qRound(kSize * scale));
    QImage tile(pixels, pixels, QImage::Format_ARGB32_Premultiplied);
    tile.fill(Qt::transparent);
    QPainter painter(&tile);
    painter.setRenderHint(QPainter::Antialiasing);
    painter.setPen(QPen(ink, (hatch == Hatch::dots ? 1.6 : 1.0) * scale, Qt::SolidLine, Qt::RoundCap));
    drawTile(painter, hatch, pixels);
    painter.end();
    QBrush brush(tile);
    brush.setTransform(QTransform::fromScale(1 / scale, 1 / scale));
    return brush;
}

QColor readableOn(const QColor& ground) { return isDark(ground) ? QColor(Qt::white) : QColor(0x1a, 0x1a, 0x1a); }

bool isDark(const QColor& ground) {
    return 0.299 * ground.redF() + 0.587 * ground.greenF() + 0.114 * ground.blueF() < 0.5;
}

}  // namespace soak::desk
