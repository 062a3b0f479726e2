"""Help pages in our own order: what it does, an example, the options."""

from typing import Any

import click


class OfficeCommand(click.Command):
    """A command whose help says what it does, shows an example, and lists its options."""

    def __init__(self, *arguments: Any, example: str, **settings: Any) -> None:
        super().__init__(*arguments, **settings)
        self.example = example

    def format_help(self, ctx: click.Context, formatter: click.HelpFormatter) -> None:
        """Write the help page."""
        _write_help(self, self.example, ctx, formatter)


class OfficeGroup(click.Group):
    """The program itself: what it does, an example, its commands."""

    def __init__(self, *arguments: Any, example: str, **settings: Any) -> None:
        super().__init__(*arguments, **settings)
        self.example = example

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


def _write_help(command: click.Command, example: str, ctx: click.Context, formatter: click.HelpFormatter) -> None:
    formatter.width = 100
    for paragraph in (command.help or "").split("\n\n"):
        formatter.write_text(" ".join(paragraph.split()))
        formatter.write_paragraph()
    formatter.write_text("For example:")
    with formatter.indentation():
        formatter.write_text(example)
    rows = [row for parameter in command.get_params(ctx) if (row := parameter.get_help_record(ctx)) is not None]
    formatter.write_paragraph()
    formatter.write_text("What can be added:")
    with formatter.indentation():
        formatter.write_dl(rows)
