"""Help pages in our own order: what it does, an example, the options."""

from typing import Any, Final

import click

HELP_WORDS: Final = "Show this page and stop."


class OfficeCommand(click.Command):
    """A command whose help says what it does, shows an example, and lists its options."""

    def __init__(self, *arguments: Any, example: str, **settings: Any) -> None:
        super().__init__(*arguments, **settings)
        self.example = example

    def get_help_option(self, ctx: click.Context) -> click.Option | None:
        """Return the option --help, in our words."""
        return _in_our_words(super().get_help_option(ctx))

    def format_help(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the help page."""
        _write_help(self, self.example, ctx, formatter)


class OfficeGroup(click.Group):
    """The program itself: what it does, an example, its commands."""

    def __init__(self, *arguments: Any, example: str, **settings: Any) -> None:
        super().__init__(*arguments, **settings)
        self.example = example

    def get_help_option(self, ctx: click.Context) -> click.Option | None:
        """Return the option --help, in our words."""
        return _in_our_words(super().get_help_option(ctx))

    def format_help(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the help page."""
        _write_help(self, self.example, ctx, formatter)
        rows = [(name, self.commands[name].get_short_help_str(limit=90)) for name in self.list_commands(ctx)]
        formatter.write_paragraph()
        formatter.write_text("Commands (each has its own --help):")
        with formatter.indentation():
            formatter.write_dl(rows)

    def list_commands(self, ctx: click.Context) -> list[str]:
        """Return the commands in the order in which an office uses them."""
        del ctx  # the order is ours, whatever the context
        return list(self.commands)


def _in_our_words(option: click.Option | None) -> click.Option | None:
    if option is not None:
        option.help = HELP_WORDS
    return option


def _row(option: click.Option, ctx: click.Context) -> tuple[str, str] | None:
    record = option.get_help_record(ctx)
    needed = " Needed." if option.required else ""
    return None if record is None else (record[0], f"{option.help or ''}{needed}")


def _write_help(command: click.Command, example: str, ctx: click.Context, formatter: click.HelpFormatter) -> None:
    formatter.width = 100
    for paragraph in (command.help or "").split("\n\n"):
        formatter.write_text(" ".join(paragraph.split()))
        formatter.write_paragraph()
    formatter.write_text("For example:")
    with formatter.indentation():
        formatter.write_text(example)
    options = [parameter for parameter in command.get_params(ctx) if isinstance(parameter, click.Option)]
    rows = [row for option in options if (row := _row(option, ctx)) is not None]
    formatter.write_paragraph()
    formatter.write_text("What can be added:")
    with formatter.indentation():
        formatter.write_dl(rows)
