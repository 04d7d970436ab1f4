#!/usr/bin/env python3
"""A whole simulator. Its formula is made up: it shows how to talk, not what antennas do."""
import json
import math
import sys


def sample(design, hz):
    wavelength = 299792458.0 / hz
    circumference = math.pi * sum(design["diameter_m"]) / len(design["diameter_m"]) / wavelength
    length = design["turns"] * sum(design["spacing_m"]) / len(design["spacing_m"]) / wavelength
    gain = 1.5 + 7 * length * math.exp(-(((circumference - 1.1) / 0.3) ** 2))
    cross = gain / (4 * design["turns"] + 2) ** 2
    right = design["handedness"] == "right"
    return {
        "hz": hz,
        "port_ohm": [140 * circumference, 90 * (circumference - 1.05)],
        "gain": {"right": gain if right else cross, "left": cross if right else gain},
        "directivity": gain + cross,
        "efficiency": 1.0,
    }


def main():
    print(json.dumps({"protocol": 1, "name": "invented", "version": "1", "indicative": True}), flush=True)
    for line in sys.stdin:
        question = json.loads(line)
        answer = {"id": question["id"]}
        try:
            answer["samples"] = [sample(question["design"], hz) for hz in question["hz"]]
        except (ArithmeticError, ValueError) as fault:
            answer["error"] = str(fault)
        print(json.dumps(answer), flush=True)


main()
