"""The form at a terminal: ask, read, save, say; one question at a time, nothing redrawn.

The assessment is imported at the first answer only: the first question must stand at once.
"""

from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

from triage.clock import Moment
from triage.errors import InvalidValue
from triage.form.change import Change, answer
from triage.form.choices import asked
from triage.form.draft import save
from triage.form.flow import Step, before, first_minute_is_over, next_step, progress
from triage.form.lines import Lines, say
from triage.form.prompt import help_lines, question_lines
from triage.form.state import State, chosen_by
from triage.frozen import frozen
from triage.site import Site

if TYPE_CHECKING:
    from triage.assessment import Assessment
    from triage.red_flags import Flag

CONTROLS = "? help   < back   u unknown   ! what to do   !! in full   q leave"


@frozen
class Session:
    """What stays the same while a form is filled in.

    Args:
        path: the draft. head: comment lines at its top.
        site: the site file. clock: reads the clock.
        by: role of whoever fills it in, None if not said.
    """

    path: Path
    head: str
    site: Site
    clock: Callable[[], Moment]
    by: str | None


class Form:
    """One form being filled in; holds the state, the flags already said and the step asked."""

    def __init__(self, session: Session, lines: Lines, state: State):
        """Start or go on at a state that is on disk already."""
        self.session, self.lines, self.state = session, lines, state
        self.at: Step | None = None
        answered = state.marks.keys() - {"by"}
        self.flags: tuple[Flag, ...] = self._assessed().flags if answered else ()
        self.told = first_minute_is_over(state, session.site)
        self.doubted = ""

    def run(self) -> bool:
        """Ask until everything is answered or the form is left.

        Returns:
            Whether it is complete.

        Raises:
            InvalidValue: an answer out of a pipe or a file cannot be taken.
        """
        title = ""
        while (step := self.at or next_step(self.state, self.session.site)) is not None:
            if step.section.title != title:
                title = step.section.title
                say()
                say(title.upper())
            for line in question_lines(step, self.state, self.session.site):
                print(line)
            typed = self.lines.next()
            if typed is None or typed == "q":
                return False
            self._take(step, typed)
        return True

    def _take(self, step: Step, typed: str) -> None:
        if typed == "?":
            for line in help_lines(step):
                say(line, "  ")
            say(CONTROLS, "  ")
        elif typed == "<":
            self.at = before(step, self.state, self.session.site) or step
        elif typed == "!":
            self.say_what_to_do()
        elif typed == "!!":
            from triage.documents.plain_text import plain_text

            print(plain_text(self._assessed()))
        elif not typed:
            say("Type an answer, u if it is not known, ? for help.", "  ")
        else:
            self._answer(step, typed)

    def _answer(self, step: Step, typed: str) -> None:
        try:
            change = answer(
                self.state, step, typed=typed, site=self.session.site, present=self.session.clock()
            )
        except InvalidValue as error:
            if not self.lines.talks:
                raise InvalidValue(f"{self._asked(step)} {error}") from None
            say(f"{error}", "  ")
            return
        if change.doubt and self.doubted != f"{step.key} {typed}":
            self.doubted = f"{step.key} {typed}"
            say(f"{change.echo}: {change.doubt}; type it again to keep it, or another.", "  ")
            self.at = step
            return
        self._keep(change, step)

    def _asked(self, step: Step) -> str:
        return asked(step, self.state, self.session.site)

    def _keep(self, change: Change, step: Step) -> None:
        """Save first, then say what follows from it."""
        from triage.form.first_minute import flag_line, new_flags

        self.state, self.at = chosen_by(change.state, step.key, self.session.by), None
        save(self.session.path, self.state, complete=False, head=self.session.head)
        say(f"= {change.echo}", "  ")
        for each in change.dropped:
            say(f"No longer applies, dropped: {each}", "  ")
        flags = self._assessed().flags
        if raised := new_flags(self.flags, flags):
            say(flag_line(raised), "  ")
        self.flags = flags
        if not self.told and first_minute_is_over(self.state, self.session.site):
            self.told = True
            self.say_what_to_do()

    def _assessed(self) -> "Assessment":
        from triage.form.first_minute import assess_state

        return assess_state(self.state, self.session.site)

    def say_what_to_do(self) -> None:
        """The provisional disposition in words one can act on."""
        from triage.form.first_minute import MOST_WORDS, provisional

        say()
        done, total = progress(self.state, self.session.site)
        say(f"WHAT TO DO NOW{' (provisional)' if done < total else ''}")
        for line in provisional(self._assessed(), MOST_WORDS if done < total else 10 * MOST_WORDS):
            say(line, "  ")

    def say_flags(self) -> None:
        """Every red flag that stands, once more at the end."""
        from triage.form.first_minute import new_flags

        standing = new_flags((), self.flags)
        say()
        say(f"RED FLAGS THAT STAND: {len(standing) or 'none'}")
        for each in standing:
            say(f"- {each.flag.name}: {each.missing}", "  ")
