#!/usr/bin/env python3
"""Bench sheets at a terminal: a whole sheet typed, entries taken back, and what is left after a ^C, a hang-up, a kill and a power cut's torn row.
The program runs behind a pseudo terminal; what it says is waited for, and what the book then holds is read with sqlite3.

The BOD of the sheet below is worked by hand from Standard Methods 5210 B: depletion over the share of sample in the bottle,
(8.9 - 5.3) / (30 / 300) = 36 and (8.9 - 1.9) / (60 / 300) = 35, mean 35.5 mg/L.
"""
import contextlib
import csv
import fcntl
import os
import pty
import select
import signal
import sqlite3
import struct
import subprocess
import sys
import tempfile
import termios
import time

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), ".."))
from support import program, ran  # noqa: E402

PLANT = {
    "plant.csv": "field,value\nname,Small Works\npermit,XX0000001\nreceiving_water,Invented Creek\nunits,us\nsince,2025-01-01\n",
    "points.csv": "point,name,role,outfall\nINF,Raw influent,influent,\nAER,Aeration basin,aeration,\nEFF,Final effluent,effluent,001\n",
    "limits.csv": "outfall,point,parameter,basis,statistic,bound,limit,unit,samples\n001,EFF,BOD5,concentration,monthly-average,max,30,mg/L,1/week\n",
    "round.csv": "point,parameter,sample\nINF,PH,\nAER,DO,\nEFF,PH,\nEFF,TEMP,\n",
}
WAIT = 20  # seconds: for a slow machine, never waited out on a good one

HEAD = ["2025-03-12", "", "08:00", "lab", ""]  # date, the offered point, time, analyst, sample
BOTTLES = ["8.9", "5.3", "30", "", "", "8.9", "1.9", "60", "", ""]
BOD_ROWS = [("", "analyst", "lab"), ("1", "initial_do", "8.9"), ("1", "final_do", "5.3"), ("1", "sample_volume", "30"),
            ("1", "bottle_volume", "300"), ("2", "initial_do", "8.9"), ("2", "final_do", "1.9"), ("2", "sample_volume", "60"),
            ("2", "bottle_volume", "300")]


class Checks:
    def __init__(self):
        self.count = 0
        self.failed = 0

    def same(self, what, got, expected):
        self.count += 1
        if got != expected:
            self.failed += 1
            print(f"{what}: got\n  {got!r}\nexpected\n  {expected!r}")

    def that(self, what, good):
        self.same(what, bool(good), True)


class Terminal:
    """The program behind a pseudo terminal of 100 columns."""

    def __init__(self, folder, *words):
        self.pid, self.fd = pty.fork()
        if self.pid == 0:
            os.chdir(folder)
            os.environ.update(TERM="xterm", LC_ALL="C.UTF-8", TZ="UTC", HOME=folder)
            os.environ.pop("WEIRBOOK", None)
            os.execv(program(), [program(), *words])
        fcntl.ioctl(self.fd, termios.TIOCSWINSZ, struct.pack("HHHH", 40, 100, 0, 0))
        self.said = ""
        self.seen = 0

    def read(self, seconds):
        ready, _, _ = select.select([self.fd], [], [], seconds)
        if not ready:
            return False
        try:
            data = os.read(self.fd, 65536)
        except OSError:
            return False
        self.said += data.decode("utf-8", "replace")
        return bool(data)

    def expect(self, text):
        """Waits until `text` is said, after what was waited for before."""
        end = time.monotonic() + WAIT
        while text not in self.said[self.seen:]:
            if time.monotonic() > end or not (self.read(0.2) or self.alive()):
                raise AssertionError(f"'{text}' was not said, but\n{self.said[self.seen:]}")
        self.seen = self.said.index(text, self.seen) + len(text)

    def alive(self):
        """Whether it still runs; its end is not taken from wait()."""
        result = os.waitid(os.P_PID, self.pid, os.WEXITED | os.WNOHANG | os.WNOWAIT)
        return result is None

    def type(self, *lines):
        """Each line after the prompt before it."""
        for line in lines:
            self.expect(": ")
            os.write(self.fd, line.encode() + b"\r")
            self.expect("\r\n")

    def press(self, keys):
        self.expect(": ")
        os.write(self.fd, keys)

    def line_mode(self):
        """Whether the terminal edits lines itself, as it did before."""
        return bool(termios.tcgetattr(self.fd)[3] & termios.ICANON) and bool(termios.tcgetattr(self.fd)[3] & termios.ECHO)

    def wait(self):
        end = time.monotonic() + WAIT
        while self.alive() and time.monotonic() < end:
            self.read(0.1)
        if self.alive():
            os.kill(self.pid, signal.SIGKILL)
        while self.read(0):
            pass
        _, status = os.waitpid(self.pid, 0)
        return os.waitstatus_to_exitcode(status)

    def close(self):
        with contextlib.suppress(OSError):
            os.close(self.fd)


