"""Many tasks on several threads, with a bar of progress."""

from __future__ import annotations

import concurrent.futures
from typing import Callable, Iterable, Iterator, List, TypeVar

from ._arrays import whole

Task = TypeVar("Task")
Result = TypeVar("Result")


def watched(items: Iterable[Task], total: int, progress: bool) -> Iterable[Task]:
    """The items, with a bar on standard error where tqdm is installed."""
    if not progress:
        return items
    try:
        from tqdm.auto import tqdm
    except ImportError:
        return items
    bar: Iterable[Task] = tqdm(items, total=total)
    return bar


def blocks(count: int, size: int) -> List[slice]:
    """So many things as blocks of at most `size`."""
    return [slice(first, first + size) for first in range(0, count, size)]


def spread(
    work: Callable[[Task], Result], tasks: List[Task], threads: int = 1, progress: bool = False
) -> List[Result]:
    """``[work(task) for task in tasks]`` on so many threads.

    The library's calls release the interpreter's lock; results do not depend on the number of threads.
    """
    count = whole(threads, "threads", 1)
    if count == 1 or len(tasks) < 2:
        return [work(task) for task in watched(tasks, len(tasks), progress)]
    with concurrent.futures.ThreadPoolExecutor(count) as pool:
        results: Iterator[Result] = pool.map(work, tasks)
        try:
            return list(watched(results, len(tasks), progress))
        except BaseException:
            pool.shutdown(wait=True, cancel_futures=True)
            raise

