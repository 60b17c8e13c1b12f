"""The tool reads and advises; nothing in it can write to a plant's controls."""

from __future__ import annotations

import ast

import pytest

from project.sources import modules, name_of, tree

# How the usual libraries for OPC UA, MQTT and Modbus write: asyncua, paho-mqtt, pymodbus.
WRITE_CALLS = {
    "call_method",
    "mask_write_register",
    "publish",
    "readwrite_registers",
    "set_attribute",
    "set_data_value",
    "set_value",
    "set_values",
    "set_writable",
    "write_attribute",
    "write_attribute_value",
    "write_coil",
    "write_coils",
    "write_file_record",
    "write_register",
    "write_registers",
    "write_value",
    "write_values",
}
# Libraries made for talking to controllers, which we have no use for.
CONTROLLER_LIBRARIES = {"bacpypes3", "minimalmodbus", "pycomm3", "pylogix", "pymodbus", "snap7"}


def writes(module: ast.Module) -> set[str]:
    """Every name in ``module`` that writes to a control system, called or only mentioned."""
    found = set()
    for node in ast.walk(module):
        if isinstance(node, ast.Attribute):
            found.add(node.attr)
        elif isinstance(node, ast.Name):
            found.add(node.id)
        elif isinstance(node, ast.ImportFrom):
            found |= {name.name for name in node.names} | {(node.module or "").partition(".")[0]}
        elif isinstance(node, ast.Import):
            found |= {name.name.partition(".")[0] for name in node.names}
    return found & (WRITE_CALLS | CONTROLLER_LIBRARIES)


def test_nothing_writes_to_a_control_system() -> None:
    found = {name_of(path): writes(tree(path)) for path in modules()}
    assert not {name: calls for name, calls in found.items() if calls}


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("await node.write_value(160.0)", "write_value"),
        ("client.publish('drum/setpoint', 160)", "publish"),
        ("send = client.write_register", "write_register"),
        ("from asyncua.ua import write_values", "write_values"),
        ("import snap7.client", "snap7"),
    ],
)
def test_a_write_is_found(text: str, found: str) -> None:
    assert writes(ast.parse(text)) == {found}
