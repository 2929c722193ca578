"""Networks that several tests use: an invented department, and random ones."""

import random

from readiness.calculations.task_network import Task

SAMPLE = {  # sixteen tasks of an invented department: working days, and what they wait for
    "approve": (10, ""),
    "recalibrate": (25, ""),
    "buy-stand": (55, "approve"),
    "enable-mode": (15, "approve"),
    "cameras": (20, "approve"),
    "mark-floor": (5, "buy-stand"),
    "notify": (30, "approve"),
    "survey": (2, "enable-mode mark-floor"),
    "commission": (20, "recalibrate enable-mode mark-floor"),
    "phantom": (8, "commission"),
    "report": (10, "survey phantom"),
    "procedures": (15, "commission"),
    "training": (8, "cameras procedures"),
    "dry-run": (2, "report training"),
    "peer-review": (15, "report"),
    "release": (3, "notify dry-run peer-review"),
}


def sample() -> tuple[Task, ...]:
    """Return the sample network."""
    return tuple(Task(name, days, tuple(waits.split())) for name, (days, waits) in SAMPLE.items())


def random_network(seed: int) -> tuple[Task, ...]:
    """Return a random network without circles, its tasks in random order."""
    chance = random.Random(seed)
    names = [f"t{index}" for index in range(chance.randint(1, 25))]
    tasks = [
        Task(name, chance.randint(0, 30), tuple(other for other in names[:index] if chance.random() < 0.25))
        for index, name in enumerate(names)
    ]
    chance.shuffle(tasks)
    return tuple(tasks)
