// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <QWidget>
#include <map>
#include <string>
#include <vector>

#include "units.h"

namespace soak::desk {

/// What 0.01 % more of each element does to one limit, as bars around zero, the strongest first.
class SensitivityBars : public QWidget {
public:
    explicit SensitivityBars(QWidget* parent = nullptr);
    void setSlopes(const std::map<std::string, double>& K_per_wt, Units units);
    QSize sizeHint() const override;
    QSize minimumSizeHint() const override { return sizeHint(); }

protected:
    void paintEvent(QPaintEvent* event) override;

private:
    struct Bar {
        QString element;
        double K = 0;  // per 0.01 wt%
    };
    std::vector<Bar> bars_;
    Units units_;
};

}  // namespace soak::desk
