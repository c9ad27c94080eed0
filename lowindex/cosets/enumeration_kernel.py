"""Kernels of Todd-Coxeter coset enumeration: plain Python bodies, compiled by numba, run in slices.

Arrays (n columns; column c and c ^ 1 belong to a letter and its inverse):
    table      int32 (capacity, n)   image or -1
    parent     int32 (capacity,)     union-find of cosets; a live coset is its own parent
    stack      int32 (depth, 2)      deductions (coset, column) still to be followed
    queue      int32 (capacity,)     cosets that died and are not yet merged
    words, starts, lengths           words as columns, one behind the other
    first      int32 (n + 1,)        the cyclic conjugates whose first column is c are number first[c] .. first[c + 1] - 1
    log        int32 (room, 3)       definitions and traces with a consequence, in order; no room: nothing is logged
    state      int64 (10,)           counters, named below
Status returned by a slice: 0 step cap reached, 1 table closed, 2 table full.
"""

import numpy as np
from numba import njit

# Places in `state`, written as literals below because numba's cache does not see changes of globals:
# 0 USED cosets numbered, 1 LIVE, 2 TOP of stack, 3 ROW and 4 COLUMN of the next slot to look at,
# 5 STEPS done in this slice, 6 OVERFLOW of the stack (1: some deductions were dropped), 7 PEAK of live cosets, 8 RELATOR to trace next,
# 9 LOGGED entries of the log


@njit(cache=True, nogil=True)
def _find(parent, coset):
    """The live representative, with path halving."""
    while parent[coset] != coset:
        parent[coset] = parent[parent[coset]]
        coset = parent[coset]
    return coset


@njit(cache=True, nogil=True)
def _push(stack, state, coset, column):
    """Remember a new entry of the table."""
    if state[2] < stack.shape[0]:
        stack[state[2], 0] = coset
        stack[state[2], 1] = column
        state[2] += 1
    else:
        state[6] = 1


@njit(cache=True, nogil=True)
def _note(log, state, kind, coset, number):
    """Log a definition (0, coset, column) or a trace with a consequence (1, coset, number of the word), while there is room."""
    if state[9] < log.shape[0]:
        log[state[9], 0] = kind
        log[state[9], 1] = coset
        log[state[9], 2] = number
        state[9] += 1


@njit(cache=True, nogil=True)
def _merge(parent, queue, state, filled, left, right):
    """Join two cosets; the greater one dies and is queued. Returns the length of the queue."""
    left = _find(parent, left)
    right = _find(parent, right)
    if left != right:
        if left > right:
            left, right = right, left
        parent[right] = left
        queue[filled] = right
        filled += 1
        state[1] -= 1
    return filled


@njit(cache=True, nogil=True)
def _coincide(table, parent, stack, queue, state, left, right):
    """Process the coincidence left = right with all its consequences."""
    filled = _merge(parent, queue, state, 0, left, right)
    done = 0
    while done < filled:
        dead = queue[done]
        done += 1
        for column in range(table.shape[1]):
            image = table[dead, column]
            if image < 0:
                continue
            table[dead, column] = -1
            if table[image, column ^ 1] == dead:
                table[image, column ^ 1] = -1
            state[5] += 1
            source = _find(parent, dead)
            target = _find(parent, image)
            if table[source, column] >= 0:
                filled = _merge(parent, queue, state, filled, target, table[source, column])
            elif table[target, column ^ 1] >= 0:
                filled = _merge(parent, queue, state, filled, source, table[target, column ^ 1])
            else:
                table[source, column] = target
                table[target, column ^ 1] = source
                _push(stack, state, source, column)


@njit(cache=True, nogil=True)
def _scan(table, parent, stack, queue, state, log, words, start, length, number, coset, fill):
    """Trace a word from both ends at a coset. A gap of one letter is a deduction, a closed trace with different ends a coincidence;
    with `fill` longer gaps are filled by new cosets. Returns False when the table is full. `number` is that of the word, for the log."""
    ahead = coset
    i = start
    j = start + length - 1
    behind = coset
    while True:
        while i <= j and table[ahead, words[i]] >= 0:
            ahead = table[ahead, words[i]]
            i += 1
            state[5] += 1
        if i > j:
            if ahead != behind:
                _note(log, state, 1, coset, number)
                _coincide(table, parent, stack, queue, state, ahead, behind)
            return True
        while j >= i and table[behind, words[j] ^ 1] >= 0:
            behind = table[behind, words[j] ^ 1]
            j -= 1
            state[5] += 1
        if j < i:
            _note(log, state, 1, coset, number)
            _coincide(table, parent, stack, queue, state, ahead, behind)
            return True
        if i == j:
            _note(log, state, 1, coset, number)
            table[ahead, words[i]] = behind
            table[behind, words[i] ^ 1] = ahead
            _push(stack, state, ahead, words[i])
            return True
        if not fill:
            return True
        if state[0] >= table.shape[0]:
            return False
        _define(table, parent, stack, state, log, ahead, words[i])


