#pragma once

#include <cstdint>
#include <optional>

#include "carboy/constants.h"
#include "carboy/selection.h"

namespace carboy {

/// The fact by which a system will not do for the job, before anything is computed.
std::optional<Excluded> excluded_by_fact(const Table& table, const Job& job, std::uint16_t system);

/// Adds what the table says of the system, what it cannot confirm, and what most work would rather avoid.
void add_facts(Standing& standing, const Table& table, const Job& job);

/// Says why it stands where it does.
void add_reason(Standing& standing, const Job& job);

}  // namespace carboy
