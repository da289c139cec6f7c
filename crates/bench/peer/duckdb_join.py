"""Combines and ranks candidates with joins of a database, as a peer of the search.

Reads the tables that `peer-tables` wrote (`references.csv`, `amplifiers.csv`, `powers.csv`,
`rail.csv`), makes every check in which the amplifier takes part, ranks what holds by
cost * loss * stress, and compares the first rows with the search's `shortlist.csv`.

    pip install duckdb
    cargo run --release -p bench --bin peer-tables -- SHOP SHEET OUT
    python3 crates/bench/peer/duckdb_join.py OUT

Covered: fixed outputs, weights of 1, every check of the model page's sections 4.2, 4.3 and 4.6, cost,
loss, stress, rank by score, then cost, stress, loss, names.
Not covered, and taken from the tables: RZ, RF and RI, and the checks of the reference and of the
transistor on its heatsink. Comparisons are made on doubles as they are, with room for the eleventh digit,
and only the rows near the top are put in order by figures rounded to ten digits.
"""

import argparse
import csv
import pathlib
import sys
import time

import duckdb

# Every check holds where u <= 1 at ten significant digits.
LIMIT = "1.0000000005"

MACROS = """
CREATE MACRO u(asked, allowed) AS
    CASE WHEN asked <= 0 THEN 0.0
         WHEN allowed <= 0 OR isinf(asked) THEN 'inf'::DOUBLE
         ELSE asked / allowed END;
CREATE MACRO ten(x) AS format('{:.9e}', x::DOUBLE)::DOUBLE;
"""

# The amplifier beside a reference: supply, input range, divider window, divider.
INPUTS = """
CREATE TABLE inputs AS
WITH met AS (
    SELECT r.*, a.amplifier, a.price AS amplifier_price, a.iq_a,
           a.fixed_error_v + r.vz_hi_v * a.common_mode AS e, a.ib_a AS ib
    FROM refs r CROSS JOIN amplifiers a CROSS JOIN rail
    WHERE u(feed_max_v, amp_supply * a.vs_max_v) <= {limit}
      AND u(a.vs_min_v, feed_min_v) <= {limit}
      AND u(a.vcm_low_v, r.vz_lo_v) <= {limit}
      AND u(r.vz_hi_v + a.vcm_high_v, feed_min_v) <= {limit}
), current_ AS (
    SELECT *, (vz_lo_v - e) / ri_hi_ohm - ib AS lo_a, (vz_hi_v + e) / ri_lo_ohm + ib AS hi_a,
           (1 + rf_hi_ohm / ri_lo_ohm) * (vz_hi_v + e) + ib * rf_hi_ohm AS vl_hi,
           (1 + rf_lo_ohm / ri_hi_ohm) * (vz_lo_v - e) - ib * rf_hi_ohm AS vl_lo
    FROM met
)
SELECT zener, bias_line, divider_line, amplifier,
       price AS reference_price, amplifier_price,
       greatest(stress, u(hi_a * hi_a * rf_hi_ohm, resistor_w), u(hi_a * hi_a * ri_lo_ohm, resistor_w),
                u(hi_a * rf_hi_ohm, resistor_v)) AS stress,
       vz_nominal_v / ri_ohm + iz_nominal_a + iq_a AS side_a
FROM current_ CROSS JOIN rail
WHERE u(divider_min_a, lo_a) <= {limit} AND u(hi_a, divider_max_a) <= {limit}
  AND u(greatest(vl_hi - voltage_v, voltage_v - vl_lo), tolerance * voltage_v) <= {limit}
  AND u(hi_a * hi_a * rf_hi_ohm, resistor_w) <= {limit}
  AND u(hi_a * hi_a * ri_lo_ohm, resistor_w) <= {limit}
  AND u(hi_a * rf_hi_ohm, resistor_v) <= {limit}
"""

# The amplifier driving a mounted transistor.
DRIVES = """
CREATE TABLE drives AS
SELECT p.pass, p.heatsink, a.amplifier, p.price,
       greatest(p.stress, u(feed_max_v, amp_supply * a.vs_max_v),
                u((feed_max_v * a.iq_a + p.drive_w) * a.rth_ja, a.allowed_rise_c),
                u(a.fault_rise_c, a.allowed_fault_rise_c)) AS stress
FROM powers p CROSS JOIN amplifiers a CROSS JOIN rail
WHERE u(p.base_a, amp_current * a.iout_a) <= {limit}
  AND u(voltage_v * (1 + tolerance) + p.vbe_hi_v + a.swing_high_v, feed_min_v) <= {limit}
  AND u(a.swing_low_v, voltage_v * (1 - tolerance)) <= {limit}
  AND u((feed_max_v * a.iq_a + p.drive_w) * a.rth_ja, a.allowed_rise_c) <= {limit}
  AND u(a.fault_rise_c, a.allowed_fault_rise_c) <= {limit}
  AND (p.ileak_a IS NULL OR a.isink_a IS NULL OR u(p.ileak_a, amp_current * a.isink_a) <= {limit})
  AND (p.ileak_a IS NULL
       OR u(a.ib_a + CASE WHEN p.junctions = 2 THEN p.ileak_a ELSE 0 END,
            load_min_a + divider_min_a) <= {limit})
"""

