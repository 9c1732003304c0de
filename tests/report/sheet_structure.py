"""Reads a recipe sheet with html.parser and holds its structure against what a screen reader needs.

usage: sheet_structure.py < sheet.html
Prints each fault; exit status 1 when there is one.
"""

import html.parser
import sys

VOID = {"meta", "input", "br", "img", "link", "hr"}
faults = []


class Page(html.parser.HTMLParser):
    def __init__(self):
        super().__init__()
        self.open = []
        self.counts = {}
        self.ids = []
        self.labelled = []
        self.fields = []
        self.headings = []
        self.sections = []
        self.tables = []
        self.text = {}

    def handle_startendtag(self, tag, attrs):
        self.handle_starttag(tag, attrs)

    def handle_starttag(self, tag, attrs):
        attributes = dict(attrs)
        self.counts[tag] = self.counts.get(tag, 0) + 1
        if "id" in attributes:
            self.ids.append(attributes["id"])
        for name in ("src", "href", "action", "srcset", "onload", "onclick", "style"):
            if name in attributes:
                faults.append(f"{tag} has {name}: the page is to need nothing from elsewhere and no script")
        if tag == "label":
            self.labelled.append(attributes.get("for"))
        if tag == "input":
            self.fields.append(attributes)
        if tag == "section":
            self.sections.append(attributes.get("aria-labelledby"))
        if tag == "table":
            self.tables.append({"caption": False, "rows": []})
        if tag == "caption":
            self.tables[-1]["caption"] = True
        if tag == "tr":
            self.tables[-1]["rows"].append(0)
        if tag in ("td", "th"):
            self.tables[-1]["rows"][-1] += 1
        if tag == "th" and attributes.get("scope") not in ("col", "row"):
            faults.append("a th without scope")
        if tag in ("h1", "h2", "h3"):
            self.headings.append(int(tag[1]))
        if tag == "li" and self.open[-1] not in ("ul", "ol"):
            faults.append("a list item outside a list")
        if tag not in VOID:
            self.open.append(tag)

    def handle_endtag(self, tag):
        if not self.open or self.open[-1] != tag:
            faults.append(f"</{tag}> closes {self.open[-1:]}")
        else:
            self.open.pop()

    def handle_data(self, data):
        if self.open:
            self.text[self.open[-1]] = self.text.get(self.open[-1], "") + data


def need(condition, words):
    if not condition:
        faults.append(words)


source = sys.stdin.read()
page = Page()
page.feed(source)
page.close()
need(not page.open, f"left open: {page.open}")
need(source.startswith("<!DOCTYPE html>"), "no doctype")
for tag in ("html", "title", "header", "main", "footer", "h1", "ol"):
    need(page.counts.get(tag) == 1, f"{page.counts.get(tag, 0)} of <{tag}> where there should be one")
need("script" not in page.counts, "a script")
need("url(" not in source and "@import" not in source, "the style sheet fetches something")
need(len(page.ids) == len(set(page.ids)), "an id twice")
need(page.headings[:1] == [1] and set(page.headings[1:]) == {2}, f"headings out of order: {page.headings}")
need(len(page.sections) >= 6 and all(s in page.ids for s in page.sections), "a section without its heading")
for field in page.fields:
    need(bool(field.get("aria-label")) or field.get("id") in page.labelled, f"a blank without a name: {field}")
need(all(name in page.ids for name in page.labelled), "a label for nothing")
need(len(page.tables) >= 2, "the tables are missing")
for table in page.tables:
    need(table["caption"], "a table without caption")
    need(len(set(table["rows"])) == 1, f"rows of different length: {table['rows']}")
need(page.counts.get("li", 0) >= 6, "hardly any list items")
need(sum(field.get("type") == "checkbox" for field in page.fields) >= 3, "no check boxes for the steps")
for words in ("Made by", "Checked by", "Made on", "Balance", "Meter", "Calibrated with standards", "Slope, %", "Store at", "Use by"):
    need(words in page.text.get("label", ""), f"no blank for {words}")
for fault in faults:
    print(fault)
sys.exit(1 if faults else 0)
