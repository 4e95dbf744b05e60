"""How the demo data are printed. Used by make_demo.py."""


def number(value, digits):
    """Fixed decimals, without the minus sign of a zero."""
    text = f"{value:.{digits}f}"
    return text[1:] if text.startswith("-") and float(text) == 0.0 else text


def row(values, digits, separator=","):
    return separator.join(number(v, d) for v, d in zip(values, digits, strict=True))


def point(file, sample, time_s, pressure_dbar, depth_m):
    """One line of truth.csv; the time is empty where the log has none."""
    time = "" if time_s is None else number(time_s, 2)
    return f"{file},{sample},{time},{number(pressure_dbar, 4)},{number(depth_m, 4)}"
