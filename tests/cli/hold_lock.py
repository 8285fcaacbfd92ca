"""hold_lock.py FILE SECONDS: lock the file alone, say who holds it, keep it for a while."""
import fcntl
import os
import sys
import time

with open(sys.argv[1], "r+b") as file:
    fcntl.lockf(file, fcntl.LOCK_EX)
    print(os.getpid(), flush=True)
    time.sleep(float(sys.argv[2]))
