"""Kernel of the low-index search: backtrack over partial standard coset tables. A plain Python body, compiled by numba, run in slices.

Points are numbered from 1, and 0 stands for "not defined". Slot (p << shift) + c of the table holds the image of point p under column c;
row 0 and unused columns stay 0, so that a trace ends there without a test of bounds. Integers that serve as indices are unsigned, for
the compiler then leaves out the treatment of negative ones; and the search is one function, for arrays handed to another
one are counted as references at every call, which costs more than the work (measured: four times slower).

    table     (index + 1 << shift,)  images
    edges     one slot of every edge, in the order in which they were defined
    slots, values, marks   the branching slots above the present node, the image tried in each, and marks (3, depth): the number of
              points, edges and moves before
    forward, backward      the rotations of the words without their first letter as columns, and the inverse columns read from their ends;
              each closed by an unused column
    starts, ends, kinds    where a rotation begins and ends in them; kind 0: it must close everywhere, 1: nowhere
    first     rotations that begin with column c are number first[c] .. first[c + 1] - 1
    inverses  the inverse of every column
    solid     columns from this one on are defined at point 1 only, and never deduced
    symmetry  (symmetries, width)  the standard form is the least over all base points and these permutations of columns, the identity
              first; columns from `width` on do not count for it
Comparison of the table with itself seen from base b under symmetry s, at place s * (index + 1) + b:
    label, named   (places * (index + 1),)  numbers given to points, and points by number
    at, count, wait   (places,)  the slot compared next, the numbers given, the slot whose definition lets it go on (0: decided)
    moves     (4, room)  place, at, count, wait before each change
Results:
    counts    int64 (3, index + 1)  classes, subgroups, normal subgroups by index
    found     int16 (room, index, width)  complete tables with points and images from 0; no room: they are only counted
    sizes     int64 (room, 2)  their points, and how many places show the same table, that of the identity at base 1 included
    state     int64: 0 POINTS, 1 DEPTH, 2 EDGES, 3 MOVES, 4 BELOW (1: go down from the present table first), 5 STEPS, 6 NODES, 7 TRIALS,
              8 FOUND, 9 FLOOR (the depth at which the search is over), 10 REPLAY (values to be read from `values`, the last one as done)
Modes: 0 every subgroup, 1 one of each class, 2 normal subgroups only.
Status: 0 step cap reached or replay done, 1 `found` is full, 2 the search is over, 3 `moves` is full.
"""

import numpy as np
from numba import njit


