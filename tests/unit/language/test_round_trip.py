"""What is written is read back as the same network, and is written the same again."""

from pathlib import Path

from hypothesis import given
from unit.language.generated import networks, seeded

from equiv.elements import KINDS
from equiv.language import parse, write
from equiv.network import Network


@given(networks())
@seeded
def test_written_networks_read_back(network: Network) -> None:
    text = write(network)
    again = parse(text)
    assert again == network
    assert again.comments == network.comments
    assert write(again) == text


def test_every_example_of_a_kind_reads_and_writes_itself(tmp_path: Path) -> None:
    (tmp_path / "splitter.s3p").write_text("# Hz S RI R 50\n50" + " 0 0" * 9 + "\n")
    around = (
        "frequency 50 Hz\nresistor R3 p n 1\nresistor R9 b e 1\ninductor L1 x y 1\n"
        "inductor L2 x y 1\n"
    )
    for kind in KINDS.values():
        (example,) = [
            line.partition(":")[2].strip()
            for line in (kind.__doc__ or "").splitlines()
            if line.strip().startswith("Example:")
        ]
        if kind.kind in ("inductor",):
            example = example.replace("L1", "L5")
        network = parse(f"{around}{example}\n", folder=tmp_path)
        assert any(element.kind == kind.kind for element in network.elements.values())
        assert parse(write(network), folder=tmp_path) == network


def test_instances_of_blocks_are_written_out() -> None:
    network = parse(
        """
        given R0 = 3 ohm
        block divider (top tap) r=(R0/9)
          resistor R1 top x r
          resistor R2 x tap (2*r)
          vccs G tap > gnd g 1 mS senses V:x,top
          ccvs H +tap -gnd r 2 senses I:R1
          use load L (x)
          block load (p)
            resistor R p gnd R0
          end
        end
        use divider A (in out)
        use divider B (out in) r=1 kohm
        """
    )
    written = write(network)
    lines = [" ".join(line.split()) for line in written.splitlines()]
    assert "resistor A.R1 in A.x (1/3) ohm" in lines
    assert "vccs A.G out > gnd g 1 mS senses V:A.x,in" in lines
    assert "ccvs B.H +in -gnd r 2 ohm senses I:B.R1" in lines
    # A parameter of the file is known outside the block too; the block's own is not.
    assert "resistor A.L.R A.x gnd R0" in lines
    assert parse(written) == network
