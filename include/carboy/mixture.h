#pragma once

#include <span>
#include <vector>

#include "carboy/constants.h"
#include "carboy/quantity.h"

namespace carboy {

/// Totals of every component per kilogram of water. Protons are not listed: they follow from electroneutrality.
class Mixture {
public:
    struct Part {
        ComponentId component;
        Molality total;
    };

    /// Adds to the component's total. Negative, infinite or NaN: Error `bad_amount` (input).
    void add(ComponentId component, Molality total);
    /// Sorted by component, so that the order of adding leaves no trace.
    std::span<const Part> parts() const { return parts_; }

private:
    std::vector<Part> parts_;
};

}  // namespace carboy
