/** A place in degrees and decimal minutes: 47° 18.600′ N, 9° 07.200′ E. */
export function degreesMinutes(latitudeDeg: number, longitudeDeg: number): string {
  return `${angle(latitudeDeg, 'N', 'S')}, ${angle(longitudeDeg, 'E', 'W')}`
}

function angle(degrees: number, positive: string, negative: string): string {
  // In thousandths of a minute first, so that 59.9996 minutes become a whole degree.
  const thousandths = Math.round(Math.abs(degrees) * 60_000)
  const whole = Math.floor(thousandths / 60_000)
  const minutes = ((thousandths % 60_000) / 1000).toFixed(3).padStart(6, '0')
  return `${whole}°\u00a0${minutes}′\u00a0${degrees < 0 ? negative : positive}`
}
