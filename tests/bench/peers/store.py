"""Frames into an SQLite file in one transaction, by Python's own binding with the same settings."""
import os
import sqlite3
import time

held = {}


def setup(path, frames, size):
    connection = sqlite3.connect(path, isolation_level=None)
    connection.execute("PRAGMA page_size = 16384")
    connection.execute("PRAGMA journal_mode = WAL")
    connection.execute("PRAGMA synchronous = NORMAL")
    connection.execute("CREATE TABLE frames (id INTEGER PRIMARY KEY, run INTEGER NOT NULL, n INTEGER NOT NULL, body BLOB NOT NULL)")
    held.update(connection=connection, blobs=[os.urandom(size) for _ in range(frames)], run=0)


def store():
    connection = held["connection"]
    held["run"] += 1
    connection.execute("BEGIN IMMEDIATE")
    connection.executemany("INSERT INTO frames (run, n, body) VALUES (?, ?, ?)", [(held["run"], n, blob) for n, blob in enumerate(held["blobs"])])
    connection.execute("COMMIT")


def time_store(repetitions):
    """Wall time: waiting for the disk is part of it."""
    start = time.perf_counter()
    for _ in range(repetitions):
        store()
    return (time.perf_counter() - start) * 1e3 / repetitions
