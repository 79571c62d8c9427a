"""Earlier reports on the same things or place, worded."""

from triage.documents.wording import NBSP
from triage.history import History


def earlier_lines(found: History) -> list[str]:
    """Surveys demanded first, then each earlier report with what it shares."""
    lines = [
        f"Survey {mark.kind} {mark.name} today: reports {', '.join(cases)} on it are not settled "
        "as static. No statistics are needed for that."
        for mark, cases in found.surveys
    ]
    for each in found.reports:
        shared = " and ".join(f"{mark.kind}{NBSP}{mark.name}" for mark in each.shared)
        lines.append(f"{each.case}, {each.when or 'time not known'}, same {shared}: {each.says}.")
    compared = f"{found.looked_at} earlier record{'' if found.looked_at == 1 else 's'} compared"
    if not found.reports:
        return [f"None on the same asset, outlet group or room; {compared}."]
    return [*lines, f"{compared.capitalize()}. None of this enters the ranking."]
