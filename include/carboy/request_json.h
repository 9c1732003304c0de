#pragma once

#include <string_view>

#include "carboy/constants.h"
#include "carboy/request.h"

namespace carboy {

/// Reads one request as JSON: either a label line, or buffers, additives and target spelt out
/// (data/schema/request.schema.json). Unknown keys, doubled keys, wrong types and unreadable quantities are Errors of
/// kind `input` that name the place by its keys (`request, label, column 7`) and carry the request's id.
Request read_request(std::string_view json_text, const Table& table, std::string_view where = "request");

/// The request for a label line; the label's own temperature and ionic strength are taken over.
Request request_from_label(std::string_view label, const Table& table, std::string_view where = "label");

}  // namespace carboy
