"""Files and digests, nothing else: numbered editions, their lists of digests, and the register of what happened.

The room knows nothing of statistics and reads no clock: times are handed to it as text.
"""
