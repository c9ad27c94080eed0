"""The compiled part of the search for homomorphisms onto a finite group."""

from numba import njit


@njit(cache=True, nogil=True)
def standard_action(elements, base, strides, lookup, images, order, table, number, queue):
    """The right action of the images of the generators on the elements that they generate, renumbered in the order in which reading the
    table row by row meets them. Returns how many there are; row k of `table` lists the images of point k under the generators."""
    for k in range(order):
        number[k] = -1
    number[0] = 0
    queue[0] = 0
    count = 1
    done = 0
    while done < count:
        element = queue[done]
        for g in range(images.shape[0]):
            right = images[g]
            key = 0
            for b in range(base.shape[0]):
                key += strides[b] * elements[right, elements[element, base[b]]]
            image = lookup[key]
            if number[image] < 0:
                number[image] = count
                queue[count] = image
                count += 1
            table[done, g] = number[image]
        done += 1
    return count
