"""A long-lived peer: one JSON request a line on stdin, one JSON answer a line on stdout. A request names a module of this
folder and a function in it; the function times its own work, so that start-up, JSON and files stay outside the figure."""
import importlib
import json
import os
import sys

for name in ("OMP_NUM_THREADS", "OPENBLAS_NUM_THREADS", "MKL_NUM_THREADS"):
    os.environ[name] = "1"
sys.path.insert(0, os.path.dirname(os.path.abspath(__file__)))

for line in sys.stdin:
    request = json.loads(line)
    try:
        module, function = request["call"].split(".")
        answer = getattr(importlib.import_module(module), function)(**request.get("args", {}))
        print(json.dumps({"ok": answer}), flush=True)
    except Exception as error:  # told to the caller, who stops
        print(json.dumps({"failed": f"{type(error).__name__}: {error}"}), flush=True)
