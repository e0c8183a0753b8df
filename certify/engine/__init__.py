"""The engine: calls that run elsewhere, and whose results come back in order.

All work goes through the executors of the standard library's `concurrent.futures`,
so that one process, the processes of this machine and a cluster look the same:

    task        a function and its argument, both of which can be pickled
    batch       a few small tasks, or one large task, sent to a worker together
    worker      a process that runs batches, here or on another machine
    lost        a worker that ended, or a connection that broke, before the result came
    failure     what comes back for a task that raised, or whose workers were lost

The engine knows nothing of claims, graphs or evidence.
"""
