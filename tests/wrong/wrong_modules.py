"""Wrong physics modules of rulesets, with what is said of them."""

from __future__ import annotations

from wrong_inputs import Wrong

MODULE = """\
module: our_aero
meaning: Drag with cooling
sources: {sheet: Track test sheet 9}
figures:
  cooling: {formula: 0.03 m^2, unit: m^2, meaning: Drag of the cooling, source: sheet}
"""
RULES = "physics: [our.physics.yaml]\nrules:\n  it: {require: our_aero.cooling <= 1 m^2}\n"


def module(text: str, **more: str) -> dict[str, str | bytes]:
    return {"our.physics.yaml": text, **{f"{name}.physics.yaml": other for name, other in more.items()}}


def replacing(path: str, because: str = "sheet 9", more: str = "") -> dict[str, str | bytes]:
    return module(MODULE.replace("figures:\n", f"replaces: {{{path}: {because}}}\nfigures:\n") + more)


DRAG = "  drag_area: {formula: aero.drag_area, unit: m^2, meaning: Drag, source: sheet}\n"

WRONG_MODULES: tuple[Wrong, ...] = (
    Wrong(
        "a module that is not there",
        (
            "cup.ruleset.yaml:3:11: no-such-file: there is no file our.physics.yaml; expected the name of a file, relative to the file that names it; look at the spelling and at the folder",
        ),
        design="",
        ruleset=RULES,
    ),
    Wrong(
        "a module outside the folder",
        (
            "cup.ruleset.yaml:3:11: outside-root: ../our.physics.yaml lies outside the design's own folder, which is the root where no git work tree and no rulecheck.yaml is above it; expected a file below that folder, named relative to the file that names it; put a file 'rulecheck.yaml' with the line 'house: NAME' into the folder above, or make that a git work tree",
        ),
        design="",
        ruleset=RULES.replace("our.physics.yaml", "../our.physics.yaml"),
    ),
    Wrong(
        "a module named as a built-in one",
        (
            "our.physics.yaml:1:9: name-taken: there is a physics module 'aero' already, in the built-in modules; give this one a name of its own; to take the place of a figure, say so under 'replaces:'",
        ),
        design="",
        ruleset=RULES,
        files=module(MODULE.replace("our_aero", "aero")),
    ),
    Wrong(
        "two modules of one name",
        (
            "other.physics.yaml:1:9: name-taken: there is a physics module 'our_aero' already, in our.physics.yaml; give this one a name of its own; to take the place of a figure, say so under 'replaces:'",
        ),
        design="",
        ruleset=RULES.replace("[our.physics.yaml]", "[our.physics.yaml, other.physics.yaml]"),
        files=module(MODULE, other=MODULE),
    ),
    Wrong(
        "a figure replaced that is not there",
        (
            "our.physics.yaml:4:12: unknown-name: there is no figure 'aero.drag_aera' of another module to replace; expected the name of a figure, such as aero.drag_area; did you mean 'aero.drag_area'?",
        ),
        design="",
        ruleset=RULES,
        files=replacing("aero.drag_aera"),
    ),
    Wrong(
        "a figure of the module itself replaced",
        (
            "our.physics.yaml:4:12: unknown-name: there is no figure 'our_aero.cooling' of another module to replace; expected the name of a figure, such as aero.drag_area",
        ),
        design="",
        ruleset=RULES,
        files=replacing("our_aero.cooling"),
    ),
    Wrong(
        "a figure replaced by nothing",
        (
            "our.physics.yaml:4:12: bad-physics: module 'our_aero' replaces 'aero.drag_area', and has no figure 'drag_area'; add the figure 'drag_area'",
        ),
        design="",
        ruleset=RULES,
        files=replacing("aero.drag_area"),
    ),
    Wrong(
        "a figure replaced without a reason",
        (
            "our.physics.yaml:4:12: bad-physics: 'aero.drag_area' is replaced without a reason; expected aero.drag_area: the reason",
        ),
        design="",
        ruleset=RULES,
        files=replacing("aero.drag_area", '""', DRAG),
    ),
    Wrong(
        "a figure replaced by one of another kind of quantity",
        (
            "our.physics.yaml:7:36: wrong-dimension: the figure 'drag_area' that is to replace 'aero.drag_area' is of another kind of quantity; expected a figure in m^2",
        ),
        design="",
        ruleset=RULES,
        files=replacing("aero.drag_area", more=DRAG.replace("aero.drag_area, unit: m^2", "3 kg, unit: kg")),
    ),
    Wrong(
        "a figure replaced by one that is called otherwise",
        (
            "our.physics.yaml:7:3: bad-physics: 'mass.of' is called otherwise than the figure 'of' that is to replace it; expected for: m in masses",
        ),
        design="",
        ruleset=RULES,
        files=replacing("mass.of", more="  of: {formula: 3 kg, unit: kg, meaning: Mass, source: sheet}\n"),
    ),
    Wrong(
        "a figure replaced by two modules",
        ("other.physics.yaml:4:12: name-taken: 'aero.drag_area' is replaced by two modules; take one of them out",),
        design="",
        ruleset=RULES.replace("[our.physics.yaml]", "[our.physics.yaml, other.physics.yaml]"),
        files={
            **replacing("aero.drag_area", more=DRAG),
            "other.physics.yaml": str(replacing("aero.drag_area", more=DRAG)["our.physics.yaml"]).replace(
                "our_aero", "other"
            ),
        },
    ),
    Wrong(
        "a module with an unknown key and a unit that is none",
        (
            "our.physics.yaml:6:25: unknown-key: there is no key 'unti' here; expected formula or unit or meaning or source or valid or for or of or solve or between; did you mean 'unit'?",
        ),
        design="",
        ruleset=RULES,
        files=module(MODULE + "  heat: {formula: 3 kW, unti: kW, meaning: Heat, source: sheet}\n"),
    ),
    Wrong(
        "a figure of a module in a unit that its formula does not have",
        (
            "our.physics.yaml:6:19: wrong-dimension: 'heat' is declared in kW, power [W], and its formula gives mass [kg]; mend the formula or the unit",
        ),
        design="",
        ruleset=RULES.replace("cooling", "heat").replace("m^2", "kW"),
        files=module(MODULE + "  heat: {formula: 3 kg, unit: kW, meaning: Heat, source: sheet}\n"),
    ),
    Wrong(
        "a figure of a module that is defined by itself",
        (
            "our.physics.yaml:6:3: cycle: 'our_aero.heat' is defined by itself: our_aero.heat -> our_aero.heat; break the circle at one of them",
        ),
        design="",
        ruleset=RULES.replace("cooling", "heat"),
        files=module(MODULE + "  heat: {formula: heat + 3 m^2, unit: m^2, meaning: Heat, source: sheet}\n"),
    ),
    Wrong(
        "a ruleset that says something else of figures outside their range",
        ("cup.ruleset.yaml:3:11: unknown-choice: 'strict' is not one of the words here; expected noted or required",),
        design="",
        ruleset="validity: strict\nrules:\n  it: {require: dimensions.wheelbase <= 1 m}\n",
    ),
    Wrong(
        "a house that says something else of figures outside their range",
        (
            "rulecheck.yaml:2:11: unknown-choice: 'strict' does not say what becomes of figures outside their range; expected noted or required",
        ),
        design="",
        ruleset="rules:\n  it: {require: dimensions.wheelbase <= 1 m}\n",
        files={"rulecheck.yaml": "house: Office\nvalidity: strict\n"},
    ),
)
