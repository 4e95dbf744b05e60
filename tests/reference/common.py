"""What the table makers share: versions, numbers as text, writing a table."""

import json
from importlib.metadata import version
from pathlib import Path

HERE = Path(__file__).resolve().parent


def versions(*packages):
    """'gsw 3.6.23, numpy 2.4.6', as installed."""
    return ", ".join(f"{name} {version(name)}" for name in packages)


def text(value):
    """Shortest text that reads back as the same double; strings as they are."""
    return value if isinstance(value, str) else repr(float(value))


def write_csv(name, source, maker, columns, rows, notes=()):
    """`columns` are the header; every row has one value for each of them."""
    lines = [f"# source: {source}; made by {maker}"]
    lines += [f"# {note}" for note in notes]
    lines.append(",".join(columns))
    for row in rows:
        if len(row) != len(columns):
            raise ValueError(f"{name}: {len(row)} values for {len(columns)} columns")
        lines.append(",".join(text(value) for value in row))
    save(name, "\n".join(lines) + "\n")


def write_json(name, content):
    save(name, json.dumps(content, indent=2) + "\n")


def save(name, content):
    if "nan" in content.lower():
        raise ValueError(f"{name}: not a number in the table")
    (HERE / name).write_text(content, encoding="ascii")
    print(f"{name}: {len(content)} bytes, {content.count(chr(10))} lines")
