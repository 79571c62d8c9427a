"""What to do now, in a few sentences: the ordinary assessment of the record so far."""

from triage.assessment import Assessment, assess
from triage.documents.summary import check_line, headline, person_lines
from triage.documents.wording import LEVEL_NAME, condition, item_name, item_order
from triage.form.state import State
from triage.record import from_plain
from triage.red_flags import Flag
from triage.site import Site
from triage.strict_yaml import Plain

MOST_WORDS = 110
"""Words of a provisional disposition; with eight questions and their answers it stays under the 300
that are read in a minute and a half (judgement)."""
_NO_TOUCH = "Nobody touches it again to find out."


def assess_state(state: State, site: Site) -> Assessment:
    """The ordinary assessment of the record so far; what is missing is not known.

    Raises:
        BadRecord: a time that a clock change of the site's zone doubles or skips.
    """
    return assess(from_plain(Plain("form", state.tree)), site)


def provisional(a: Assessment, most: int = MOST_WORDS) -> list[str]:
    """What to do now: the person, the condition, what happens to each thing, the first check.

    Args:
        a: the assessment of a draft.
        most: words; beyond them whole lines are left out, never the person, the condition or the
            headline.

    Returns:
        Lines in the order of acting.
    """
    person, *care = person_lines(a)
    lead = headline(a) if len(a.items) > 1 else f"{LEVEL_NAME[a.headline]}."
    needed = [person, condition(a.incident), lead]
    further = [care[0]] if care[1:] else []
    further += _orders(a)
    further.append(_NO_TOUCH)
    further += [f"First check: {check_line(each, a)}." for each in a.next_checks[:1]]
    left = most - sum(len(each.split()) for each in needed)
    kept = []
    for line in further:
        if len(line.split()) <= left:
            kept.append(line)
            left -= len(line.split())
    order = [person, *[each for each in kept if each in care], *needed[1:]]
    return [each for each in [*order, *(k for k in kept if k not in care)] if each]


def _orders(a: Assessment) -> list[str]:
    """What happens to each item; its name only where there are several."""
    if len(a.items) == 1:
        return [item_order(a.items[0], a.incident)]
    return [f"{item_name(a.incident, i.item)}: {item_order(i, a.incident)}" for i in a.items]


def flag_line(flags: list[Flag]) -> str:
    """Red flags in a line."""
    return f"RED FLAG: {'; '.join(each.flag.name for each in flags)}."


def new_flags(before: tuple[Flag, ...], after: tuple[Flag, ...]) -> list[Flag]:
    """Flags that stand now and did not before."""
    known = {each.flag.id for each in before if not each.cleared}
    return [each for each in after if not each.cleared and each.flag.id not in known]
