"""Kernel of Todd-Coxeter coset enumeration: a plain Python body, compiled by numba, run in slices.

Cosets are numbered from 1, and 0 stands for "not defined"; row 0 is not used. Integers that serve as indices are unsigned, for the compiler
then leaves out the treatment of negative ones; and the enumeration is one function, for arrays handed to another one are counted as
references at every call, which costs more than the work.

    table      (capacity + 1, columns)  images
    parent     (capacity + 1,)  union-find of cosets; a live coset is its own parent
    stack      (depth, 2)    edges (coset, column) whose consequences are not yet followed
    queue      (capacity + 1,)  cosets that died and are not yet merged
    words, starts, ends      words as columns one behind the other: rotations of relators and inverses, relators, generators of the subgroup
    first      (columns + 3,)  rotations that begin with column c are number first[c] .. first[c + 1] - 1, relators those from
               first[columns] on, generators those from first[columns + 1] on
    inverses   (columns,)  the inverse of every column
    log        int32 (room, 3)  definitions (0, coset, column) and traces with a consequence (1, coset, number of the word), in order; no
               room: nothing is logged
    state      int64: 0 USED cosets numbered, 1 LIVE, 2 TOP of the stack, 3 ROW and 4 COLUMN to go on at, 5 STEPS, 6 LOST (1: the
               stack overflowed, so all relators must be traced again everywhere), 7 PEAK of live cosets, 8 BEGUN (1: the generators
               of the subgroup are traced), 9 LOGGED, 10 LOOK (the row at which relators are traced without filling; 0: none)
Strategies: 0 Felsch, 1 HLT, 2 mixed (HLT, but every edge is followed).
Status: 0 step cap reached, 1 the table is closed, 2 the table is full.
"""

import numpy as np
from numba import njit


@njit(cache=True, nogil=True)
def enumerate_slice(table, parent, stack, queue, words, starts, ends, first, inverses, log, state, strategy, cap):
    """Go on with the enumeration."""
    zero = np.uint32(0)
    one = np.uint32(1)
    two = np.uint32(2)
    columns = np.uint32(table.shape[1])
    capacity = np.uint32(table.shape[0]) - one
    used = np.uint32(state[0])
    live = np.uint32(state[1])
    top = np.uint32(state[2])
    row = np.uint32(state[3])
    slot = np.uint32(state[4])
    look = np.uint32(state[10])
    steps = zero
    coset = zero
    k = zero
    last = zero
    fill = False
    resumed = False
    wanted = zero
    wanted_column = zero
    i = zero
    j = zero
    ahead = zero
    behind = zero
    status = -1
    while status < 0:
        # define a coset as the image of an empty slot
        if wanted != 0:
            if used >= capacity:
                status = 2
                break
            if state[9] < log.shape[0]:
                log[state[9], 0] = 0
                log[state[9], 1] = wanted
                log[state[9], 2] = wanted_column
                state[9] += 1
            used += one
            live += one
            if live > state[7]:
                state[7] = live
            parent[used] = used
            table[wanted, wanted_column] = used
            table[used, inverses[wanted_column]] = wanted
            if strategy != 1:
                if top < stack.shape[0]:
                    stack[top, 0] = wanted
                    stack[top, 1] = wanted_column
                    top += one
                else:
                    state[6] = 1
            wanted = zero
        # choose what to trace where
        if k == last:
            if fill and state[8] == 0:
                state[8] = 1
                fill = False
            if fill:
                if parent[coset] == coset:
                    for column in range(columns):
                        if table[coset, column] == 0:
                            wanted = coset
                            wanted_column = column
                            break
                    if wanted != 0:
                        continue
                row += one
                fill = False
            if steps >= cap:
                status = 0
                break
            steps += one
            if top > 0:
                top -= one
                coset = stack[top, 0]
                if parent[coset] == coset:
                    k = first[stack[top, 1]]
                    last = first[stack[top, 1] + one]
            elif state[6] == 1 and look == 0:
                state[6] = 0
                look = one
            elif look != 0:
                coset = look
                look += one
                if coset > used:
                    look = zero
                elif parent[coset] == coset:
                    k = first[columns]
                    last = first[columns + one]
            elif state[8] == 0:
                coset = one
                fill = True
                k = first[columns + one]
                last = first[columns + two]
            elif strategy == 0:
                while row <= used and (parent[row] != row or table[row, slot] != 0):
                    steps += one
                    slot += one
                    if slot == columns or parent[row] != row:
                        slot = zero
                        row += one
                if row > used:
                    status = 1
                else:
                    wanted = row
                    wanted_column = slot
            else:
                while row <= used and parent[row] != row:
                    row += one
                if row > used:
                    status = 1
                else:
                    coset = row
                    fill = True
                    k = first[columns]
                    last = first[columns + one]
            continue
        # trace a word from both ends
        if not resumed:
            if parent[coset] != coset:
                k = last
                continue
            i = starts[k]
            j = ends[k]
            ahead = coset
            behind = coset
        resumed = False
        steps += one
        while i != j and table[ahead, words[i]] != 0:
            ahead = table[ahead, words[i]]
            i += one
            steps += one
        while i != j and table[behind, inverses[words[j - one]]] != 0:
            behind = table[behind, inverses[words[j - one]]]
            j -= one
            steps += one
        if j > i + one:
            if fill:
                wanted = ahead
                wanted_column = words[i]
                resumed = True
            else:
                k += one
            continue
        if i == j and ahead == behind:
            k += one
            continue
        if state[9] < log.shape[0]:
            log[state[9], 0] = 1
            log[state[9], 1] = coset
            log[state[9], 2] = k
            state[9] += 1
        k += one
        if i != j:
            table[ahead, words[i]] = behind
            table[behind, inverses[words[i]]] = ahead
            if strategy != 1:
                if top < stack.shape[0]:
                    stack[top, 0] = ahead
                    stack[top, 1] = words[i]
                    top += one
                else:
                    state[6] = 1
            continue
        # a coincidence: join the two cosets, and what follows from the rows of those that die
        queued = zero
        done = zero
        column = columns
        more = True
        while more:
            while parent[ahead] != ahead:
                parent[ahead] = parent[parent[ahead]]
                ahead = parent[ahead]
            while parent[behind] != behind:
                parent[behind] = parent[parent[behind]]
                behind = parent[behind]
            if ahead != behind:
                if ahead > behind:
                    ahead, behind = behind, ahead
                parent[behind] = ahead
                queue[queued] = behind
                queued += one
                live -= one
            more = False
            while not more:
                if column == columns:
                    if done == queued:
                        break
                    column = zero
                    done += one
                dead = queue[done - one]
                image = table[dead, column]
                inverse = inverses[column]
                if image != 0:
                    table[dead, column] = 0
                    if table[image, inverse] == dead:
                        table[image, inverse] = 0
                    steps += one
                    source = dead
                    while parent[source] != source:
                        parent[source] = parent[parent[source]]
                        source = parent[source]
                    target = image
                    while parent[target] != target:
                        parent[target] = parent[parent[target]]
                        target = parent[target]
                    if table[source, column] != 0:
                        ahead = target
                        behind = table[source, column]
                        more = True
                    elif table[target, inverse] != 0:
                        ahead = source
                        behind = table[target, inverse]
                        more = True
                    else:
                        table[source, column] = target
                        table[target, inverse] = source
                        if strategy != 1:
                            if top < stack.shape[0]:
                                stack[top, 0] = source
                                stack[top, 1] = column
                                top += one
                            else:
                                state[6] = 1
                column += one
    state[0] = used
    state[1] = live
    state[2] = top
    state[3] = row
    state[4] = slot
    state[5] = np.int64(steps)
    state[10] = look
    return status


