// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QPixmap>
#include <QWidget>
#include <functional>

#include "planner/core/window.h"
#include "rail_scale.h"
#include "ribbon.h"
#include "units.h"

namespace soak::desk {

/// Where the parts of the rail stand, from left to right: Celsius, the two ribbons, Fahrenheit, brackets, labels.
struct RailLayout {
    QRectF celsius, main, minor, fahrenheit, brackets, labels;
    QRectF legend;  ///< below all of them

    static RailLayout of(const QSizeF& size, const QFontMetricsF& font, double legend_height);
    QRectF ribbons() const { return main.united(minor); }
};

/// One limit as it is drawn.
struct Ledge {
    Side side = Side::floor;
    int index = 0;         ///< into floors or ceilings of the answer
    bool binding = false;  ///< the first of its side that has a temperature
    Limit limit;
    double at_C = 0, uncertainty_K = 0;
    QString temperature, cause;  ///< as shown, in the units at hand
    int lane = 0;                ///< brackets that would overlap stand side by side
    QRectF label;                ///< where its label was placed; empty when there was no room
    bool beyond = false;         ///< outside the view: its label points up or down
};

/// The temperature rail: temperature stands upright, the metal's phases as ribbons against it, floors and ceilings as
/// ledges, and the furnace band as a block that is dragged by its setpoint.
///   mouse   drag the block; drag elsewhere to move the view; wheel zooms; click a limit
///   keys    Up, Down one step of the controller; Page Up, Page Down five; + and - zoom; Home the window; End
///   everything
/// Everything but the band is painted once and kept, so that dragging costs a copy and a block.
class Rail : public QWidget {
    Q_OBJECT

public:
    /// The setpoint that lies `steps` controller steps from a temperature; 0 steps: the nearest that can be set.
    using Stepper = std::function<double(double celsius, int steps)>;

    explicit Rail(QWidget* parent = nullptr);

    /// A new answer: ribbons and limits are taken over and the axis opens on the window.
    void setAnswer(const WindowAnswer& answer);
    /// The same heat at another setpoint: only band and verdict are taken over.
    void follow(const WindowAnswer& answer);
    /// Nothing to show, and what to do about it.
    void clear(const QString& sentence);
    void setStepper(Stepper stepper) { stepper_ = std::move(stepper); }
    void setUnits(Units units);

    double setpoint_C() const { return setpoint_C_; }
    Range_C view() const { return {scale_.low_C, scale_.high_C}; }
    const std::vector<Ledge>& ledges() const { return ledges_; }
    double yOf(double celsius) const { return scale_.y(celsius); }
    /// What the pointer is told at a temperature, as rich text: amounts and compositions.
    QString reading(double celsius) const;

    QSize sizeHint() const override { return {560, 620}; }
    QSize minimumSizeHint() const override { return {440, 320}; }

public slots:
    void showWindow();
    void showAll();
    void zoomIn() { zoom(0.8); }
    void zoomOut() { zoom(1.25); }

signals:
    void setpointMoved(double celsius);
    void limitClicked(soak::Side side, int index);

protected:
    void paintEvent(QPaintEvent* event) override;
    void resizeEvent(QResizeEvent* event) override;
    void changeEvent(QEvent* event) override;
    void keyPressEvent(QKeyEvent* event) override;
    void mousePressEvent(QMouseEvent* event) override;
    void mouseMoveEvent(QMouseEvent* event) override;
    void mouseReleaseEvent(QMouseEvent* event) override;
    void wheelEvent(QWheelEvent* event) override;
    void leaveEvent(QEvent* event) override;
    bool event(QEvent* event) override;

private:
    enum class Drag { none, setpoint, view };

    void zoom(double factor);
    void zoomAbout(double about_C, double factor);
    void setView(Range_C range);
    void moveBy(int steps);
    void forgetGround();
    void collectLedges(const WindowAnswer& answer);
    void writeLedges();
    void placeLedgeLabels();
    void describe();
    bool isOnBand(const QPointF& at) const;
    const Ledge* ledgeAt(const QPointF& at) const;

    // rail_paint.cpp
    void paintGround();
    using Spans = std::vector<std::vector<QPointF>>;  // [label][row]: left and right x; equal where it is absent
    Spans spansOf(const QRectF& box, bool minor) const;
    void paintRibbon(QPainter& painter, const QRectF& box, const Spans& spans);
    void paintPhaseNames(QPainter& painter, const QRectF& box, const Spans& spans);
    void paintOutsideWindow(QPainter& painter);
    void paintAxes(QPainter& painter);
    void paintLedge(QPainter& painter, const Ledge& ledge);
    void paintLedgeLabel(QPainter& painter, const Ledge& ledge);
    void paintLegend(QPainter& painter);
    void paintBand(QPainter& painter);
    void paintTag(QPainter& painter, const QRectF& column, const QString& text, bool points_right);
    void paintEmpty(QPainter& painter);

    Ribbons ribbons_;
    std::vector<Ledge> ledges_;
    std::optional<double> low_C_, high_C_;  // the window
    Band band_;
    Verdict verdict_ = Verdict::notComputed;
    double setpoint_C_ = 0;
    QString sentence_;  // shown instead of everything when not empty
    Range_C opening_, full_;
    RailScale scale_;
    RailLayout layout_;
    Units units_;
    Stepper stepper_;
    QPixmap ground_;
    Drag drag_ = Drag::none;
    double grip_K_ = 0;  // setpoint minus temperature under the pointer when the drag began
    QPointF pressed_, last_;
    std::optional<double> hover_C_;
};

}  // namespace soak::desk
