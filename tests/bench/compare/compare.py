"""How many times faster the service judges a choice than what a team would write instead (app.py).

Starts both on loopback, one thread of computation each, demands that they give the same verdict and, within 1e-6, the
same actual value and utilization of every check, and then drives both in turns with the same client. Tells the ratio of
the answers per second and of the time that the processes had a core.

Needs requirements.txt and the program built by `cargo build --release`. Run: python tests/bench/compare/compare.py
"""

import http.client
import json
import os
import pathlib
import re
import statistics
import subprocess
import sys
import time

import pint

HERE = pathlib.Path(__file__).parent
PROGRAM = HERE.parents[2] / os.environ.get("CARGO_TARGET_DIR", "target") / "release" / "brakewright"
BODY = (HERE / "request.json").read_text().encode()
TOLERANCE = 1e-6
TURNS, TURN = 9, 0.5  # s
PATIENCE = 20  # s
units = pint.UnitRegistry(autoconvert_offset_to_baseunit=True)


class Server:
    def __init__(self, command, announced, **more):
        self.process = subprocess.Popen(command, stdout=subprocess.PIPE, stderr=subprocess.STDOUT, text=True, **more)
        self.connection = None
        for line in self.process.stdout:
            if found := re.search(announced, line):
                self.connection = http.client.HTTPConnection("127.0.0.1", int(found[1]), timeout=PATIENCE)
                return
        raise SystemExit(f"{command[0]} did not start")

    def ask(self):
        self.connection.request("POST", "/v1/spec-check", BODY, {"Content-Type": "application/json"})
        answer = self.connection.getresponse()
        body = answer.read()
        assert answer.status == 200, body
        return body

    def core_time(self):
        tasks = pathlib.Path(f"/proc/{self.process.pid}/task").iterdir()
        return sum(int((task / "schedstat").read_text().split()[0]) for task in tasks) / 1e9

    def drive(self):
        """Answers per second, and per second of core time."""
        count, begun, before = 0, time.perf_counter(), self.core_time()
        while time.perf_counter() - begun < TURN:
            self.ask()
            count += 1
        return count / (time.perf_counter() - begun), count / (self.core_time() - before)

    def end(self):
        self.process.terminate()
        self.process.wait(PATIENCE)


def in_si(given):
    if not isinstance(given, dict):
        return given
    if given["unit"] == "1":
        return given["value"]
    spelled = re.sub(r"(?<=[a-zA-Z])(\d)", r"**\1", given["unit"].replace(".", "*"))
    if spelled in ("degC", "K"):
        return units.Quantity(given["value"], spelled).to("degC").magnitude
    return units.Quantity(given["value"], spelled).to_base_units().magnitude


def checks(answer):
    listed = json.loads(answer)["results"]["checks"]
    return {(check["code"], check["duty_index"], check.get("fitted_index")): check for check in listed}


def same(ours, theirs):
    assert json.loads(ours)["results"]["verdict"] == json.loads(theirs)["results"]["verdict"]
    ours, theirs = checks(ours), checks(theirs)
    assert ours.keys() == theirs.keys(), ours.keys() ^ theirs.keys()
    apart = 0.0
    for name, check in ours.items():
        other = theirs[name]
        assert check["status"] == other["status"], name
        for member in ("actual", "utilization"):
            one, two = in_si(check[member]), in_si(other[member])
            share = abs(one - two) / max(abs(one), abs(two), 1e-300)
            apart = max(apart, share)
            assert share <= TOLERANCE, (name, member, one, two)
    print(f"{len(ours)} checks agree; the largest difference is {apart:.1e} of the value")


def main():
    environment = {**os.environ, "BRAKEWRIGHT_LISTEN": "127.0.0.1:0"}
    command = [sys.executable, "-m", "uvicorn", "app:app", "--port", "0", "--no-access-log"]
    servers = []
    try:
        servers.append(Server([PROGRAM], r"listening on http://127.0.0.1:(\d+)", env=environment | {"BRAKEWRIGHT_LOG": "warn"}))
        servers.append(Server(command, r"running on http://127.0.0.1:(\d+)", cwd=HERE))
        service, other = servers
        same(service.ask(), other.ask())
        turns = [(service.drive(), other.drive()) for _ in range(TURNS + 1)][1:]
        for index, name in enumerate(("answers a second", "answers per second of core time")):
            pairs = [(ours[index], theirs[index]) for ours, theirs in turns]
            one, two = (statistics.median(side) for side in zip(*pairs))
            ratio = statistics.median(a / b for a, b in pairs)
            print(f"{name}: service {one:.0f}, other {two:.0f}: {ratio:.0f} times")
    finally:
        for server in servers:
            server.end()


if __name__ == "__main__":
    main()
