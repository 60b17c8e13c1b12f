"""Temperature advice for a hot-mix asphalt plant: setpoints, their limits, reasons and cost."""

__version__ = "0.1.0"
