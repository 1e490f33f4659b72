"""Shows a topic of the guide in a terminal of a given width. Usage: terminal.py PROGRAM.

In a terminal no line is wider than it, and headings are bold; the same page in a pipe has no control sequences.
"""

import fcntl
import os
import pty
import re
import struct
import subprocess
import sys
import termios


def shown(program, columns):
    child, terminal = pty.fork()
    if child == 0:
        fcntl.ioctl(1, termios.TIOCSWINSZ, struct.pack("HHHH", 50, columns, 0, 0))
        os.environ.update(TERM="xterm-256color")
        os.environ.pop("NO_COLOR", None)
        os.execv(program, [program, "guide", "polarity"])
    text = b""
    try:
        while part := os.read(terminal, 65536):
            text += part
    except OSError:
        pass  # the terminal is closed at the end of the program
    os.waitpid(child, 0)
    return text.decode("utf-8").replace("\r\n", "\n")


def main(program):
    wrong = []
    for columns in (40, 60, 90):
        page = shown(program, columns)
        lines = re.sub("\x1b\\[[0-9;]*m", "", page).split("\n")
        widest = max(len(line) for line in lines if not line.startswith("    "))
        if not columns - 15 <= widest <= columns:
            wrong.append(f"{columns} columns: the widest line has {widest}")
        if "\x1b[1m" not in page:
            wrong.append("headings are not bold in a terminal")
    piped = subprocess.run([program, "guide", "polarity"], check=True, capture_output=True).stdout
    if b"\x1b" in piped:
        wrong.append("a pipe gets control sequences")
    for problem in wrong:
        print("FAILED:", problem, file=sys.stderr)
    return 1 if wrong else 0


if __name__ == "__main__":
    sys.exit(main(sys.argv[1]))
