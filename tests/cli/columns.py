"""columns.py N: whether every line of standard input fits N columns of a terminal."""
import re
import sys
import unicodedata


def width(text):
    return sum(0 if unicodedata.combining(sign) or unicodedata.category(sign) == "Cf"
               else 2 if unicodedata.east_asian_width(sign) in "WF" else 1 for sign in text)


limit = int(sys.argv[1])
wide = [line for line in sys.stdin.buffer.read().decode("utf-8").split("\n")
        if width(re.sub("\x1b\\[[0-9;]*m", "", line)) > limit]
for line in wide:
    print(f"{width(line)} columns: {line}")
sys.exit(bool(wide))
