/** The usual caution, once and briefly, where a page works with a laboratory field, lamp or laser. */
export function Cautions({ className = '' }: { className?: string }) {
  return (
    <aside aria-label="Safety in the laboratory" className={`note max-w-[46rem] border-l-2 border-lamp pl-3 ${className}`}>
      Strong magnets act on implants and on ferromagnetic objects: access is commonly limited where the field exceeds 0.5&#8239;mT, and the limit
      that applies is your site’s and your country’s. Discharge lamps carry high voltage and emit ultraviolet; lasers need eye protection. Follow the
      site’s safety officer, local rules and licensed practice. The numbers here are predictions, not a calibration certificate.
    </aside>
  )
}