@njit(cache=True, nogil=True)
def _define(table, parent, stack, state, log, coset, column):
    """A new coset as the image of a slot (the table must have room)."""
    _note(log, state, 0, coset, column)
    new = state[0]
    parent[new] = new
    table[coset, column] = new
    table[new, column ^ 1] = coset
    state[0] += 1
    state[1] += 1
    if state[1] > state[7]:
        state[7] = state[1]
    _push(stack, state, coset, column)


@njit(cache=True, nogil=True)
def _follow(table, parent, stack, queue, state, log, words, starts, lengths, first, cap):
    """Follow the deductions on the stack; False when the step cap was reached before it was empty."""
    while state[2] > 0:
        if state[5] >= cap:
            return False
        state[2] -= 1
        coset = stack[state[2], 0]
        column = stack[state[2], 1]
        for k in range(first[column], first[column + 1]):
            if parent[coset] != coset:
                break
            _scan(table, parent, stack, queue, state, log, words, starts[k], lengths[k], k, coset, False)
    return True


@njit(cache=True, nogil=True)
def felsch_slice(table, parent, stack, queue, state, log, words, starts, lengths, first, cap):
    """Define the first empty slot in row order, follow every deduction, repeat."""
    state[5] = 0
    while True:
        if not _follow(table, parent, stack, queue, state, log, words, starts, lengths, first, cap):
            return 0
        if state[6] == 1:
            # Dropped deductions: scan everything once more, from the first row.
            state[6] = 0
            for coset in range(state[0]):
                for k in range(first[table.shape[1]]):
                    if parent[coset] != coset:
                        break
                    _scan(table, parent, stack, queue, state, log, words, starts[k], lengths[k], k, coset, False)
            continue
        row = state[3]
        column = state[4]
        while row < state[0] and (parent[row] != row or table[row, column] >= 0):
            state[5] += 1
            column += 1
            if column == table.shape[1] or parent[row] != row:
                column = 0
                row += 1
        state[3] = row
        state[4] = column
        if row >= state[0]:
            return 1
        if state[0] >= table.shape[0]:
            return 2
        _define(table, parent, stack, state, log, row, column)


@njit(cache=True, nogil=True)
def hlt_slice(table, parent, stack, queue, state, log, words, starts, lengths, cap):
    """Scan and fill every relator at every live coset in turn, then fill its row. Deductions are not followed."""
    state[5] = 0
    while state[3] < state[0]:
        row = state[3]
        if parent[row] == row:
            while state[8] < starts.shape[0]:
                if state[5] >= cap:
                    return 0
                if parent[row] != row:
                    break
                if not _scan(
                    table, parent, stack, queue, state, log, words, starts[state[8]], lengths[state[8]], state[8], row, True
                ):
                    return 2
                state[2] = 0
                state[8] += 1
            for column in range(table.shape[1]):
                if parent[row] == row and table[row, column] < 0:
                    if state[0] >= table.shape[0]:
                        return 2
                    _define(table, parent, stack, state, log, row, column)
                    state[2] = 0
        state[8] = 0
        state[3] += 1
        state[5] += 1
        if state[5] >= cap:
            return 0
    return 1


@njit(cache=True, nogil=True)
def lookahead_slice(table, parent, stack, queue, state, log, words, starts, lengths, row, cap):
    """Scan every relator at the live cosets from `row` on without filling; the row to go on with, or the number of rows used."""
    state[5] = 0
    while row < state[0] and state[5] < cap:
        for k in range(starts.shape[0]):
            if parent[row] != row:
                break
            _scan(table, parent, stack, queue, state, log, words, starts[k], lengths[k], k, row, False)
            state[2] = 0
        row += 1
        state[5] += 1
    return row


@njit(cache=True, nogil=True)
def begin(table, parent, stack, queue, state, log, words, starts, lengths):
    """Trace the generators of the subgroup at coset 0, filling; False when the table is too small for that."""
    for k in range(starts.shape[0]):
        if not _scan(table, parent, stack, queue, state, log, words, starts[k], lengths[k], k, 0, True):
            return False
    return True


@njit(cache=True, nogil=True)
def compact(table, parent, stack, state):
    """Renumber the live cosets 0, 1, ... in order and drop the dead ones; positions move along."""
    place = np.full(state[0], -1, np.int32)
    count = 0
    for coset in range(state[0]):
        if parent[coset] == coset:
            place[coset] = count
            count += 1
    row = state[3]
    while row < state[0] and place[row] < 0:
        row += 1
    if row != state[3]:
        state[4] = 0
        state[8] = 0
    state[3] = place[row] if row < state[0] else count
    for coset in range(state[0]):
        if place[coset] >= 0:
            for column in range(table.shape[1]):
                image = table[coset, column]
                table[place[coset], column] = place[image] if image >= 0 else -1
    kept = 0
    for k in range(state[2]):
        if place[stack[k, 0]] >= 0:
            stack[kept, 0] = place[stack[k, 0]]
            stack[kept, 1] = stack[k, 1]
            kept += 1
    state[2] = kept
    for coset in range(count):
        parent[coset] = coset
    for coset in range(count, state[0]):
        for column in range(table.shape[1]):
            table[coset, column] = -1
    state[0] = count
