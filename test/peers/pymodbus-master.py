"""Reads and writes a Modbus RTU slave with pymodbus, a master not written here. Prints one JSON line."""
import json
import sys

from pymodbus.client import ModbusSerialClient

port = sys.argv[1]
client = ModbusSerialClient(port=port, baudrate=115200, timeout=2)
assert client.connect()
identity = client.read_input_registers(26, 1, slave=1).registers
inputs = client.read_input_registers(0, 28, slave=1).registers
written = client.write_registers(3, [8500], slave=1)
single = client.write_register(4, 1200, slave=1)
held = client.read_holding_registers(3, 2, slave=1).registers
missing = client.read_input_registers(400, 1, slave=1)
print(
    json.dumps(
        {
            "identity": identity,
            "inputs": inputs,
            "held": held,
            "written": not written.isError() and not single.isError(),
            "missing": getattr(missing, "exception_code", None),
        }
    )
)
client.close()
