"""What a model refuses, told as faults: where it stands, what was given, what would be right."""

from __future__ import annotations

import difflib
import types
from collections.abc import Iterable
from typing import Annotated, Any, TypeVar, Union, get_args, get_origin

from pydantic import BaseModel, ValidationError

from advisor.errors import Fault
from advisor.settings.fields import NAME_FORM, OfKind
from advisor.settings.yaml_source import Steps, YamlSource, field_name

Model = TypeVar("Model", bound=BaseModel)


def read_model(
    model: type[Model],
    source: YamlSource,
    steps: Steps = (),
    context: dict[str, Any] | None = None,
) -> tuple[Model | None, list[Fault]]:
    """The model of the value at ``steps`` of ``source``, or None with everything wrong in it."""
    value = source.value
    for step in steps:
        value = value[step]
    try:
        return model.model_validate({} if value is None else value, context=context), []
    except ValidationError as error:
        return None, [_fault(each, model, source, steps) for each in error.errors()]


def nearest(word: str, known: Iterable[str]) -> str:
    """'Did you mean ...?' and the words known, for a ``word`` that is not among them."""
    words = list(known)
    close = difflib.get_close_matches(word.lower(), [one.lower() for one in words], n=1, cutoff=0.5)
    meant = next((one for one in words if close and one.lower() == close[0]), "")
    hint = f"Did you mean '{meant}'? " if meant else ""
    return f"{hint}Known here: {', '.join(words)}." if words else hint.rstrip()


def fault_at(source: YamlSource, steps: Steps, code: str, problem: str, remedy: str = "") -> Fault:
    """A fault at the value at ``steps`` of ``source``."""
    place = source.place(steps)
    return Fault(
        code,
        problem,
        remedy,
        file=source.file,
        line=place.line,
        column=place.column,
        field=field_name(steps),
        value=place.text if steps in source.places else "",
    )


_NEEDS = {
    "model_type": ("keys", "Write its keys below it, indented."),
    "dict_type": ("keys", "Write its keys below it, indented."),
    "tuple_type": ("a list", "Write each entry on a line that begins with '- '."),
    "list_type": ("a list", "Write each entry on a line that begins with '- '."),
    "bool_type": ("true or false", "Write true or false."),
    "int_type": ("a whole number", "Write a whole number without a unit."),
    "float_type": ("a number", "Write a number without a unit."),
}

_BOUNDS = {
    "greater_than": ("above", "gt"),
    "greater_than_equal": ("at least", "ge"),
    "less_than": ("below", "lt"),
    "less_than_equal": ("at most", "le"),
}


def _fault(error: Any, model: type[BaseModel], source: YamlSource, above: Steps) -> Fault:
    inside: Steps = tuple(error["loc"])
    steps = _as_written((*above, *inside), source, error["type"] == "missing")
    kind, given = error["type"], error["input"]
    written = source.place(steps).text if steps in source.places else ""
    context = error.get("ctx", {})
    code, remedy = kind.replace("_", "-"), ""
    if kind == "advisor":
        code, problem, remedy = context["code"], context["problem"], context["remedy"]
        if written and isinstance(given, str | int | float) and str(given) != written:
            remedy = f"{remedy} (YAML reads {written} as {given!r}.)"
    elif kind == "missing":
        name = str(inside[-1])
        code, problem = "missing", f"'{name}' is missing."
        remedy = f"Add '{name}': {_wanted(model, inside)}"
    elif kind == "extra_forbidden":
        name = str(inside[-1])
        code, problem = "unknown-key", f"'{name}' is not a key here."
        remedy = nearest(name, _fields_at(model, inside[:-1]))
        place = source.key_place(steps)
        return Fault(
            code, problem, remedy, source.file, place.line, place.column, field_name(steps), name
        )
    elif kind == "union_tag_invalid":
        words = _literal_words(context.get("expected_tags", ""))
        tag, key = str(context.get("tag", "")), context.get("discriminator", "").strip("'")
        code, problem = "unknown-word", f"'{tag}' is no {key} known here."
        remedy = nearest(tag, words)
    elif kind == "union_tag_not_found":
        key = context.get("discriminator", "").strip("'")
        code, problem = "missing", f"'{key}' is missing."
        remedy = f"Add '{key}' to say which of its kinds it is."
    elif kind == "literal_error":
        words = _literal_words(context.get("expected", ""))
        code, problem = "unknown-word", f"'{written or given}' is not one of the words known here."
        remedy = nearest(str(given), words)
    elif kind == "string_type":
        problem = f"This has to be text; YAML reads {written or 'it'} as {_yaml_words(given)}."
        remedy = f'Write it in quotes: "{written}".' if written else "Write text."
    elif kind in _NEEDS:
        what, remedy = _NEEDS[kind]
        problem = f"This has to be {what}; YAML reads it as {_yaml_words(given)}."
    elif kind == "string_pattern_mismatch":
        problem = f"'{given}' is not written as it should be."
        asked = "One line of text without a space at either end."
        remedy = asked if context["pattern"] == NAME_FORM else f"Wanted: {_wanted(model, inside)}"
    elif kind == "string_too_long":
        problem = f"This text has {len(given)} characters."
        remedy = f"Write at most {context['max_length']}."
    elif kind in ("string_too_short", "too_short"):
        least = context["min_length"]
        problem = "This may not be empty." if least == 1 else f"This needs at least {least} values."
        remedy = f"Wanted: {_wanted(model, inside)}"
    elif kind in _BOUNDS:
        bound, key = _BOUNDS[kind]
        problem = f"{written or given} is not {bound} {context[key]:g}."
        remedy = f"Write a number {bound} {context[key]:g}."
    else:
        problem = f"{error['msg']}."
    place = source.place(steps)
    return Fault(
        code,
        problem,
        remedy.strip(),
        source.file,
        place.line,
        place.column,
        field_name(steps),
        written,
    )


