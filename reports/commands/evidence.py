"""`faying evidence`."""

from __future__ import annotations

import sys
from pathlib import Path

import click

from reports.commands.common import plain, progress, taught


@click.command()
@click.option(
    "--out",
    "out",
    type=click.Path(path_type=Path),
    default=Path("faying-evidence"),
    show_default=True,
    help="Folder to write the table and the page into.",
)
@click.option("--subject", help="Only the checks of one subject.")
@taught
def evidence(out: Path, subject: str | None) -> None:
    """Compute every published check now, beside the printed value; exit with code 1 when one fails."""
    from reports.evidence import all_checks, run
    from reports.proof import evidence_text, write_evidence
    from spectra.faults import Fault, InputFaults, did_you_mean

    subjects = list(dict.fromkeys(check.subject for check in all_checks()))
    if subject is not None and subject not in subjects:
        raise InputFaults(
            "--subject", [Fault("", f'there are no checks of "{subject}".', did_you_mean(subject, subjects))]
        )
    chosen = [check for check in all_checks() if subject in (None, check.subject)]
    with progress("checks") as report:
        outcomes = run(chosen, report)
    written = write_evidence(outcomes, out)
    click.echo(evidence_text(outcomes))
    click.echo(f"\nWritten to {plain(str(out))}: {', '.join(path.name for path in written)}")
    if not all(outcome.holds for outcome in outcomes):
        sys.exit(1)
