// SPDX-License-Identifier: GPL-3.0-or-later
#pragma once
#include <vector>

#include "planner/sheet/composer.h"

namespace soak {

/// Puts heads, sections and feet on as few pages as they need: rows are never cut, sections only when they are taller
/// than what is left of an empty page. Gaps between sections are as wide as the number of pages allows. Fault::input
/// when a row or the head does not fit a page.
Result<std::vector<Page>> flow(const Composer& composer, const std::vector<Section>& sections, QSizeF page_mm);

}  // namespace soak
