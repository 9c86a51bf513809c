"""A 401-point cut of a 100-wavelength offset dish: a plain numpy direct sum over the nodes that
bench_beam wrote, timed beside bench_beam in one run. Usage: bench_beam.py PATH/TO/bench_beam"""
import subprocess
import sys
import tempfile
import time

import numpy


def direct_sum(k, nodes, directions, reference):
    current = (nodes[:, 4:7] + 1j * nodes[:, 7:10]) * nodes[:, 3:4]
    total = numpy.empty((len(directions), 3), complex)
    for first in range(0, len(directions), 16):  # as many as fit the cache best
        part = directions[first:first + 16] - reference
        total[first:first + 16] = numpy.exp(1j * k * (part @ nodes[:, :3].T)) @ current
    return total


def main():
    with tempfile.NamedTemporaryFile() as file:
        table = subprocess.run([sys.argv[1], file.name], check=True, capture_output=True,
                               text=True).stdout
        data = numpy.fromfile(file.name)
    print(table, end="")
    k, count, samples = data[0], int(data[1]), int(data[2])
    nodes = data[6:6 + 10 * count].reshape(count, 10)
    cut = data[6 + 10 * count:].reshape(samples, 5)
    best = float("inf")
    for _ in range(3):
        start = time.perf_counter()
        total = direct_sum(k, nodes, cut[:, :3], data[3:6])
        best = min(best, time.perf_counter() - start)
    s = cut[:, :3]
    square = numpy.linalg.norm(total - (total * s).sum(1, keepdims=True) * s, axis=1)
    ours = numpy.hypot(cut[:, 3], cut[:, 4])
    worst = numpy.abs(square * k / numpy.sqrt(4 * numpy.pi) - ours).max() / ours.max()
    row = [line.split(",") for line in table.splitlines() if line.startswith("100,")][0]
    mine = float(row[1]) + float(row[2])
    print("numpy_ms,nodes,ours_ms,ratio,largest_difference")
    print(f"{1e3 * best:.1f},{count},{mine:.3f},{1e3 * best / mine:.1f},{worst:.1e}")


main()
