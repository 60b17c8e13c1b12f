"""Settings: the plant folder's YAML files and the tables of config/, read, checked and frozen."""

from advisor.settings.cautions import caution_text
from advisor.settings.faults import nearest, read_model
from advisor.settings.folder import PlantFolder, read_plant
from advisor.settings.limits import PublishedLimit, load_limits, published_limits
from advisor.settings.mixes import Job, Mix
from advisor.settings.moments import local_text, utc_of
from advisor.settings.plant import OwnLimit, Plant, Silo, Tank
from advisor.settings.shipped import shipped_folder
from advisor.settings.signals import LogSource, Signals
from advisor.settings.tables import Row, Table, load_table, names_in
from advisor.settings.yaml_source import YamlSource, read_yaml

__all__ = [
    "Job",
    "LogSource",
    "Mix",
    "OwnLimit",
    "Plant",
    "PlantFolder",
    "PublishedLimit",
    "Row",
    "Signals",
    "Silo",
    "Table",
    "Tank",
    "YamlSource",
    "caution_text",
    "load_limits",
    "load_table",
    "local_text",
    "names_in",
    "nearest",
    "published_limits",
    "read_model",
    "read_plant",
    "read_yaml",
    "shipped_folder",
    "utc_of",
]
