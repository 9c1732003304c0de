#pragma once

#include <string>

#include <nlohmann/json.hpp>

#include "carboy/booking.h"
#include "carboy/shelf_file.h"

namespace carboy {

/// Every fault of a shelf file, or the list of what it holds with what to look after.
std::string shelf_check_text(const ShelfReading& reading, std::string_view file, bool colour);
nlohmann::ordered_json shelf_check_json(const ShelfReading& reading, std::string_view file);

/// What a booking took or put back.
std::string booking_text(const Booked& booked, std::string_view file, bool undone);
nlohmann::ordered_json booking_json(const Booked& booked, std::string_view file, bool undone);

}  // namespace carboy