def call(folder, *words, said=None):
    environment = dict(os.environ, LC_ALL="C.UTF-8", TZ="UTC", HOME=folder)
    environment.pop("WEIRBOOK", None)
    return subprocess.run([program(), *words], cwd=folder, env=environment, input=said, capture_output=True, text=True, timeout=120)


def make_book(folder):
    os.mkdir(os.path.join(folder, "plant"))
    for name, text in PLANT.items():
        with open(os.path.join(folder, "plant", name), "w", encoding="utf-8") as f:
            f.write(text)
    result = call(folder, "new", "small.book", "plant")
    assert result.returncode == 0, result.stderr


def ask(folder, sql):
    with contextlib.closing(sqlite3.connect(f"file:{folder}/small.book?mode=ro", uri=True)) as book:
        return book.execute(sql).fetchall()


def readings(folder):
    return ask(folder, "SELECT date, point, parameter, value FROM readings ORDER BY point, parameter")


def unfinished(folder, sheet):
    """(run, argument, value) of each row on the disk, or None."""
    path = os.path.join(folder, f"small.book-bench-{sheet}.csv")
    if not os.path.exists(path):
        return None
    with open(path, newline="", encoding="utf-8") as f:
        return [(r["run"], r["argument"], r["value"]) for r in csv.DictReader(f)]


def finish_bod(terminal):
    """From the third bottle on: no more bottles, method, note, points, blanks, seed, standards; then yes."""
    terminal.type("", "", "", "", "", "", "")
    terminal.expect("35.5 mg/L")
    terminal.type("")
    terminal.expect("1 accepted")


# ---- the cases ------------------------------------------------------------------------------------------------

def a_whole_sheet_is_typed_and_entered(checks, folder):
    t = Terminal(folder, "bench", "bod")
    t.expect("date sampled [")
    t.type(*HEAD, *BOTTLES)
    finish_bod(t)
    checks.same("whole sheet: status", t.wait(), 0)
    checks.that("whole sheet: the terminal is as it was", t.line_mode())
    t.close()
    checks.same("whole sheet: reading", readings(folder), [("2025-03-12", "EFF", "BOD5", "35.5")])
    checks.same("whole sheet: nothing unfinished", unfinished(folder, "bod"), None)
    batch = ask(folder, "SELECT file FROM batches ORDER BY batch DESC LIMIT 1")[0][0]
    checks.that(f"whole sheet: name of its batch: {batch}", batch.startswith("bench bod at the terminal, "))
    raw = ask(folder, "SELECT run, argument, value FROM bench_values")
    checks.same("whole sheet: raw values", [tuple(r) for r in raw], BOD_ROWS)


def entries_are_taken_back_across_runs(checks, folder):
    t = Terminal(folder, "bench", "bod")
    t.type(*HEAD, "8.8", "5.0", "30", "", "")  # bottle 1 with two wrong values
    t.type("undo")                             # bottle 2 is not begun: back into bottle 1
    t.expect("taken back: bottle 1: volume of the bottle")
    t.type("undo", "undo")
    t.expect("taken back: bottle 1: sample in the bottle")
    t.type("undo")
    t.expect("taken back: bottle 1: dissolved oxygen after five days")
    t.type("undo")
    t.expect("taken back: bottle 1: dissolved oxygen on the first day")
    t.expect("on the first day, mg/L (empty")  # asked again: the file has followed
    checks.same("undo: rows on the disk", unfinished(folder, "bod"), BOD_ROWS[:1])
    t.type(*BOTTLES)
    finish_bod(t)
    checks.same("undo: status", t.wait(), 0)
    t.close()
    checks.same("undo: reading", readings(folder), [("2025-03-12", "EFF", "BOD5", "35.5")])
    checks.same("undo: raw values", [tuple(r) for r in ask(folder, "SELECT run, argument, value FROM bench_values")], BOD_ROWS)


