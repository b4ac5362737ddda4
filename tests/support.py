"""What the test scripts share: where things are, and how the end of a run is told (tests/run adds the counts up)."""
import os
import sys


def source():
    return os.environ.get("WEIRBOOK_SOURCE") or os.path.dirname(os.path.dirname(os.path.abspath(__file__)))


def program():
    return os.environ.get("WEIRBOOK_PROGRAM") or os.path.join(source(), "build", "dev", "weirbook")


def shared(path):
    """A file or folder of the sets beside the checkout, or None where they are not."""
    root = os.environ.get("WEIRBOOK_SHARED") or os.path.join(source(), "..", "shared")
    full = os.path.normpath(os.path.join(root, path))
    return full if os.path.exists(full) else None


def absent(what):
    """Skipped with a visible line; in continuous integration its absence is a failure."""
    if os.environ.get("WEIRBOOK_CI"):
        print(f"FAILED: {what}: not found, and required here")
        return 1
    print(f"SKIPPED: {what}: not found beside the checkout")
    return 77


def ran(count, failed, told=""):
    """The last line of a test script, in cmocka's form so that all are counted alike."""
    if count == 0:
        print("FAILED: nothing was compared")
        return 1
    if told:
        print(told)
    print(f"[==========] {count} test(s) run.")
    if failed:
        print(f"[  FAILED  ] {failed} test(s)")
        return 1
    print(f"[  PASSED  ] {count} test(s).")
    return 0


if __name__ == "__main__":
    sys.exit("not a test")
