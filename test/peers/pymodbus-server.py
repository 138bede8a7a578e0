"""A Modbus RTU slave by pymodbus, not written here: input register n reads 1000 + n; holding registers keep what is written."""
import sys

from pymodbus.datastore import ModbusSequentialDataBlock, ModbusServerContext, ModbusSlaveContext
from pymodbus.server import StartSerialServer
from pymodbus.transaction import ModbusRtuFramer

store = ModbusSlaveContext(
    di=ModbusSequentialDataBlock(0, [1, 0] * 50),
    co=ModbusSequentialDataBlock(0, [0] * 100),
    hr=ModbusSequentialDataBlock(0, [0] * 200),
    ir=ModbusSequentialDataBlock(0, [1000 + n for n in range(200)]),
    zero_mode=True,
)
print("serving", flush=True)
StartSerialServer(
    context=ModbusServerContext(slaves={17: store}, single=False),
    framer=ModbusRtuFramer,
    port=sys.argv[1],
    baudrate=115200,
    timeout=0.005,
)