def go_on(checks, folder, what, rows):
    """Resumes after three values of the first bottle and brings the sheet to its end."""
    checks.same(f"{what}: rows on the disk", unfinished(folder, "bod"), rows)
    checks.same(f"{what}: the book holds nothing", readings(folder), [])
    t = Terminal(folder, "bench", "bod")
    t.expect("An unfinished sheet of ")
    t.expect(f"holds {len(rows)} values")
    t.type("look")
    t.expect("final_do: 5.3")
    t.type("go on")
    t.type(*BOTTLES[2:])
    finish_bod(t)
    checks.same(f"{what}: status of the second", t.wait(), 0)
    t.close()
    checks.same(f"{what}: reading", readings(folder), [("2025-03-12", "EFF", "BOD5", "35.5")])
    checks.same(f"{what}: raw values", [tuple(r) for r in ask(folder, "SELECT run, argument, value FROM bench_values")], BOD_ROWS)
    checks.same(f"{what}: nothing unfinished", unfinished(folder, "bod"), None)


def begun(folder):
    t = Terminal(folder, "bench", "bod")
    t.type(*HEAD, "8.9", "5.3")
    t.expect("sample in the bottle")
    t.expect(": ")
    return t


def a_control_c_keeps_the_sheet(checks, folder):
    t = begun(folder)
    os.write(t.fd, b"4\x03")  # in the middle of a value
    checks.same("^C: status", t.wait(), 1)
    checks.that("^C: says where the sheet is", "small.book-bench-bod.csv" in t.said)
    checks.that("^C: the terminal is as it was", t.line_mode())
    t.close()
    go_on(checks, folder, "^C", BOD_ROWS[:3])


def a_hang_up_keeps_the_sheet(checks, folder):
    t = begun(folder)
    t.close()
    end = time.monotonic() + WAIT
    while t.alive() and time.monotonic() < end:
        time.sleep(0.02)
    checks.that("hang-up: it ends by itself", not t.alive())
    if t.alive():
        os.kill(t.pid, signal.SIGKILL)
    os.waitpid(t.pid, 0)
    go_on(checks, folder, "hang-up", BOD_ROWS[:3])


def a_kill_keeps_the_sheet(checks, folder):
    t = begun(folder)
    os.kill(t.pid, signal.SIGKILL)
    checks.same("kill: status", t.wait(), -signal.SIGKILL)
    t.close()
    go_on(checks, folder, "kill", BOD_ROWS[:3])


def a_termination_keeps_the_sheet(checks, folder):
    t = begun(folder)
    os.kill(t.pid, signal.SIGTERM)
    checks.same("SIGTERM: status", t.wait(), 1)
    checks.that("SIGTERM: the terminal is as it was", t.line_mode())
    t.close()
    go_on(checks, folder, "SIGTERM", BOD_ROWS[:3])


def a_torn_row_is_taken_off(checks, folder):
    t = begun(folder)
    os.kill(t.pid, signal.SIGKILL)
    t.wait()
    t.close()
    with open(os.path.join(folder, "small.book-bench-bod.csv"), "a", encoding="utf-8") as f:
        f.write("bod,2025-03-12,08:00,EFF,1,sample_vol")
    again = call(folder, "bench", "bod", said="quit\n")
    checks.same("torn row: status", again.returncode, 1)
    go_on(checks, folder, "torn row", BOD_ROWS[:3])


def a_sheet_is_thrown_away_but_not_deleted(checks, folder):
    for n in (1, 2):
        t = begun(folder)
        os.write(t.fd, b"quit\r")
        checks.same("thrown away: status of quit", t.wait(), 1)
        t.close()
        said = call(folder, "bench", "bod", said="throw away\nquit\n")
        checks.that("thrown away: says the new name", f"small.book-bench-bod-discarded-{n}.csv" in said.stdout)
        checks.same("thrown away: it is gone from its place", unfinished(folder, "bod"), None)
        checks.same("thrown away: it is kept", unfinished(folder, f"bod-discarded-{n}"), BOD_ROWS[:3])