# Every pair of an input and a drive with the same amplifier is a candidate.
RANKING = """
WITH candidates AS (
    SELECT i.*  EXCLUDE (stress), d.pass, d.heatsink,
           i.reference_price + i.amplifier_price + d.price AS cost,
           feed_nominal_v * (load_max_a + i.side_a) / (voltage_v * load_max_a) - 1 AS loss,
           greatest(i.stress, d.stress) AS stress
    FROM inputs i JOIN drives d USING (amplifier) CROSS JOIN rail
), scored AS (
    SELECT *, cost * loss * stress AS score FROM candidates
), near_top AS (
    SELECT * FROM scored ORDER BY score LIMIT {near_top}
)
SELECT zener, bias_line, amplifier, divider_line, pass, coalesce(heatsink, '') AS heatsink,
       cost, loss, stress, score
FROM near_top
ORDER BY ten(score), ten(cost), ten(stress), ten(loss),
         zener, amplifier, pass, coalesce(heatsink, ''), bias_line, divider_line
LIMIT {top}
"""

# Rows that are put in order by rounded figures: many more than are shown.
NEAR_TOP = 10_000

# Columns that hold names; all others hold figures.
NAMED = {"zener", "bias_line", "divider_line", "amplifier", "pass", "heatsink"}

NAMES = 6  # the first columns of a row are names, the others figures


def main() -> int:
    parser = argparse.ArgumentParser(description=__doc__.splitlines()[0])
    parser.add_argument("tables", type=pathlib.Path, help="folder that peer-tables wrote")
    parser.add_argument("--threads", type=int, default=2)
    arguments = parser.parse_args()

    with open(arguments.tables / "shortlist.csv", newline="") as file:
        expected = list(csv.reader(file))[1:]

    begin = time.perf_counter()
    rows, candidates = rank(arguments.tables, arguments.threads, max(1, len(expected)))
    took = time.perf_counter() - begin
    print(f"duckdb {duckdb.__version__}: {candidates} candidates ranked in {1e3 * took:.1f} ms")

    if not expected:
        print("nothing holds" if not rows else "the search found nothing, the peer did")
        return 1 if rows else 0
    for number, (row, other) in enumerate(zip(rows, expected), start=1):
        agrees = list(row[:NAMES]) == other[:NAMES] and all(
            abs(mine - float(its)) <= 1e-9 * abs(mine) for mine, its in zip(row[NAMES:], other[NAMES:])
        )
        print(f"{number:3} {'agrees' if agrees else 'DIFFERS'}  score {row[-1]:.6f}  {' '.join(row[:NAMES])}")
        if not agrees:
            print(f"    the search has {' '.join(other)}")
            return 1
    return 0 if len(rows) == len(expected) else 1


def rank(folder: pathlib.Path, threads: int, top: int):
    """The first rows of the ranking, and how many candidates there are."""
    base = duckdb.connect(config={"threads": threads})
    base.execute(MACROS)
    for table, name in [("refs", "references"), ("amplifiers", "amplifiers"), ("powers", "powers"), ("rail", "rail")]:
        source = folder / f"{name}.csv"
        with open(source, newline="") as file:
            columns = next(csv.reader(file))
        # Told, not guessed: a column that is blank throughout, or a table without a row, shows no type.
        types = {column: "VARCHAR" if column in NAMED else "DOUBLE" for column in columns}
        base.execute(f"CREATE TABLE {table} AS SELECT * FROM read_csv('{source}', header=true, columns={types})")
    base.execute(INPUTS.format(limit=LIMIT))
    base.execute(DRIVES.format(limit=LIMIT))
    rows = base.execute(RANKING.format(near_top=NEAR_TOP, top=top)).fetchall()
    (candidates,) = base.execute(
        "SELECT coalesce(sum(i.n * d.n), 0)::HUGEINT FROM (SELECT amplifier, count(*) n FROM inputs GROUP BY 1) i"
        " JOIN (SELECT amplifier, count(*) n FROM drives GROUP BY 1) d USING (amplifier)"
    ).fetchone()
    return rows, candidates


if __name__ == "__main__":
    sys.exit(main())
