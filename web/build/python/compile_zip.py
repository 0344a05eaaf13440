"""Turn the sources inside a zip or wheel into bytecode. Runs inside Pyodide, so the bytecode fits it.

Every `x.py` becomes `x.pyc` with an unchecked source hash: it is used as it is, wherever the
file's date. A wheel gets a new RECORD. Same input, same bytes.
"""

import base64
import hashlib
import zipfile
from importlib._bootstrap_external import _code_to_hash_pyc
from importlib.util import source_hash

FIXED_TIME = (1980, 1, 1, 0, 0, 0)
# What no program at run time opens: tests, type stubs, headers, the Fortran tool.
DROPPED_PARTS = ("/tests/", "/include/", "numpy/f2py/", "pint/testsuite/")
# Parts of the standard library that no browser program uses: processes, terminals, mail, debuggers.
DROPPED_LIBRARY = frozenset(
    "_pyrepl _pyio cProfile curses dbm doctest ensurepip ftplib idlelib imaplib mailbox multiprocessing"
    " optparse pdb pickletools poplib profile pstats pty pydoc pydoc_data smtplib socketserver sqlite3"
    " timeit tkinter trace tty turtle turtledemo unittest venv webbrowser wsgiref xmlrpc".split()
)
DROPPED_ENDS = (".pyi", ".pxd", ".a", ".h", ".c")


def is_dropped(name, is_wheel):
    if not is_wheel:
        return name.split("/")[0].removesuffix(".py") in DROPPED_LIBRARY
    return name.endswith("/RECORD") or name.endswith(DROPPED_ENDS) or any(part in name for part in DROPPED_PARTS)


def compiled(name, data, prefix, optimize):
    code = compile(data, prefix + name, "exec", dont_inherit=True, optimize=optimize)
    return name + "c", bytes(_code_to_hash_pyc(code, source_hash(data), False))


def record_line(name, data):
    digest = base64.urlsafe_b64encode(hashlib.sha256(data).digest()).rstrip(b"=").decode()
    return f"{name},sha256={digest},{len(data)}\n"


def repack(source, target, prefix, optimize, is_wheel):
    """Write `target` from `source`; return (files, bytes before deflate)."""
    out = []
    with zipfile.ZipFile(source) as opened:
        for entry in sorted(opened.infolist(), key=lambda item: item.filename):
            name = entry.filename
            if entry.is_dir() or is_dropped(name, is_wheel):
                continue
            data = opened.read(entry)
            if name.endswith(".py"):
                try:
                    name, data = compiled(name, data, prefix, optimize)
                except SyntaxError:
                    pass  # a template or a deliberately broken sample: kept as it is
            out.append((name, data))
    if is_wheel:
        info = next(name for name, _ in out if name.endswith(".dist-info/WHEEL"))
        record = info.replace("/WHEEL", "/RECORD")
        lines = "".join(record_line(name, data) for name, data in out)
        out.append((record, (lines + f"{record},,\n").encode()))
    with zipfile.ZipFile(target, "w", zipfile.ZIP_DEFLATED, compresslevel=9) as packed:
        for name, data in out:
            entry = zipfile.ZipInfo(name, FIXED_TIME)
            entry.compress_type = zipfile.ZIP_DEFLATED
            entry.external_attr = 0o644 << 16
            packed.writestr(entry, data)
    return len(out), sum(len(data) for _, data in out)
