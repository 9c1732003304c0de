#pragma once

#include <initializer_list>
#include <optional>
#include <string>
#include <string_view>
#include <vector>

#include <nlohmann/json.hpp>

#include "carboy/constants_file.h"

namespace carboy {

/// A place in a constants document: the value, its JSON path, and where to note what is wrong with it. Every getter
/// notes a fault and gives something harmless instead of stopping, so that a user learns of all faults at once.
class DocumentNode {
public:
    DocumentNode(const nlohmann::json& value, std::string path, std::vector<ConstantsFault>& faults)
        : value_(&value), path_(std::move(path)), faults_(&faults) {}

    const std::string& path() const { return path_; }
    void fault(std::string message, std::string help = {}) const {
        faults_->push_back({path_, std::move(message), std::move(help)});
    }

    /// True when it is an object whose keys are all among these; each fault is noted.
    bool is_object_with(std::initializer_list<const char*> keys) const;
    bool is_object() const { return value_->is_object(); }
    bool has(const char* key) const { return value_->is_object() && value_->contains(key); }
    DocumentNode at(const char* key) const { return {value_->at(key), path_ + "/" + key, *faults_}; }

    /// Elements of an array, or the values of an object with their keys.
    std::vector<DocumentNode> elements() const;
    std::vector<std::pair<std::string, DocumentNode>> members() const;

    /// Text of this node; empty and a fault when it is something else or empty.
    std::string text() const;
    double number(double lowest, double highest) const;
    bool boolean() const;
    bool is_null() const { return value_->is_null(); }
    bool is_number() const { return value_->is_number(); }

    /// The same for a member; a missing one is a fault where it is required.
    std::string required_text(const char* key) const;
    std::string optional_text(const char* key) const;
    std::vector<std::string> optional_texts(const char* key) const;

private:
    const nlohmann::json* value_;
    std::string path_;
    std::vector<ConstantsFault>* faults_;
};

}  // namespace carboy
