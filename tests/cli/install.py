#!/usr/bin/env python3
"""The installed program runs from anywhere: it needs no file of the checkout, and its pages and completions are in place."""
import glob
import os
import shutil
import subprocess
import sys
import tempfile

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import ran, source  # noqa: E402


def main():
    build = os.environ["WEIRBOOK_BUILD"]
    checks = []
    with tempfile.TemporaryDirectory() as folder:
        prefix = os.path.join(folder, "usr")
        result = subprocess.run(["cmake", "--install", build, "--prefix", prefix], capture_output=True, text=True)
        checks.append((result.returncode == 0, result.stderr))
        program = os.path.join(prefix, "bin", "weirbook")
        elsewhere = os.path.join(folder, "elsewhere")
        os.mkdir(elsewhere)
        for words in (["plant", "--example", "start"], ["new", "start.book", "start"], ["check"], ["formula", "mass-load"]):
            result = subprocess.run([program, *words], cwd=elsewhere, env={"PATH": "/usr/bin:/bin"}, capture_output=True, text=True)
            checks.append((result.returncode == 0 and result.stdout, f"{words}: {result.stderr}"))
        with open(program, "rb") as f:
            checks.append((os.fsencode(os.path.join(source(), "fixtures")) not in f.read(), "the program holds a path of the checkout"))
        for section in (1, 5, 7):
            wanted = {os.path.basename(p) for p in glob.glob(os.path.join(source(), "man", f"*.{section}"))}
            found = set(os.listdir(os.path.join(prefix, "share", "man", f"man{section}")))
            checks.append((wanted and wanted == found, f"manual section {section}: {wanted ^ found}"))
        for path, shell in (("bash-completion/completions/weirbook", "bash"), ("zsh/vendor-completions/_weirbook", "zsh"),
                            ("fish/vendor_completions.d/weirbook.fish", "fish")):
            full = os.path.join(prefix, "share", path)
            checks.append((os.path.getsize(full) > 100, f"no completion for {shell}"))
            if shutil.which(shell):
                checks.append((subprocess.run([shell, "-n", full]).returncode == 0, f"{shell} cannot read its completion"))
    failed = [told for good, told in checks if not good]
    for told in failed:
        print(told)
    return ran(len(checks), len(failed))


if __name__ == "__main__":
    sys.exit(main())
