// SPDX-License-Identifier: GPL-3.0-or-later
#include "rail.h"

#include <QApplication>
#include <QKeyEvent>
#include <QMouseEvent>
#include <QToolTip>
#include <algorithm>
#include <cmath>

#include "label_column.h"

namespace soak::desk {
namespace {

constexpr double kHead = 28, kFoot = 22, kGap = 8, kBrackets = 28;
constexpr int kPageSteps = 5;

/// Elements of a phase worth naming, largest first.
QString compositionText(const std::map<std::string, double>& wt, size_t at_most) {
    std::vector<std::pair<double, QString>> parts;
    for (const auto& [element, value] : wt)
        if (value >= 0.005) parts.emplace_back(value, QString::fromStdString(element));
    std::sort(parts.rbegin(), parts.rend());
    if (parts.size() > at_most) parts.resize(at_most);
    QStringList words;
    for (const auto& [value, element] : parts)
        words << element + QChar(0x00a0) + number(value, value >= 10 ? 0 : value >= 1 ? 1 : 2);
    return words.join(QStringLiteral("  "));
}

/// Gives each bracket the first lane, counted from the ribbons, in which it meets no other.
void chooseLanes(std::vector<Ledge>& ledges) {
    constexpr int kLanes = 3;
    for (size_t i = 0; i < ledges.size(); ++i) {
        std::vector<bool> taken(kLanes, false);
        for (size_t j = 0; j < i; ++j)
            if (std::abs(ledges[i].at_C - ledges[j].at_C) <= ledges[i].uncertainty_K + ledges[j].uncertainty_K &&
                ledges[j].uncertainty_K > 0)
                taken[size_t(ledges[j].lane)] = true;
        const auto free = std::find(taken.begin(), taken.end(), false);
        ledges[i].lane = free == taken.end() ? kLanes - 1 : int(free - taken.begin());
    }
}

}  // namespace

RailLayout RailLayout::of(const QSizeF& size, const QFontMetricsF& font, double legend_height) {
    const double axis = font.horizontalAdvance(QStringLiteral("8888")) + 22;
    const double top = kHead, height = size.height() - kHead - kFoot - legend_height;
    const double free = size.width() - 2 * axis - kBrackets - 2 * kGap;
    const double label_width = std::clamp(0.43 * free, 140.0, 260.0);
    const double main_width = 0.62 * (free - label_width), minor_width = 0.38 * (free - label_width);
    RailLayout layout;
    double x = 0;
    const auto column = [&](double width) {
        const QRectF box(x, top, width, height);
        x += width;
        return box;
    };
    layout.celsius = column(axis);
    layout.main = column(main_width);
    x += kGap;
    layout.minor = column(minor_width);
    layout.fahrenheit = column(axis);
    layout.brackets = column(kBrackets);
    x += kGap;
    layout.labels = column(label_width);
    layout.legend = QRectF(layout.main.left(), top + height + kFoot, size.width() - layout.main.left(), legend_height);
    return layout;
}

Rail::Rail(QWidget* parent) : QWidget(parent) {
    setFocusPolicy(Qt::StrongFocus);
    setMouseTracking(true);
    setSizePolicy(QSizePolicy::Expanding, QSizePolicy::Expanding);
    setAccessibleName(tr("Temperature rail"));
    setWhatsThis(
        tr("Drag the furnace band or press the arrow keys to move the setpoint by one step of the controller, "
           "Page Up and Page Down by five. The wheel and the plus and minus keys zoom, Home shows the window, "
           "End shows all temperatures."));
}

void Rail::setAnswer(const WindowAnswer& answer) {
    sentence_.clear();
    ribbons_ = answer.sweep ? Ribbons(*answer.sweep) : Ribbons();
    low_C_ = answer.low_C;
    high_C_ = answer.high_C;
    collectLedges(answer);
    full_ = fullRange(answer);
    opening_ = openingRange(answer);
    follow(answer);
    showWindow();
}

void Rail::follow(const WindowAnswer& answer) {
    band_ = answer.band;
    verdict_ = answer.verdict;
    setpoint_C_ = answer.setpoint_C;
    if (!scale_.shows(setpoint_C_) && drag_ == Drag::none && full_.high > full_.low) {
        const double middle = (scale_.low_C + scale_.high_C) / 2;
        setView(shifted(view(), setpoint_C_ - middle, full_));
    }
    describe();
    update();
}

void Rail::clear(const QString& sentence) {
    sentence_ = sentence;
    ledges_.clear();
    ribbons_ = {};
    setAccessibleDescription(sentence);
    forgetGround();
}

void Rail::setUnits(Units units) {
    units_ = units;
    writeLedges();
    forgetGround();
    describe();
}

void Rail::describe() {
    setAccessibleDescription(tr("Setpoint %1; the metal sees %2 to %3; %4")
                                 .arg(units_.temperature(setpoint_C_), units_.temperature(band_.low_C),
                                      units_.temperature(band_.high_C), word(verdict_)));
}

void Rail::collectLedges(const WindowAnswer& answer) {
    ledges_.clear();
    for (const auto* limits : {&answer.ceilings, &answer.floors}) {
        bool first = true;
        for (size_t i = 0; i < limits->size(); ++i) {
            const Limit& limit = (*limits)[i];
            if (!limit.temperature_C) continue;
            Ledge ledge;
            ledge.side = limit.side;
            ledge.index = int(i);
            ledge.binding = first;
            ledge.at_C = *limit.temperature_C;
            ledge.uncertainty_K = limit.set ? 0 : limit.uncertainty_K;
            ledge.limit = limit;
            ledges_.push_back(ledge);
            first = false;
        }
    }
    chooseLanes(ledges_);
    writeLedges();
}

void Rail::writeLedges() {
    for (Ledge& ledge : ledges_) {
        ledge.temperature = limitTemperature(ledge.limit, units_);
        ledge.cause = causeWithoutTemperature(ledge.limit, units_);
    }
}

void Rail::placeLedgeLabels() {
    const QFontMetricsF metrics(font());
    std::vector<double> wanted, heights;
    for (Ledge& ledge : ledges_) {
        ledge.beyond = !scale_.shows(ledge.at_C);
        wanted.push_back(std::clamp(scale_.y(ledge.at_C), layout_.labels.top() - 1, layout_.labels.bottom() + 1));
        heights.push_back(ledge.binding ? 2 * metrics.height() + 2 : 2 * metrics.height() - 2);
    }
    const auto tops = placeLabels(wanted, heights, layout_.labels.top(), layout_.labels.bottom(), 4);
    for (size_t i = 0; i < ledges_.size(); ++i)
        ledges_[i].label = QRectF(layout_.labels.left(), tops[i], layout_.labels.width(), heights[i]);
}

void Rail::setView(Range_C range) {
    scale_.low_C = range.low;
    scale_.high_C = range.high;
    forgetGround();
}

void Rail::showWindow() { setView(opening_); }
void Rail::showAll() { setView(full_); }
void Rail::zoom(double factor) {
    zoomAbout(scale_.shows(setpoint_C_) ? setpoint_C_ : (scale_.low_C + scale_.high_C) / 2, factor);
}
void Rail::zoomAbout(double about_C, double factor) { setView(zoomed(view(), about_C, factor, full_)); }

void Rail::forgetGround() {
    ground_ = {};
    update();
}

void Rail::moveBy(int steps) {
    if (!sentence_.isEmpty() || !stepper_) return;
    const double next = stepper_(setpoint_C_, steps);
    if (next != setpoint_C_) emit setpointMoved(next);
}

bool Rail::isOnBand(const QPointF& at) const {
    if (!sentence_.isEmpty() || at.x() < layout_.celsius.left() || at.x() > layout_.fahrenheit.right()) return false;
    constexpr double kReach = 8;  // a narrow band can still be grasped
    const double top = std::min(scale_.y(band_.high_C), scale_.y(setpoint_C_) - kReach);
    const double bottom = std::max(scale_.y(band_.low_C), scale_.y(setpoint_C_) + kReach);
    return at.y() >= top && at.y() <= bottom;
}

const Ledge* Rail::ledgeAt(const QPointF& at) const {
    for (const Ledge& ledge : ledges_)
        if (ledge.label.contains(at)) return &ledge;
    for (const Ledge& ledge : ledges_)
        if (!ledge.beyond && at.x() < layout_.brackets.right() && std::abs(at.y() - scale_.y(ledge.at_C)) < 4)
            return &ledge;
    return nullptr;
}

void Rail::keyPressEvent(QKeyEvent* event) {
    switch (event->key()) {
        case Qt::Key_Up:
            moveBy(1);
            break;
        case Qt::Key_Down:
            moveBy(-1);
            break;
        case Qt::Key_PageUp:
            moveBy(kPageSteps);
            break;
        case Qt::Key_PageDown:
            moveBy(-kPageSteps);
            break;
        case Qt::Key_Plus:
            zoomIn();
            break;
        case Qt::Key_Minus:
            zoomOut();
            break;
        case Qt::Key_Home:
            showWindow();
            break;
        case Qt::Key_End:
            showAll();
            break;
        default:
            QWidget::keyPressEvent(event);
    }
}

void Rail::mousePressEvent(QMouseEvent* event) {
    if (event->button() != Qt::LeftButton || !sentence_.isEmpty()) return;
    pressed_ = last_ = event->position();
    if (isOnBand(pressed_)) {
        drag_ = Drag::setpoint;
        grip_K_ = setpoint_C_ - scale_.celsius(pressed_.y());
    } else if (!ledgeAt(pressed_)) {
        drag_ = Drag::view;
    }
    QToolTip::hideText();
}

void Rail::mouseMoveEvent(QMouseEvent* event) {
    const QPointF at = event->position();
    if (drag_ == Drag::setpoint && stepper_) {
        const double next = stepper_(scale_.celsius(at.y()) + grip_K_, 0);
        if (next != setpoint_C_) emit setpointMoved(next);
    } else if (drag_ == Drag::view) {
        setView(shifted(view(), (at.y() - last_.y()) / scale_.pointsPerKelvin(), full_));
    } else {
        const bool over = layout_.ribbons().contains(at) && sentence_.isEmpty();
        hover_C_ = over ? std::optional(scale_.celsius(at.y())) : std::nullopt;
        setCursor(isOnBand(at) ? Qt::SizeVerCursor : ledgeAt(at) ? Qt::PointingHandCursor : Qt::ArrowCursor);
        update();
    }
    last_ = at;
}

void Rail::mouseReleaseEvent(QMouseEvent* event) {
    const bool still = (event->position() - pressed_).manhattanLength() < QApplication::startDragDistance();
    if (const Ledge* ledge = ledgeAt(event->position()); ledge && still && drag_ != Drag::setpoint)
        emit limitClicked(ledge->side, ledge->index);
    drag_ = Drag::none;
}

void Rail::wheelEvent(QWheelEvent* event) {
    if (!sentence_.isEmpty()) return;
    const double turns = event->angleDelta().y() / 120.0;
    zoomAbout(scale_.celsius(event->position().y()), std::pow(0.85, turns));
    event->accept();
}

void Rail::leaveEvent(QEvent*) {
    hover_C_.reset();
    update();
}

bool Rail::event(QEvent* event) {
    if (event->type() == QEvent::ToolTip && drag_ == Drag::none) {
        const auto* help = static_cast<QHelpEvent*>(event);
        const Ledge* ledge = ledgeAt(help->pos());
        if (ledge && layout_.labels.contains(help->pos()))
            QToolTip::showText(help->globalPos(), ledge->temperature + QStringLiteral("  ") + ledge->cause, this);
        else if (layout_.ribbons().contains(help->pos()))
            QToolTip::showText(help->globalPos(), reading(scale_.celsius(help->pos().y())), this);
        else
            QToolTip::hideText();
        return true;
    }
    return QWidget::event(event);
}

void Rail::resizeEvent(QResizeEvent*) { forgetGround(); }

void Rail::changeEvent(QEvent* event) {
    if (event->type() == QEvent::PaletteChange || event->type() == QEvent::FontChange) forgetGround();
    QWidget::changeEvent(event);
}

QString Rail::reading(double celsius) const {
    const auto phases = ribbons_.at(celsius);
    if (phases.empty()) return {};
    QString text = QStringLiteral("<b>%1</b> (%2)<table cellspacing='0' cellpadding='2'>")
                       .arg(units_.temperature(celsius), units_.otherTemperature(celsius));
    for (const Reading& phase : phases)
        text += QStringLiteral("<tr><td>%1&nbsp;&nbsp;</td><td align='right'>%2&nbsp;&nbsp;</td><td>%3</td></tr>")
                    .arg(phase.label.toHtmlEscaped(), percent(phase.volume), compositionText(phase.wt, 6));
    return text + QStringLiteral("</table><small>") + tr("Equilibrium; amounts in vol%, compositions in wt%") +
           QStringLiteral("</small>");
}

}  // namespace soak::desk
