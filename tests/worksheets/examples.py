"""Worksheets that use everything the format has; the works and devices are invented."""

BREAKER = """\
format = 1

[document]
title = "Riverside range, time-current characteristics"
date = 2026-03-01
maker = "Alder & Finch"

[sheet]
file = "sheets/breaker.png"
page = 1
plot = 2
sha256 = "AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12AB12"

[axes.current]
scale = "log"
unit = "xIn"
factor = 10
direction = "x"
marks = [ { at = [412.0, 1730.5], value = 10 }, { at = [1650.2, 1731.0], value = 1000 } ]

[axes.time]
unit = "s"
marks = [ { at = [400, 1700], value = 0.01 }, { at = [400, 200], value = 60, unit = "min" } ]

[[curves]]
edge = "slow"
meaning = "clearing"
element = "whole"
device = "riverside-b{rating}"
through = [[430, 300], [700, 810]]
colour = "#b02020"
avoid = [[20, 30, 10, 5]]
at = { ir = 1.0 }
start = "cold"
time_kind = "real"
supply = "ac"
voltage_v = 230
ambient_c = -5
poles_loaded = 1

[[curves]]
edge = "mean"
devices = ["riverside-b6", "moor"]
through = [[1, 2]]
tolerance_current = [-0.10, 0.10]

[[devices]]
key = "riverside-b{rating}"
kind = "mcb"
characteristic = "B"
standard = "IEC 60898-1"
ratings = [6, 10, 0.5]

[[devices.breaking]]
quantity = "Icn"
value_a = 6000
voltage_v = 230
supply = "ac"

[[devices]]
key = "moor"
kind = "mccb"
rated_current_a = 250
tolerance_time = [-0.2, 0.2]
tolerance_time_s = [-0.01, 0.01]

[devices.settings]
ir = { from = 0.4, to = 1.0, base = "xIn" }
tr = { steps = [2, 4, 8, 16], at = "6 Ir" }
ii = { from = 2, to = 12, base = "xIn", off = true }

[[devices.derating]]
ambient_c = 50
factor = 0.9
element = "overload"

[[accepted]]
code = "label_doubtful"
place = [3, 4]
reason = "The label reads 1 000"
name = "A. Reviewer"
"""

TYPED = """\
format = 1

[[curves]]
edge = "slow"
meaning = "clearing"
points = [[160, 0.1], [160, 5.0]]
source = "BS 7671:2018 Table 41.3, B32"

[[devices]]
key = "b32"
kind = "mcb"
rated_current_a = 32
"""

SWITCH = """\
format = 1

[[devices]]
key = "isolator-1"
kind = "switch"
rated_current_a = 100
"""
