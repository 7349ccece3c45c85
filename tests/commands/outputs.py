"""The commands whose whole output is kept: `python tests/commands/outputs.py` renews them."""

import os
import subprocess
import sys
from pathlib import Path

ROOT = Path(__file__).resolve().parents[2]
EXPECTED = Path(__file__).with_name("expected")

SAMPLES = sorted(
    path.stem
    for path in (ROOT / "samples").glob("*.equiv")
    if "\nthree-phase " not in path.read_text(encoding="utf-8")
)
"""The networks among the samples."""
COMMANDS = {
    **{f"superpose-{name}": f"superpose samples/{name}.equiv" for name in SAMPLES},
    **{
        f"port-{name}": f"port samples/{name}.equiv"
        for name in SAMPLES
        if "port " in (ROOT / "samples" / f"{name}.equiv").read_text(encoding="utf-8")
    },
    "check": "check samples/pump-station.equiv",
    "check-three-phase": "check samples/pump-station-faults.equiv",
    "check-three-phase-csv": "check samples/substation-ring.equiv --as csv",
    "check-three-phase-doubts": "check docs/examples/doubtful-three-phase.equiv",
    "check-three-phase-json": "check docs/examples/doubtful-three-phase.equiv --json",
    "solve": "solve samples/line-driver.equiv",
    "solve-two-frequencies": "solve samples/two-frequency-filter.equiv",
    "superpose-detail": "superpose samples/two-stage-amplifier.equiv --detail",
    "superpose-paths": "superpose samples/two-stage-amplifier.equiv --paths --digits 4",
    "superpose-groups": "superpose samples/pump-station.equiv --by group",
    "superpose-power": "superpose samples/line-driver.equiv P:Rend",
    "superpose-unchecked": "superpose samples/pump-station.equiv --check none",
    "superpose-given": "superpose samples/pump-station.equiv --given tail=20mohm",
    "superpose-frequency": "superpose samples/line-driver.equiv --frequency 1kHz",
    "superpose-csv": "superpose samples/line-driver.equiv --as csv",
    "superpose-markdown": "superpose samples/line-driver.equiv --as markdown",
    "superpose-latex": "superpose samples/line-driver.equiv --as latex",
    "superpose-json": "superpose samples/redundant-supply.equiv V:bus --json",
    "superpose-not-unique": "superpose samples/parallel-supplies.equiv I:North",
    "superpose-exact": "superpose samples/bridge-sensor.equiv --exact",
    "superpose-exact-complex": "superpose samples/rain-gauge.equiv --exact --frequency 6000rad/s",
    "superpose-exact-hertz": "superpose samples/rain-gauge.equiv --exact",
    "superpose-exact-angle": "superpose samples/line-driver.equiv --exact --frequency 6000rad/s",
    "superpose-exact-power": "superpose samples/bridge-sensor.equiv P:Rin --exact",
    "superpose-exact-csv": "superpose samples/bridge-sensor.equiv --exact --as csv",
    "superpose-exact-json": "superpose samples/bridge-sensor.equiv --exact --json",
    "superpose-exact-markdown": "superpose samples/bridge-sensor.equiv --exact --as markdown",
    "superpose-exact-latex": "superpose samples/bridge-sensor.equiv --exact --as latex",
    "solve-exact": "solve samples/pump-station.equiv --exact",
    "port-exact": "port samples/pump-station.equiv --exact",
    "port-exact-form": "port samples/pump-station.equiv PUMP gr,gnd --form h --exact",
    "port-exact-root": "port samples/pump-station.equiv PUMP --form s --exact",
    "port-exact-json": "port samples/current-loop.equiv --exact --json",
    "load-exact": "load samples/redundant-supply.equiv BUS 4 ohm short --exact",
    "load-exact-power": "load samples/redundant-supply.equiv BUS power 2 kW --exact",
    "superpose-symbolic": "superpose samples/bridge-sensor.equiv --symbolic",
    "superpose-symbolic-some": "superpose samples/two-stage-amplifier.equiv --symbolic Rc,beta1",
    "superpose-symbolic-s": "superpose samples/two-frequency-filter.equiv --symbolic",
    "superpose-symbolic-coupled": "superpose --symbolic samples/line-driver.equiv V:r",
    "superpose-symbolic-long": "superpose docs/examples/long-line.equiv --symbolic",
    "superpose-symbolic-expand": "superpose docs/examples/mast-filter.equiv --symbolic --expand",
    "superpose-symbolic-slope": "superpose samples/redundant-supply.equiv V:bus --symbolic Rbank,droop "
    "--derivative Rbank --by group",
    "superpose-symbolic-json": "superpose docs/examples/silo-scale.equiv --symbolic --json",
    "superpose-symbolic-csv": "superpose docs/examples/mast-filter.equiv --symbolic --as csv",
    "superpose-symbolic-markdown": "superpose docs/examples/mast-filter.equiv --symbolic --as markdown",
    "superpose-symbolic-latex": "superpose docs/examples/mast-filter.equiv --symbolic --as latex",
    "superpose-symbolic-power": "superpose samples/line-driver.equiv P:Rend --symbolic",
    "superpose-symbolic-unknown": "superpose samples/line-driver.equiv --symbolic Rned",
    "port-symbolic": "port samples/amplifier-errors.equiv --symbolic Rf,Rg,U1",
    "port-symbolic-norton-only": "port samples/current-loop.equiv --symbolic",
    "port-symbolic-several": "port samples/pump-station.equiv PUMP gr,gnd --symbolic tail",
    "port-symbolic-named": "port --symbolic docs/examples/valve-driver.equiv VALVE --fails-for Rin",
    "port-symbolic-json": "port docs/examples/valve-driver.equiv --symbolic --json",
    "isolate": "isolate samples/pump-station.equiv standby",
    "port-several": "port samples/pump-station.equiv PUMP gr,gnd",
    "port-json": "port samples/current-loop.equiv --json",
    "port-csv": "port samples/pump-station.equiv --as csv",
    "fault": "fault samples/pump-station-faults.equiv BOARD --type three-phase",
    "fault-all-types": "fault samples/pump-station-faults.equiv AUX --by group --digits 4",
    "fault-impedances": "fault samples/earthing-study.equiv KILN --type line-line-ground "
    "--fault-impedance 0.5ohm --ground-impedance 2+0.5j",
    "fault-standard": "fault samples/pump-station-faults.equiv BOARD --type line-ground "
    "--basis equivalent-source",
    "fault-smallest": "fault samples/substation-ring.equiv --basis equivalent-source --case min",
    "fault-relays": "fault samples/substation-ring.equiv S05 --type line-line "
    "--branch K34@S04 --branch Tie",
    "fault-no-path": "fault docs/examples/unearthed-board.equiv WELL --type line-ground",
    "fault-survey": "fault samples/pump-station-faults.equiv",
    "fault-csv": "fault samples/earthing-study.equiv --type line-ground --branch T1@MILL --as csv",
    "fault-json": "fault docs/examples/one-infeed.equiv BOARD --type line-line-ground --json",
    "fault-markdown": "fault samples/earthing-study.equiv SAW --type line-ground --as markdown",
    "fault-latex": "fault samples/earthing-study.equiv SAW --type line-ground --as latex",
    "fault-unknown-bus": "fault samples/substation-ring.equiv S11",
    "fault-of-a-network": "fault samples/pump-station.equiv",
    "isolate-fault": "isolate samples/pump-station-faults.equiv pumps --bus BOARD "
    "--type line-line-ground --fault-impedance 0.1ohm",
    "isolate-without-bus": "isolate samples/pump-station-faults.equiv pumps",
    "kinds": "kinds",
    "kinds-opamp": "kinds opamp",
    "kinds-three-phase": "kinds three-phase",
    "kinds-infeed": "kinds infeed",
    "sample": "sample",
    "error": "check docs/examples/wrong.equiv",
    "error-json": "check docs/examples/wrong.equiv --json",
    "error-three-phase": "check docs/examples/wrong-three-phase.equiv",
    "usage-three-phase": "superpose samples/earthing-study.equiv",
    "usage": "superpose samples/pump-station.equiv I:Falt",
}


def output(words: str, columns: int | None) -> str:
    """What a command prints on both streams, and its exit status."""
    # byte code is kept, so that a hundred processes do not each compile the package
    left_out = ("COLUMNS", "NO_COLOR", "PYTHONDONTWRITEBYTECODE")
    env = {k: v for k, v in os.environ.items() if k not in left_out}
    env["PYTHONUTF8"] = "1"
    if columns:
        env["COLUMNS"] = str(columns)
    done = subprocess.run(
        [sys.executable, "-m", "equiv", *words.split()],
        cwd=ROOT, env=env, capture_output=True, text=True, encoding="utf-8", check=False,
    )  # fmt: skip
    return f"{done.stdout}--- standard error\n{done.stderr}--- exit status {done.returncode}\n"


if __name__ == "__main__":
    EXPECTED.mkdir(exist_ok=True)
    for name, words in COMMANDS.items():
        for form, columns in (("80", 80), ("pipe", None)):
            path = EXPECTED / f"{name}.{form}.txt"
            path.write_text(output(words, columns), encoding="utf-8")