def _as_written(steps: Steps, source: YamlSource, last_is_missing: bool) -> Steps:
    """The steps as the file has them, without the kind a model was told apart by."""
    found: Steps = ()
    for at, step in enumerate(steps):
        kind = isinstance(step, str) and bool(found) and isinstance(found[-1], int)
        named = last_is_missing and at == len(steps) - 1
        if kind and not named and (*found, step) not in source.places:
            continue
        found = (*found, step)
    return found


def _yaml_words(value: Any) -> str:
    if value is None:
        return "nothing"
    if isinstance(value, bool):
        return f"the word {str(value).lower()}"
    if isinstance(value, dict | list):
        return "keys" if isinstance(value, dict) else "a list"
    return f"the number {value}" if isinstance(value, int | float) else f"the text '{value}'"


def _literal_words(expected: str) -> list[str]:
    return [word.strip(" '") for word in expected.replace(" or ", ", ").split(", ")]


def _wanted(model: type[BaseModel], inside: Steps) -> str:
    """What a missing field is: its meaning where it is told, else its kind."""
    parent = _model_at(model, inside[:-1])
    known = parent.model_fields.get(str(inside[-1])) if parent else None
    if known is None:
        return "it is needed."
    marks = [mark for mark in known.metadata if isinstance(mark, OfKind)]
    meaning = (known.description or "it is needed").split("\n")[0].rstrip(".")
    return f"{meaning}, {marks[0].example()}." if marks else f"{meaning}."


def _fields_at(model: type[BaseModel], inside: Steps) -> list[str]:
    parent = _model_at(model, inside)
    return list(parent.model_fields) if parent else []


def _model_at(model: type[BaseModel], inside: Steps) -> type[BaseModel] | None:
    """The model that reads the value ``inside`` a value read by ``model``."""
    kind: Any = model
    for step in inside:
        told_apart = _model_of_kind(kind, step)
        if told_apart is not None:
            kind = told_apart
            continue
        found = _model_in(kind)
        if found is None or isinstance(step, int) or step not in found.model_fields:
            kind = _part_of(kind)
        else:
            kind = found.model_fields[step].annotation
    return _model_in(kind)


def _model_of_kind(kind: Any, word: str | int) -> type[BaseModel] | None:
    """The model of a union whose kinds are told apart by the ``word`` one of its keys holds."""
    if get_origin(kind) is Annotated:
        return _model_of_kind(get_args(kind)[0], word)
    if get_origin(kind) not in (Union, types.UnionType) or not isinstance(word, str):
        return None
    for part in get_args(kind):
        model = _model_in(part)
        fields = model.model_fields.values() if model else ()
        if any(word in get_args(known.annotation) for known in fields):
            return model
    return None


def _model_in(kind: Any) -> type[BaseModel] | None:
    """The model a field's type is, where it is one (also 'or nothing')."""
    if isinstance(kind, type) and not get_args(kind) and issubclass(kind, BaseModel):
        return kind
    if get_origin(kind) in (Union, types.UnionType):
        return next((found for part in get_args(kind) if (found := _model_in(part))), None)
    return _model_in(get_args(kind)[0]) if get_origin(kind) is Annotated else None


def _part_of(kind: Any) -> Any:
    """The type of the entries of a list or of a table of named things."""
    if get_origin(kind) in (Union, types.UnionType):
        return next((_part_of(part) for part in get_args(kind) if get_args(part)), None)
    if get_origin(kind) is Annotated:
        return _part_of(get_args(kind)[0])
    if get_origin(kind) is dict:
        return get_args(kind)[1]
    return get_args(kind)[0] if get_origin(kind) in (tuple, list) else None
