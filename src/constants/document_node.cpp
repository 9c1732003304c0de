#include "constants/document_node.h"

#include <algorithm>
#include <cmath>

#include <fmt/format.h>
#include <fmt/ranges.h>

namespace carboy {

namespace {

/// The known key that the typed one was meant to be, when one differs by a letter or two.
std::string nearest_key(std::string_view typed, std::initializer_list<const char*> known) {
    std::string best;
    std::size_t best_distance = 3;
    for (const std::string_view word : known) {
        std::vector<std::size_t> row(word.size() + 1);
        for (std::size_t j = 0; j < row.size(); ++j) {
            row[j] = j;
        }
        for (std::size_t i = 1; i <= typed.size(); ++i) {
            std::size_t diagonal = row[0];
            row[0] = i;
            for (std::size_t j = 1; j <= word.size(); ++j) {
                const std::size_t replace = diagonal + (typed[i - 1] == word[j - 1] ? 0 : 1);
                diagonal = row[j];
                row[j] = std::min({row[j] + 1, row[j - 1] + 1, replace});
            }
        }
        if (row.back() < best_distance) {
            best_distance = row.back();
            best = word;
        }
    }
    return best;
}

}  // namespace

bool DocumentNode::is_object_with(std::initializer_list<const char*> keys) const {
    if (!value_->is_object()) {
        fault("an object is expected here");
        return false;
    }
    for (const auto& [key, value] : value_->items()) {
        if (std::none_of(keys.begin(), keys.end(), [&k = key](const char* known) { return k == known; })) {
            const std::string near = nearest_key(key, keys);
            fault(fmt::format("the key '{}' is not known here", key),
                  near.empty() ? fmt::format("known keys: {}", fmt::join(keys, ", "))
                               : fmt::format("did you mean '{}'?", near));
        }
    }
    return true;
}

std::vector<DocumentNode> DocumentNode::elements() const {
    std::vector<DocumentNode> nodes;
    if (!value_->is_array()) {
        fault("an array is expected here");
        return nodes;
    }
    for (std::size_t i = 0; i < value_->size(); ++i) {
        nodes.emplace_back((*value_)[i], fmt::format("{}/{}", path_, i), *faults_);
    }
    return nodes;
}

std::vector<std::pair<std::string, DocumentNode>> DocumentNode::members() const {
    std::vector<std::pair<std::string, DocumentNode>> nodes;
    if (!value_->is_object()) {
        fault("an object is expected here");
        return nodes;
    }
    for (const auto& [key, value] : value_->items()) {
        nodes.emplace_back(key, DocumentNode(value, path_ + "/" + key, *faults_));
    }
    return nodes;
}

std::string DocumentNode::text() const {
    if (!value_->is_string()) {
        fault("text in quotes is expected here");
        return {};
    }
    auto content = value_->get<std::string>();
    if (content.empty()) {
        fault("the text is empty");
    }
    if (std::any_of(content.begin(), content.end(), [](char c) { return static_cast<unsigned char>(c) < 0x20; })) {
        fault("the text holds a control character", "write it on one line");
    }
    return content;
}

double DocumentNode::number(double lowest, double highest) const {
    if (!value_->is_number()) {
        fault("a number is expected here");
        return lowest;
    }
    const double content = value_->get<double>();
    if (!std::isfinite(content) || content < lowest || content > highest) {
        fault(fmt::format("{:g} is outside {:g} to {:g}", content, lowest, highest));
        return lowest;
    }
    return content;
}

bool DocumentNode::boolean() const {
    if (!value_->is_boolean()) {
        fault("true or false is expected here");
        return false;
    }
    return value_->get<bool>();
}

std::string DocumentNode::required_text(const char* key) const {
    if (!has(key)) {
        fault(fmt::format("'{}' is missing", key));
        return {};
    }
    return at(key).text();
}

std::string DocumentNode::optional_text(const char* key) const {
    if (!has(key)) {
        return {};
    }
    const DocumentNode node = at(key);
    // An empty note is harmless.
    return node.value_->is_string() && node.value_->get_ref<const std::string&>().empty() ? std::string() : node.text();
}

std::vector<std::string> DocumentNode::optional_texts(const char* key) const {
    std::vector<std::string> texts;
    if (has(key)) {
        for (const DocumentNode& node : at(key).elements()) {
            texts.push_back(node.text());
        }
    }
    return texts;
}

}  // namespace carboy
