def campaign(array, timed, o):
    return {}, {}