def two_at_one_sheet_are_told(checks, folder):
    t = begun(folder)
    other = call(folder, "bench", "bod", said="go on\n")
    checks.same("two at one sheet: status", other.returncode, 1)
    checks.that(f"two at one sheet: told: {other.stderr}", "somebody is at this sheet now" in other.stderr)
    os.write(t.fd, b"quit\r")
    t.wait()
    t.close()
    checks.same("two at one sheet: rows on the disk", unfinished(folder, "bod"), BOD_ROWS[:3])


def a_value_out_of_bounds_is_typed_twice(checks, folder):
    t = Terminal(folder, "bench", "round")
    t.type("2025-03-12", "lab", "07:15")
    t.expect("INF PH, pH (0 to 14 pH)")
    t.type("72")
    t.expect("72 pH is outside 0 to 14 pH")
    t.expect("type it again to keep it")
    t.type("7.2")  # another value: nothing was kept
    t.expect("AER DO")
    t.type("55")
    t.expect("type it again to keep it")
    t.type("55")
    t.expect("EFF PH")
    t.type("")
    t.expect("EFF TEMP")
    t.type("57.2 degF")
    t.expect("enter into the book?")
    t.type("yes")
    t.expect("3 accepted")
    checks.same("round: status", t.wait(), 0)
    t.close()
    checks.same("round: readings", readings(folder), [("2025-03-12", "AER", "DO", "55"), ("2025-03-12", "EFF", "TEMP", "57.2"),
                                                      ("2025-03-12", "INF", "PH", "7.2")])
    again = call(folder, "bench", "round", said="2025-03-13\n\n\n7.3\ndone\n\n")
    checks.that("round: the last value is shown", "INF PH, pH (last 7.2 on 2025-03-12; 0 to 14 pH)" in again.stdout)
    checks.same("round: status of the second", again.returncode, 0)


def keys_are_edited_and_completed(checks, folder):
    t = Terminal(folder, "bench", "suspended-solids")
    t.type("2025-03-12")
    t.expect("point [EFF]")
    t.press(b"A\t\r")       # completes AER
    t.expect("time sampled")
    t.press(b"08:0x\x7f0\r")  # rubs the x out
    t.type("TSX")
    t.expect("no parameter 'TSX'; the nearest is 'TSS'")
    t.type("", "J\u00fcrgen", "", "0.1123", "0.1226", "", "20")  # parameter, analyst, sample; an ashed weight is left out
    t.type("done")
    t.expect("enter into the book?")
    t.type("no")
    checks.same("editing: status", t.wait(), 1)
    t.close()
    with open(os.path.join(folder, "small.book-bench-suspended-solids.csv"), newline="", encoding="utf-8") as f:
        rows = list(csv.DictReader(f))
    checks.same("editing: place of the rows", {(r["point"], r["time"]) for r in rows}, {("AER", "08:00")})
    checks.same("editing: letters beyond ASCII", [r["value"] for r in rows if r["argument"] == "analyst"], ["J\u00fcrgen"])


def a_pipe_is_asked_the_same(checks, folder):
    answers = HEAD + BOTTLES + [""] * 7
    first = call(folder, "bench", "bod", said="\n".join(answers[:9]) + "\n")
    checks.same("pipe: status at its end", first.returncode, 1)
    checks.that(f"pipe: says where the sheet is: {first.stderr}", "small.book-bench-bod.csv" in first.stderr)
    checks.that("pipe: the sheet is kept", unfinished(folder, "bod"))
    second = call(folder, "bench", "bod", said="\n".join(["go on", ""] + answers[9:] + [""]) + "\n")
    checks.same(f"pipe: status of the second: {second.stdout}{second.stderr}", second.returncode, 0)
    checks.same("pipe: reading", readings(folder), [("2025-03-12", "EFF", "BOD5", "35.5")])
    third = call(folder, "bench", "bod", "--point", "AER", "--date", "2025-03-12", said="\xff\x01\n09:00\nundo\n\nlab\nquit\n")
    checks.same("pipe: bytes that are no text: status", third.returncode, 1)
    checks.that("pipe: bytes that are no text are told", "no text" in third.stdout)