@njit(cache=True, nogil=True)
def compact(table, parent, stack, place, state):
    """Renumber the live cosets 1, 2, ... in order and drop the dead ones; positions move along. `place` (capacity + 1,) is work space."""
    used = state[0]
    count = 0
    place[0] = 0
    for coset in range(1, used + 1):
        place[coset] = 0
        if parent[coset] == coset:
            count += 1
            place[coset] = count
    row = state[3]
    while row <= used and place[row] == 0:
        row += 1
    if row != state[3]:
        state[4] = 0
    state[3] = place[row] if row <= used else count + 1
    for coset in range(1, used + 1):
        if place[coset] != 0:
            for column in range(table.shape[1]):
                table[place[coset], column] = place[table[coset, column]]
    kept = 0
    for k in range(state[2]):
        if place[stack[k, 0]] != 0:
            stack[kept, 0] = place[stack[k, 0]]
            stack[kept, 1] = stack[k, 1]
            kept += 1
    state[2] = kept
    for coset in range(1, count + 1):
        parent[coset] = coset
    for coset in range(count + 1, used + 1):
        for column in range(table.shape[1]):
            table[coset, column] = 0
    state[0] = count


@njit(cache=True, nogil=True)
def standard(table, rows, used, choice):
    """Write the closed, compacted table into `rows` int32 (cosets, columns of the result) in standard form, from 0: column c of the result
    is column choice[c] of the table."""
    place = np.zeros(used + 1, np.uint32)
    order = np.zeros(used, np.uint32)
    place[1] = 1
    order[0] = 1
    count = np.uint32(1)
    for row in range(used):
        for c in range(choice.shape[0]):
            image = table[order[row], choice[c]]
            if place[image] == 0:
                order[count] = image
                count += np.uint32(1)
                place[image] = count
            rows[row, c] = np.int64(place[image]) - 1
