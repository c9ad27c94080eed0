"""Kernel of the low-index search: backtrack over partial standard coset tables. A plain Python body, compiled by numba, run in slices.

Arrays (n columns; inv[c] is the column of the inverse letter, c itself for an involution):
    table      int32 (index * n,)   image of point i under column c at i * n + c, or -1
    trail      int32                slots in the order in which they were filled (both ends of every edge)
    slot, value, mark, points       int32: the branching slots above the present node, the image tried there, the length of the trail
                                    and the number of points before
    words, starts, lengths, first   rotations of relators and inverses as columns; those that begin with column c are number
                                    first[c] .. first[c + 1] - 1
    label, named                    int32 (index,): work space of the first-in-class test
    counts     int64 (3, index + 1) classes, subgroups, normal subgroups by index
    state      int64: 0 POINTS, 1 DEPTH, 2 TRAIL, 3 PHASE (0 go on below, 1 next value), 4 STEPS, 5 NODES, 6 TRIALS, 7 NORMALISER
Status: 0 step cap reached, 1 a table is complete (it stands in `table`, POINTS rows), 2 the search is over.
"""

from numba import njit


@njit(cache=True, nogil=True)
def _fill(table, trail, state, inv, n, point, column, image):
    """Fill a slot and the slot of its inverse."""
    table[point * n + column] = image
    trail[state[2]] = point * n + column
    state[2] += 1
    if table[image * n + inv[column]] < 0:
        table[image * n + inv[column]] = point
        trail[state[2]] = image * n + inv[column]
        state[2] += 1


@njit(cache=True, nogil=True)
def _deduce(table, trail, state, inv, n, words, starts, lengths, first, done):
    """Trace every rotation of a relator through every edge of the trail from place `done` on, from both ends; fill what is forced.
    False when a relator does not close."""
    while done < state[2]:
        start_point = trail[done] // n
        start_column = trail[done] % n
        done += 1
        for k in range(first[start_column], first[start_column + 1]):
            i = starts[k]
            j = i + lengths[k] - 1
            ahead = start_point
            behind = start_point
            while i <= j:
                image = table[ahead * n + words[i]]
                if image < 0:
                    break
                ahead = image
                i += 1
                state[4] += 1
            if i > j:
                if ahead != behind:
                    return False
                continue
            while j > i:
                image = table[behind * n + inv[words[j]]]
                if image < 0:
                    break
                behind = image
                j -= 1
                state[4] += 1
            if i == j:
                if table[behind * n + inv[words[i]]] >= 0:
                    return False
                _fill(table, trail, state, inv, n, ahead, words[i], behind)
    return True


@njit(cache=True, nogil=True)
def _first_in_class(table, state, n, label, named):
    """Whether no other base point gives a smaller standard table, as far as both are known. On a complete table NORMALISER counts the
    base points whose standard table is the same."""
    points = state[0]
    same = 1
    for base in range(1, points):
        for point in range(points):
            label[point] = -1
        label[base] = 0
        named[0] = base
        count = 1
        equal = True
        smaller = False
        for point in range(points):
            if point >= count:
                equal = False
                break
            row = named[point] * n
            for column in range(n):
                here = table[point * n + column]
                there = table[row + column]
                state[4] += 1
                if here < 0 or there < 0:
                    equal = False
                    break
                if label[there] < 0:
                    label[there] = count
                    named[count] = there
                    count += 1
                if label[there] != here:
                    equal = False
                    smaller = label[there] < here
                    break
            if not equal:
                break
        if smaller:
            return False
        if equal:
            same += 1
    state[7] = same
    return True


@njit(cache=True, nogil=True)
def search_slice(
    table, trail, slot, value, mark, points, words, starts, lengths, first, inv, label, named, counts, state, index, listing, cap
):
    """Go on with the search. With `listing` it stops at every complete table, otherwise it only counts them."""
    n = inv.shape[0]
    state[4] = 0
    while True:
        if state[4] >= cap:
            return 0
        state[4] += 1
        if state[3] == 0:
            place = slot[state[1] - 1] if state[1] > 0 else 0
            while place < state[0] * n and table[place] >= 0:
                place += 1
            if place < state[0] * n:
                slot[state[1]] = place
                value[state[1]] = -1
                mark[state[1]] = state[2]
                points[state[1]] = state[0]
                state[1] += 1
                state[3] = 1
                continue
            state[3] = 1
            size = state[0]
            if not _first_in_class(table, state, n, label, named):
                continue
            counts[0, size] += 1
            counts[1, size] += size // state[7]
            if state[7] == size:
                counts[2, size] += 1
            if listing:
                return 1
            continue
        if state[1] == 0:
            return 2
        top = state[1] - 1
        while state[2] > mark[top]:
            state[2] -= 1
            table[trail[state[2]]] = -1
        state[0] = points[top]
        place = slot[top]
        point = place // n
        column = place % n
        image = value[top] + 1
        while image < state[0] and table[image * n + inv[column]] >= 0:
            image += 1
        if image > state[0] or image >= index:
            state[1] -= 1
            continue
        value[top] = image
        state[6] += 1
        if image == state[0]:
            state[0] += 1
        _fill(table, trail, state, inv, n, point, column, image)
        if not _deduce(table, trail, state, inv, n, words, starts, lengths, first, mark[top]):
            continue
        if _first_in_class(table, state, n, label, named):
            state[5] += 1
            state[3] = 0
