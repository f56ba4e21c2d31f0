"""A command whose numbered options take several values after one name: ``--current 100 160 1000``."""

from typing import Any

import click


class ManyValues(click.Command):
    """Repeats an option's name before each further value, which is the form the parser knows."""

    many: frozenset[str] = frozenset({"--current", "--time", "--set"})

    def parse_args(self, ctx: click.Context, args: list[str]) -> list[str]:
        """Spread the values, then parse."""
        return super().parse_args(ctx, list(self._spread(args)))

    def _spread(self, args: list[str]) -> list[str]:
        spread: list[str] = []
        option = ""
        has_value = False
        for word in args:
            if word in self.many:
                option, has_value = word, False
            elif word.startswith("--") or not option:
                option = ""
            elif not has_value:
                has_value = True
            elif _fits(option, word):
                spread.append(option)
            else:
                option = ""
            spread.append(word)
        return spread


def _fits(option: str, word: str) -> bool:
    """Whether a word can be one more value of the option."""
    if option == "--set":
        return "=" in word
    try:
        float(word)
    except ValueError:
        return False
    return True


class ManySettings(ManyValues):
    """A command of which only the settings take several values."""

    many = frozenset({"--set"})


class Settings(click.ParamType[Any]):
    """``ir=0.8`` or ``ii=off``; in ``compare`` ``KEY.ir=0.8``."""

    name = "NAME=VALUE"

    def convert(self, value: Any, param: click.Parameter | None, ctx: click.Context | None) -> tuple[str, float | str]:
        """Name and number, or name and ``off``."""
        if isinstance(value, tuple):
            return value
        name, equals, number = value.partition("=")
        if not (name and equals):
            self.fail(f"'{value}' is no setting. Expected NAME=VALUE, such as ir=0.8.", param, ctx)
        if number == "off":
            return name, number
        try:
            return name, float(number)
        except ValueError:
            self.fail(f"'{number}' in '{value}' is neither a number nor 'off'.", param, ctx)


settings_option = click.option(
    "--set", "settings", type=Settings(), multiple=True, metavar="NAME=VALUE...", help="Settings, e.g. ir=0.8."
)
