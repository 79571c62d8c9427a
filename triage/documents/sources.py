"""Where every printed number comes from, as plain lines: what, source, place, how known."""

from collections.abc import Iterator

from triage.assessment import Assessment
from triage.citation import Citation
from triage.knowledge import knowledge
from triage.tables import citation, table


def sources(a: Assessment) -> Iterator[tuple[str, Citation]]:
    """Every number that the documents of this assessment can print, with its citation."""
    k = knowledge()
    yield "priors of causes, passes counted together, physics bounds", k.causes_citation
    yield "likelihoods of findings, tempering, noise", k.findings_citation
    yield "red flags", citation(table("red_flags"), "data/red_flags.yaml")
    yield from _limits(a)
    yield from _physics(a)
    for each in a.next_checks:
        yield f"check: {each.kind.name.lower()}", each.kind.citation
    for row in a.care.rows:
        yield f"care: {row.id.replace('_', ' ')}", row.citation
    for caution in a.cautions:
        if caution.citation is not None:
            yield f"caution: {caution.id.replace('_', ' ')}", caution.citation


def _limits(a: Assessment) -> Iterator[tuple[str, Citation]]:
    for verdict in a.verdicts:
        for judgement in verdict.judgements:
            for each in judgement.comparisons:
                name = f"{each.limit.quantity.replace('_', ' ')} {each.limit.text}"
                edition = each.limit.edition.text()
                yield f"limit: {name}, {edition}", each.limit.citation


def _physics(a: Assessment) -> Iterator[tuple[str, Citation]]:
    """Loaded only here: the short form for the terminal prints no sources."""
    from triage.documents.electrical_sources import electrical_sources
    from triage.documents.static_sources import static_sources

    yield from static_sources(a)
    yield from electrical_sources(a)


def source_lines(a: Assessment) -> tuple[str, ...]:
    """The sources as lines, each once."""
    return tuple(dict.fromkeys(f"{name}: {found.text()}" for name, found in sources(a)))
