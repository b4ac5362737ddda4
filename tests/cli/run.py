#!/usr/bin/env python3
"""Commands beside what they should print. A case is NAME.sh with, beside it, NAME.sh.stdout, NAME.sh.stderr (absent: nothing) and NAME.sh.exit
(absent: 0). They guard wording and status; figures are tested against their sources elsewhere.

A script runs in an empty folder with $weirbook, $fixtures, and the functions of common.sh. What a machine decides (its
folder, its login, today) is put into {braces}. `run.py --rewrite` writes the files anew: read the difference.
"""
import os
import re
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran, source  # noqa: E402

HERE = os.path.dirname(os.path.abspath(__file__))


def scripts():
    for folder, _, names in sorted(os.walk(HERE)):
        for name in sorted(names):
            if name.endswith(".sh") and name != "common.sh":
                yield os.path.join(folder, name)


def tidy(text, folder):
    text = text.replace(os.path.realpath(folder), "{folder}").replace(folder, "{folder}")
    text = text.replace(os.path.join(source(), "fixtures"), "{fixtures}")
    return re.sub(r"\b[0-9a-f]{64}\b", "{head}", text)


def run(script, folder):
    environment = dict(os.environ, weirbook=program(), fixtures=os.path.join(source(), "fixtures"), HOME=folder, LC_ALL="C.UTF-8", TZ="UTC",
                       common=os.path.join(HERE, "common.sh"))
    environment.pop("WEIRBOOK", None)
    result = subprocess.run(["sh", "-c", f'. "$common"; . "{script}"'], cwd=folder, env=environment, capture_output=True, timeout=120)
    return {
        "exit": f"{result.returncode}\n",
        "stdout": tidy(result.stdout.decode("utf-8", "backslashreplace"), folder),
        "stderr": tidy(result.stderr.decode("utf-8", "backslashreplace"), folder),
    }


def expected(script, part):
    path = f"{script}.{part}"
    if not os.path.exists(path):
        return "0\n" if part == "exit" else ""
    with open(path, encoding="utf-8") as f:
        return f.read()


def rewrite(script, got):
    for part, text in got.items():
        path = f"{script}.{part}"
        if text == ("0\n" if part == "exit" else ""):
            if os.path.exists(path):
                os.unlink(path)
        else:
            with open(path, "w", encoding="utf-8") as f:
                f.write(text)


def main():
    anew = "--rewrite" in sys.argv
    wanted = [a for a in sys.argv[1:] if not a.startswith("-")]
    count = failed = 0
    for script in scripts():
        name = os.path.relpath(script, HERE)
        if wanted and not any(w in name for w in wanted):
            continue
        count += 1
        with tempfile.TemporaryDirectory() as folder:
            got = run(script, folder)
        if anew:
            rewrite(script, got)
            continue
        wrong = [part for part in got if got[part] != expected(script, part)]
        for part in wrong:
            print(f"{name}: {part} is\n{got[part]}--- expected\n{expected(script, part)}---")
        failed += bool(wrong)
    return ran(count, failed)


if __name__ == "__main__":
    sys.exit(main())
