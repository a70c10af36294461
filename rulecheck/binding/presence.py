"""`present(x)`: stated, stated `none`, or not known."""

from __future__ import annotations

from rulecheck.binding.bound import Bound, Item, Truth
from rulecheck.binding.scope import Scope
from rulecheck.diagnostics import Span
from rulecheck.formula.syntax import Call, Name
from rulecheck.graph.terms import Term
from rulecheck.model.design import NONE, holders
from rulecheck.quantity.dimension import PURE
from rulecheck.reading.nearest import nearest
from rulecheck.reading.nodes import Located


def present(scope: Scope, syntax: Call) -> Bound:
    """Yes if stated; no if stated `none` or missing from a collection that is complete; unknown else."""
    if len(syntax.arguments) != 1 or not isinstance(syntax.arguments[0], Name):
        return scope.fault(
            "wrong-arguments",
            "'present' takes the name of one thing",
            syntax.span,
            expected="present(aero_surfaces.rear_wing)",
        )
    name = syntax.arguments[0]
    variable = scope.variables.get(name.path[0])
    path = ".".join((variable.path, *name.path[1:])) if isinstance(variable, Item) else ".".join(name.path)
    if not _can_be(scope, path):
        known = [entry.path for entry in scope.shared.vocabulary]
        return scope.fault(
            "unknown-name", f"nothing can be stated under '{path}'", name.span, advice=nearest(path, known)
        )
    scope.touched.add(path)
    return Truth(presence(scope, path, name.span))


def _can_be(scope: Scope, path: str) -> bool:
    vocabulary = scope.shared.vocabulary
    holder = path.rpartition(".")[0]
    entry = vocabulary.entry(holder) if holder else None
    return (
        vocabulary.entry(path) is not None
        or vocabulary.knows_inside(path)
        or bool(entry and entry.kind == "collection")
    )


def presence(scope: Scope, path: str, span: Span) -> Term:
    """The flag of a path."""
    design = scope.view.design
    node = design.leaves.get(path)
    if design.states_none(path) or (isinstance(node, Located) and node.text == NONE):
        return scope.bank.flag(False)
    if node is not None or design.names(path) is not None:  # an empty collection is stated too
        return scope.bank.flag(True)
    closed = (holder in design.complete for holder in holders(path) if holder != path)
    if any(closed):
        return scope.bank.flag(False)
    if scope.shared.stand_ins:
        return scope.bank.input(f"present({path})", "flag", PURE, span)
    return scope.missing(f"whether {path} is there", "flag", PURE, span)
