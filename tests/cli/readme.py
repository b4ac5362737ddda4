#!/usr/bin/env python3
"""Runs the commands that README.md shows and compares what they print with what it shows.

A block that opens with ```console holds commands ("$ ...") and their output; a line of "..." stands for any lines. All blocks run in one copy
of fixtures/marrow-bend, in order. `readme.py --rewrite` puts the output of now into the blocks that do not elide: read the difference.
"""
import datetime
import os
import re
import shutil
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

README = os.path.join(source(), "README.md")
BLOCK = re.compile(r"^```console\n(.*?)^```$", re.M | re.S)


def steps(block):
    """[(command, expected output)] of one block."""
    found = []
    for line in block.splitlines():
        if line.startswith("$ "):
            found.append([line[2:], []])
        elif found:
            if found[-1][0].endswith("\\") and line.startswith("    "):
                found[-1][0] += "\n" + line
            else:
                found[-1][1].append(line)
    return [(command, output) for command, output in found]


def run(command, folder):
    tools = os.path.join(folder, ".bin")
    environment = dict(os.environ, PATH=f"{tools}:{os.environ['PATH']}", LC_ALL="C.UTF-8", TZ="UTC", HOME=folder)
    result = subprocess.run(["sh", "-c", command], cwd=folder, env=environment, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True,
                            timeout=120)
    today = datetime.datetime.now(datetime.timezone.utc).strftime("%Y-%m-%d")
    return result.stdout.replace(f"after today, {today}", "after today, 2026-12-01").splitlines()


def matches(expected, got):
    pattern = "".join("(?:.*\n)*" if line.strip() == "..." else re.escape(line) + "\n" for line in expected)
    return re.fullmatch(pattern, "".join(line + "\n" for line in got)) is not None


def main():
    anew = "--rewrite" in sys.argv
    with open(README, encoding="utf-8") as f:
        text = f.read()
    count = failed = 0
    with tempfile.TemporaryDirectory() as folder:
        os.mkdir(os.path.join(folder, ".bin"))
        os.symlink(program(), os.path.join(folder, ".bin", "weirbook"))
        for name in ("plant", "readings", "maps"):
            shutil.copytree(os.path.join(source(), "fixtures", "marrow-bend", name), os.path.join(folder, name))
        shutil.copy(os.path.join(source(), "fixtures", "marrow-bend", "bench-2025-03-20.csv"), folder)
        blocks = []
        for block in BLOCK.findall(text):
            lines = []
            for command, expected in steps(block):
                got = run(command, folder)
                count += 1
                if not matches(expected, got):
                    failed += 1
                    print(f"$ {command}\n" + "\n".join(got) + "\n--- README.md shows\n" + "\n".join(expected) + "\n---")
                elided = any(line.strip() == "..." for line in expected)
                lines += [f"$ {command}"] + (expected if elided else got)
            blocks.append("".join(line + "\n" for line in lines))
        if anew:
            made = iter(blocks)
            with open(README, "w", encoding="utf-8") as f:
                f.write(BLOCK.sub(lambda _: "```console\n" + next(made) + "```", text))
    return ran(count, 0 if anew else failed)


if __name__ == "__main__":
    sys.exit(main())
