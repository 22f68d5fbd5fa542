"""The sentences that say what was built: the rule, its conventions, the graph."""

from collections.abc import Callable

from verifier.appendix.environment import has_template, render
from verifier.appendix.polynomials import polynomial
from verifier.case.case import Case, Condition, GraphTable, SequenceTable, Setting
from verifier.registry import GRAPHS, RULES
from verifier.typography.escape import Latex, tex

Cite = Callable[..., Latex]


def sequence_sentences(case: Case, cite: Cite, source: Callable[[str], Latex]) -> list[Latex]:
    """Return the paragraphs on the sequence, none if the case has no sequence."""
    table = case.sequence
    if table is None:
        return []
    made = [_rule(case, table, cite, source)]
    if table.indices is not None:
        first, last = (_plain_maths(end) for end in table.indices)
        made.append(
            Latex(
                f"The terms used are those at the indices {first}, \\ldots, {last}, taken modulo "
                "the period, and are numbered $e_0,\\ldots,e_{N-1}$."
            )
        )
    if table.symmetrise == "mirror":
        made.append(
            Latex(
                "The sequence is then mirrored: $e_{N-x}$ is replaced by $e_x$ for $1\\le x<N/2$."
            )
        )
    return made


def _rule(case: Case, table: SequenceTable, cite: Cite, source: Callable[[str], Latex]) -> Latex:
    name = f"appendix/rules/{table.rule}.tex.jinja"
    entry = RULES.entries.get(table.rule)
    origin = source(entry.source).code if entry is not None else ""
    after = f" See {origin}." if origin else ""
    if has_template(name):
        made = render(
            name,
            cite=cite,
            polynomial=_polynomial(case, table),
            at_zero=_sign(table),
            file=_file(table.settings.get("file")),
            setting=lambda key: _setting(table.settings[key]),
        )
        return Latex(made.code.strip() + after)
    definition = tex(entry.definition) if entry is not None else ""
    keys = ", ".join(f"{tex(key)} {_setting(set_).code}" for key, set_ in table.settings.items())
    with_keys = f" The keys are {keys}." if keys else ""
    return Latex(
        f"The sequence follows the rule {tex(table.rule)}: {definition}.{with_keys}{after}"
    )


def graph_sentences(case: Case, cite: Cite) -> list[Latex]:
    """Return the paragraph on the graph, none if the case has no graph."""
    table = case.graph
    if table is None:
        return []
    name = f"appendix/graphs/{table.kind}.tex.jinja"
    if has_template(name):
        return [Latex(render(name, cite=cite, file=_graph_file(table)).code.strip())]
    entry = GRAPHS.entries.get(table.kind)
    definition = tex(entry.definition) if entry is not None else ""
    return [Latex(f"The graph is of the kind {tex(table.kind)}: {definition}.")]


def _setting(setting: Setting) -> Latex:
    """Return the value of a key: expressions and numbers as maths, texts as texts."""
    if isinstance(setting, Condition):
        return polynomial(setting.text)
    if isinstance(setting, int):
        return Latex(f"${setting}$")
    if isinstance(setting, str):
        return Latex(tex(setting))
    return Latex(f"a list of {len(setting)} values")


def _polynomial(case: Case, table: SequenceTable) -> Latex:
    setting = table.settings.get("polynomial")
    if not isinstance(setting, Condition):
        return Latex("$f$ is the polynomial of the instance")
    text = setting.text
    if text in {parameter.name for parameter in case.parameters}:
        return Latex("$f$ is the polynomial named below")
    shown = polynomial(text).code
    return Latex(f"$f={shown.removeprefix('$')}" if shown.startswith("$") else f"$f$ is {shown}")


def _sign(table: SequenceTable) -> Latex:
    at_zero = table.settings.get("at-zero")
    if at_zero is None:
        entry = RULES.entries.get(table.rule)
        key = entry.keys.get("at-zero") if entry is not None else None
        at_zero = key.default if key is not None else None
    return Latex({1: "+1", -1: "-1"}.get(at_zero, "1") if isinstance(at_zero, int) else "1")


def _file(setting: object) -> str:
    return setting if isinstance(setting, str) else ""


def _graph_file(table: GraphTable) -> str:
    return _file(table.settings.get("file"))


def _plain_maths(condition: Condition) -> str:
    return polynomial(condition.text).code