@njit(cache=True, nogil=True)
def search_slice(
    table, edges, slots, values, marks, forward, backward, starts, ends, kinds, first, inverses, solid, symmetry,
    label, named, at, count, wait, moves, counts, found, sizes, state, index, mode, shift, cap,
):
    """Go on with the search."""
    zero = np.uint32(0)
    one = np.uint32(1)
    mask = (one << shift) - one
    width = np.uint32(symmetry.shape[1])
    symmetries = np.uint32(symmetry.shape[0])
    points = np.uint32(state[0])
    depth = np.uint32(state[1])
    filled = np.uint32(state[2])
    moved = np.uint32(state[3])
    floor = np.uint32(state[9])
    replay = np.uint32(state[10])
    steps = zero
    descend = state[4] == 1
    state[8] = 0
    status = -1
    while status < 0:
        # down: open the first empty slot in row order, or count a complete table
        if descend:
            descend = False
            slot = one << shift
            if depth > 0:
                slot = slots[depth - one]
            elif width == 0:
                slot = (points + one) << shift
            while slot >> shift <= points and table[slot] != 0:
                slot += one
                if slot & mask == width:
                    slot = ((slot >> shift) + one) << shift
            if slot >> shift <= points:
                slots[depth] = slot
                if replay == 0:
                    values[depth] = 0
                marks[0, depth] = points
                marks[1, depth] = filled
                marks[2, depth] = moved
                depth += one
                if replay == depth:
                    replay = zero
                    status = 0
                    break
            else:
                equal = 1
                for s in range(symmetries):
                    for base in range(one, points + one):
                        if at[s * (index + one) + base] >> shift > points:
                            equal += 1
                size = np.int64(points)
                counts[0, size] += 1
                counts[1, size] += size * symmetry.shape[0] // equal
                counts[2, size] += size * symmetry.shape[0] == equal
                if state[8] < found.shape[0]:
                    for point in range(points):
                        for column in range(width):
                            found[state[8], point, column] = np.int64(table[((point + one) << shift) + column]) - 1
                    sizes[state[8], 0] = size
                    sizes[state[8], 1] = equal
                    state[8] += 1
                    if state[8] == found.shape[0]:
                        status = 1
                        break
        if depth == floor:
            status = 2
            break
        if steps >= cap:
            status = 0
            break
        if moved + symmetries * index > moves.shape[1]:
            status = 3
            break
        # back: undo what the value tried last had entailed
        top = depth - one
        points = marks[0, top]
        while filled > marks[1, top]:
            filled -= one
            slot = edges[filled]
            table[(table[slot] << shift) + inverses[slot & mask]] = 0
            table[slot] = 0
        while moved > marks[2, top]:
            moved -= one
            place = moves[0, moved]
            offset = place * (index + one)
            for k in range(moves[2, moved] + one, count[place] + one):
                label[offset + named[offset + k]] = 0
            at[place] = moves[1, moved]
            count[place] = moves[2, moved]
            wait[place] = moves[3, moved]
        # next: another value
        slot = slots[top]
        column = inverses[slot & mask]
        image = values[top] + one
        while image <= points and table[(image << shift) + column] != 0:
            image += one
        if image > points + one or image > index:
            depth -= one
            continue
        values[top] = image
        state[7] += 1
        steps += one
        before = points if top > 0 else zero
        if image > points:
            points = image
        table[slot] = image
        table[(image << shift) + column] = slot >> shift
        done = filled
        edges[filled] = slot
        filled += one
        good = True
        while good and done < filled:
            # deductions, through one slot of every new edge: the rotations of inverses see the other
            while done < filled:
                slot = edges[done]
                done += one
                point = slot >> shift
                column = slot & mask
                other = table[slot]
                for k in range(first[column], first[column + one]):
                    i = starts[k]
                    ahead = other
                    image = table[(ahead << shift) + forward[i]]
                    while image != 0:
                        ahead = image
                        i += one
                        image = table[(ahead << shift) + forward[i]]
                    if i == ends[k]:
                        if (ahead != point) == (kinds[k] == 0):
                            good = False
                            break
                        continue
                    j = starts[k]
                    behind = point
                    image = table[(behind << shift) + backward[j]]
                    while image != 0:
                        behind = image
                        j += one
                        image = table[(behind << shift) + backward[j]]
                    steps += i + j + one - starts[k] - starts[k]
                    if i + j + one >= starts[k] + ends[k] and kinds[k] == 0:
                        if i + j + one > starts[k] + ends[k]:
                            good = False
                            break
                        if forward[i] >= solid:
                            continue
                        slot = (ahead << shift) + forward[i]
                        table[slot] = behind
                        table[(behind << shift) + backward[j]] = ahead
                        edges[filled] = slot
                        filled += one
                if not good:
                    break
            if not good:
                break
            # comparisons
            for s in range(symmetries):
                for base in range(one, points + one):
                    place = s * (index + one) + base
                    if base <= before and table[wait[place]] == 0:
                        continue
                    if s + base == one:
                        continue
                    offset = place * (index + one)
                    moves[0, moved] = place
                    moves[1, moved] = at[place]
                    moves[2, moved] = count[place]
                    moves[3, moved] = wait[place]
                    moved += one
                    if base > before:
                        at[place] = one << shift
                        count[place] = one
                        label[offset + base] = one
                        named[offset + one] = base
                    row = at[place] >> shift
                    column = at[place] & mask
                    known = count[place]
                    stop = zero
                    while row <= points:
                        steps += one
                        slot = (row << shift) + column
                        twin = (named[offset + row] << shift) + symmetry[s, column]
                        here = table[slot]
                        there = table[twin]
                        if mode == 2 and here == 0 and there != 0 and label[offset + there] != 0:
                            here = label[offset + there]
                            if table[(here << shift) + inverses[column]] != 0:
                                good = False
                                break
                            table[slot] = here
                            table[(here << shift) + inverses[column]] = row
                            edges[filled] = slot
                            filled += one
                        if mode == 2 and there == 0 and here != 0 and here <= known:
                            there = named[offset + here]
                            if table[(there << shift) + inverses[symmetry[s, column]]] != 0:
                                good = False
                                break
                            table[twin] = there
                            table[(there << shift) + inverses[symmetry[s, column]]] = named[offset + row]
                            edges[filled] = twin
                            filled += one
                        if here == 0:
                            stop = slot
                            break
                        if there == 0:
                            stop = twin
                            break
                        number = label[offset + there]
                        if number == 0:
                            known += one
                            label[offset + there] = known
                            named[offset + known] = there
                            number = known
                        if number != here:
                            good = mode == 0 or (mode == 1 and number > here)
                            break
                        column += one
                        if column == width:
                            column = zero
                            row += one
                    at[place] = (row << shift) + column
                    count[place] = known
                    wait[place] = stop
                    if not good:
                        break
                if not good:
                    break
            before = points
        if good:
            state[6] += 1
            descend = True
    state[0] = points
    state[1] = depth
    state[2] = filled
    state[3] = moved
    state[4] = descend
    state[5] = np.int64(steps)
    state[10] = replay
    return status


@njit(cache=True, nogil=True)
def least_forms(tables, sizes, every):
    """Put each of the tables (count, index, columns) into standard form, seen from point 0 or, with `every`, from the point that makes it
    least."""
    best = np.zeros((tables.shape[1], tables.shape[2]), np.int16)
    label = np.zeros(tables.shape[1], np.int64)
    named = np.zeros(tables.shape[1], np.int64)
    for number in range(tables.shape[0]):
        size = sizes[number]
        for base in range(size if every else 1):
            for point in range(size):
                label[point] = -1
            label[base] = 0
            named[0] = base
            known = 1
            smaller = base == 0
            larger = False
            for row in range(size):
                for column in range(tables.shape[2]):
                    image = tables[number, named[row], column]
                    if label[image] < 0:
                        label[image] = known
                        named[known] = image
                        known += 1
                    if not smaller and label[image] != best[row, column]:
                        smaller = label[image] < best[row, column]
                        larger = not smaller
                    if larger:
                        break
                    best[row, column] = label[image]
                if larger:
                    break
        for row in range(size):
            for column in range(tables.shape[2]):
                tables[number, row, column] = best[row, column]
