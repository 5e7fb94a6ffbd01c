/** Hours as a note writes them: two figures below ten, whole hours above. */
export function hoursText(hours: number): string {
  return hours < 10 ? `${hours.toPrecision(2)} h` : `${Math.round(hours)} h`;
}
