#!/usr/bin/env python3
"""The rules of the house, read off the sources: arrows point one way, each library has one user, pure rooms stay
pure, functions fit a page, SQL is never formatted, nothing forbidden is named."""
import os
import re
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import ran, source  # noqa: E402

ROOMS = ["base", "plant", "frame", "intake", "book", "process", "permit", "report", "command"]
MAY_USE = {
    "base": set(),
    "plant": {"base"},
    "frame": {"base", "plant"},
    "intake": {"base", "plant", "frame"},
    "book": {"base", "plant", "frame"},
    "process": {"base", "plant", "frame"},
    "permit": {"base", "plant", "frame", "process"},
    "report": {"base", "plant", "frame", "process", "permit"},
    "command": set(ROOMS),
}
ONLY_IN = {
    "sqlite3.h": r"src/book/",
    "csv.h": r"src/intake/",
    "xlsxwriter.h": r"src/report/workbook",
    "gmp.h": r"src/base/",
    "nettle/": r"src/base/",
    "utf8proc.h": r"src/base/",
    "cjson/": r"src/report/",
    "histedit.h": r"src/command/bench_line",
}
PAGE = 60  # lines of one function, braces included
FORBIDDEN_CALLS = re.compile(r"\b(strcpy|strcat|sprintf|vsprintf|strtok|gets|atof|atoi|strtod|setlocale|localtime)\s*\(")
FILES_OR_SQL = re.compile(r"\b(fopen|open|opendir|fread|fwrite|read|write|stat|unlink|rename|getenv|time|clock_\w+)\s*\("
                          r"|sqlite|\"\s*(SELECT|INSERT|UPDATE|DELETE)\b|#include <(stdio|fcntl|unistd|sys/)")
FORMATTED_SQL = re.compile(r"sqlite3_v?(m|sn)printf|\"(SELECT|INSERT|UPDATE|DELETE)\b[^\"]*%")


class House:
    def __init__(self):
        self.checks = 0
        self.broken = []

    def check(self, good, told):
        self.checks += 1
        if not good:
            self.broken.append(told)


def sources():
    root = source()
    for folder, _, names in os.walk(os.path.join(root, "src")):
        for name in sorted(names):
            if name.endswith((".c", ".h")):
                path = os.path.join(folder, name)
                with open(path, encoding="utf-8") as f:
                    yield os.path.relpath(path, root), f.read()


def room_of(path):
    parts = path.split("/")
    return parts[1] if len(parts) > 2 else "main"


def check_includes(house, path, text):
    room = room_of(path)
    for line, include in enumerate(text.splitlines(), 1):
        match = re.match(r'\s*#\s*include\s*[<"]([^>"]+)[>"]', include)
        if not match:
            continue
        header = match.group(1)
        for library, where in ONLY_IN.items():
            if header.startswith(library) or header == library:
                house.check(re.match(where, path), f"{path}:{line}: {header} belongs to {where} alone")
        parts = header.split("/")
        if len(parts) == 2 and parts[0] in ROOMS and include.count('"') == 2:
            other = parts[0]
            if room == "main":
                house.check(header == "command/command.h" or other == "base", f"{path}:{line}: main knows the command table alone")
            elif other != room:
                house.check(other in MAY_USE[room], f"{path}:{line}: {room} may not look at {other}")
                house.check(header in (f"{other}/{other}.h", "base/poison.h"), f"{path}:{line}: {header} is private to {other}")


def check_last_include(house, path, text):
    if not path.endswith(".c") or path == "src/base/clock.c":
        return
    includes = re.findall(r'^\s*#\s*include\s*[<"]([^>"]+\.h)[>"]', text, re.M)
    house.check(includes and includes[-1] == "base/poison.h", f"{path}: its last header is not base/poison.h")


def without_comments(text):
    return re.sub(r"/\*.*?\*/", lambda m: "\n" * m.group(0).count("\n"), text, flags=re.S)


def check_words(house, path, text):
    bare = without_comments(text)
    if path != "src/base/poison.h":
        bad = FORBIDDEN_CALLS.search(bare)
        house.check(not bad, f"{path}: calls {bad.group(1) if bad else ''}")
    bad = FORMATTED_SQL.search(bare)
    house.check(not bad, f"{path}: formats SQL")
    if room_of(path) in ("process", "permit"):
        bad = FILES_OR_SQL.search(bare)
        house.check(not bad, f"{path}: a pure room touches the world: {bad.group(0) if bad else ''}")


def check_functions(house, path, text):
    if not path.endswith(".c"):
        return
    start = None
    for line, content in enumerate(text.splitlines(), 1):
        if content == "{":
            start = line
        elif content == "}" and start:
            house.check(line - start + 1 <= PAGE, f"{path}:{start}: a function of {line - start + 1} lines; a page is {PAGE}")
            start = None


def check_globals(house, path, text):
    """No state outside functions but const tables."""
    bare = without_comments(text)
    depth = 0
    for line, content in enumerate(bare.splitlines(), 1):
        if depth == 0 and re.match(r"^(static\s+)?(?!const\b|typedef|struct \w+ \{|struct \w+;|enum|extern|__extension__ typedef|#)[a-z_][\w \*]*\w(\[.*\])?\s*(=|;)", content) \
                and "const" not in content and "(" not in content:
            house.check(False, f"{path}:{line}: a global that is no const table: {content.strip()}")
        depth += content.count("{") - content.count("}")
    house.check(True, path)


def check_headers(house):
    root = source()
    for room in ROOMS:
        folder = os.path.join(root, "src", room)
        house.check(os.path.exists(os.path.join(folder, f"{room}.h")), f"src/{room} has no public header {room}.h")
        with open(os.path.join(root, "src", room, f"{room}.h"), encoding="utf-8") as f:
            house.check(f.read().startswith("/*"), f"src/{room}/{room}.h does not open with what lives there")


def check_top(house):
    allowed = {"README.md", "DEVELOPERS.md", "CMakeLists.txt", "CMakePresets.json", "CHANGELOG.md", "LICENSE", "src", "schema",
               "tests", "fixtures", "reports", "man", "build"}
    for name in os.listdir(source()):
        house.check(name in allowed or name.startswith("."), f"the top level holds {name}")


def main():
    house = House()
    for path, text in sources():
        check_includes(house, path, text)
        check_last_include(house, path, text)
        check_words(house, path, text)
        check_functions(house, path, text)
        check_globals(house, path, text)
        for line, content in enumerate(text.splitlines(), 1):
            if len(content) > 100 and "http" not in content:
                house.check(False, f"{path}:{line}: {len(content)} columns; 100 at most")
    check_headers(house)
    check_top(house)
    for told in house.broken:
        print(told)
    return ran(house.checks, len(house.broken))


if __name__ == "__main__":
    sys.exit(main())