# Answers of whole sheets, with left-out values, several points, runs of their own names, and what the day shares.
WHOLE = {
    "suspended-solids": ["2025-03-12", "EFF", "08:00", "", "lab", "", "0.1123", "0.1188", "0.1140", "500 mL", "0.1125", "0.1191", "", "=", "", "",
                         "a note, with a comma", "AER", "09:00", "MLSS", "", "", "0.1201", "0.1601", "", "20", "", "", "", "", "0.1120", "0.1121", "",
                         "no"],
    "settleability": ["2025-03-12", "AER", "", "", "", "lab", "", "310", "5", "700", "10", "540", "", "", "", "", "no"],
    "ph-calibration": ["2025-03-12", "07:00", "97", "", "", "4.00", "4.02", "", "7.00", "7.01", "25", "", "", "", "no"],
    "round": ["2025-03-12", "lab", "07:15", "7.2", "", "7.0", "57.2 degF", "no"],
}


def every_beginning_can_be_gone_on_with(checks, folder):
    for sheet, answers in WHOLE.items():
        path = os.path.join(folder, f"small.book-bench-{sheet}.csv")
        first = call(folder, "bench", sheet, said="\n".join(answers) + "\n")
        checks.that(f"{sheet}: comes to its end: {first.stdout}", "enter into the book? [yes]: no" in first.stdout)
        with open(path, encoding="utf-8") as f:
            lines = f.readlines()
        for count in range(2, len(lines) + 1):
            with open(path, "w", encoding="utf-8") as f:
                f.writelines(lines[:count])
            again = call(folder, "bench", sheet, said="go on\nquit\n")
            checks.that(f"{sheet}: goes on after {count - 1} values: {again.stderr}", "the sheet is kept, unfinished" in again.stderr)
            with open(path, encoding="utf-8") as f:
                checks.same(f"{sheet}: {count - 1} values stay", f.readlines(), lines[:count])
        undone = call(folder, "bench", sheet, said="go on\n" + "undo\n" * 60 + "quit\n")
        checks.that(f"{sheet}: all can be taken back: {undone.stdout}", "there is nothing to take back" in undone.stdout)
        checks.same(f"{sheet}: nothing is left of it", os.path.exists(path), False)


def rows_in_another_order_are_not_lost(checks, folder):
    path = os.path.join(folder, "small.book-bench-bod.csv")
    text = ("sheet,date,time,point,run,argument,value,unit\nbod,2025-03-12,08:00,EFF,2,final_do,5.3,\nbod,2025-03-13,,,blank,initial_do,8.9,\n")
    with open(path, "w", encoding="utf-8") as f:
        f.write(text)
    result = call(folder, "bench", "bod", said="go on\n")
    checks.same("another order: status", result.returncode, 1)
    checks.that(f"another order: told: {result.stderr}", "cannot go on from this row" in result.stderr)
    with open(path, encoding="utf-8") as f:
        checks.same("another order: the rows stay", f.read(), text)


CASES = [a_whole_sheet_is_typed_and_entered, entries_are_taken_back_across_runs, a_control_c_keeps_the_sheet, a_hang_up_keeps_the_sheet,
         a_kill_keeps_the_sheet, a_termination_keeps_the_sheet, a_torn_row_is_taken_off, a_sheet_is_thrown_away_but_not_deleted,
         two_at_one_sheet_are_told, a_value_out_of_bounds_is_typed_twice, keys_are_edited_and_completed, a_pipe_is_asked_the_same,
         every_beginning_can_be_gone_on_with, rows_in_another_order_are_not_lost]


def main():
    checks = Checks()
    for case in CASES:
        with tempfile.TemporaryDirectory() as folder:
            make_book(folder)
            try:
                case(checks, folder)
            except AssertionError as told:
                checks.that(f"{case.__name__}: {told}", False)
    return ran(checks.count, checks.failed)


if __name__ == "__main__":
    sys.exit(main())
