import type { QuantityKey } from '../units/types.ts';

/** Headers of columns that stand beside a value and are none: read as values they would be wrong in silence. */
export const besideWords: readonly (readonly ['uncertainty' | 'literature value' | 'mark or deviation', RegExp])[] = [
  ['mark or deviation', /%|percent|prozent|pour ?cent|por ?ciento|\b(points?|score|grade|feedback|marks?|credit|punkte?|bewertung|puntos|puntuaci[óo]n|nota|calificaci[óo]n)\b|deviation from|difference|abweichung|[ée]cart (à|avec|relatif)|diferencia|residual/i],
  ['literature value', /\b(literature|lit\.?|handbook|published|accepted|expected|theoretical|reference|true|literatur(wert)?|litwert|sollwert|litt[ée]rature|publi[ée]e?|th[ée]orique|literatura|publicado|te[óo]rico)\b/i],
  ['uncertainty', /uncertaint|std\.? ?(err|dev)|standard (error|deviation)|\berr(or|\.)?\b|unsicherheit|\bfehler|standardabweichung|incertitude|\berreur|[ée]cart[- ]?type|incertidumbre|desviaci[óo]n|^(u|s|σ|δ|Δ|sigma|delta|sd|se|err|unc)\.? ?[_( ] ?\(?[a-zA-Zα-ωṽν]|^[δΔσ±] ?[a-zA-Zα-ω]|^\+\/-/i],
]; // prettier-ignore
/** A value that is asked for with its uncertainty in one cell. */
export const withUncertainty =
  /(with|and|plus|incl\w*|mit|und|samt|avec|et|con|y|±|\+\/-)\s[^.]{0,20}?(uncertaint|error|std|standard|unsicherheit|fehler|incertitude|erreur|incertidumbre)|[a-z0-9αe] ?± ?(u|σ|error|uncertainty)/i;

/** Words by which a header names a role that is no quantity; English, German, French, Spanish. First match counts. */
export const roleWords = [
  ['student', /^(student|[ée]tudiante?|estudiante|alumn[oa]|studierende[rn]?|students?[ _-]?(id|no|nr|number|key|code)?\.?|id|key|roster key|matr(ikel|iculation)[ _-]?(nummer|nr|number|no)?\.?|user(name)?|n[°ºo]\.?\s*(d['’])?[ée]tudiant.*|num[ée]ro (d['’])?[ée]tudiant|matr[ií]cula|kennung|clave|cl[ée])$/i],
  ['name', /^((full|last|first|family|given|sur|student|your)[ -]?)*(name|nom|nombre|nachname|vorname|familienname|apellidos?|pr[ée]nom)s?( (de famille|de l['’][ée]tudiant|complet|completo|y apellidos|of (the )?student|des studierenden))?$/i],
  ['group', /^(lab[ _-]?)?(group|pair|team|bench|gruppe|paar|groupe|bin[oô]me|grupo|pareja)([ _-]?(no|nr|number|id))?\.?$/i],
  ['attempt', /^(attempt|try|version|versuch|essai|tentative|intento)([ _-]?(no|nr|number))?\.?$/i],
  ['received', /^(received|submitted( at| on)?|timestamp|time( received)?|date|handed in|eingang|abgabe(datum|zeit)?|abgegeben( am)?|re[çc]u( le)?|remis le|horodateur|recibido|entregado|marca temporal|fecha|zeitstempel)$/i],
  ['isotopologue', /^(isotopologue?|isotope|isotopolog|isotop[oó]logo|gas|gaz|species|molecule|mol[ée]cule|molek[üu]l|mol[ée]cula|esp[eè]ce)$/i],
  ['spectrum', /^(spectr(um|a)|spectr(um|a)? ?files?|files?( ?names?)?|data ?files?|raw ?files?|datei(name)?|rohdatei|spektrum|spektren|fichier|spectre|archivo|fichero|espectro)s?$/i],
  ['line-count', /^(how many lines.*|number of lines( used| fitted)?|no\.? of lines( used)?|n lines|line[ _-]?count|lines used|anzahl (der )?linien|nombre de raies|n[úu]mero de l[íi]neas)$/i],
  ['comment', /^(comments?|remarks?|notes?|kommentar|bemerkung(en)?|commentaires?|remarques?|comentarios?|observaciones)$/i],
  ['quantity-name', /^(quantity|parameter|constant|gr[öo][ßs]+e|grandeur|magnitud)$/i],
  ['value', /^(value|wert|valeur|valor|result|ergebnis)$/i],
  ['unit', /^(units?|einheit|unit[ée]|unidad)$/i],
  ['uncertainty', /^(uncertainty|error|std|sigma|unsicherheit|incertitude|incertidumbre|\+\/-|±)$/i],
  ['branch', /^(branch|zweig|branche|rama)$/i],
  ['J', /^(j|j''|j″|j lower|j_lower|lower j)$/i],
  ['m', /^m$/],
  ['wavenumber', /^(wave ?numbers?|position|line position|ν̃|ν|nu|wellenzahl|nombre d['’]onde|n[úu]mero de onda)$/i],
  ['spectrum', /\b(files?|datei(en)?|fichiers?|archivos?|ficheros?|spectrum|spektrum|spectre|espectro)\b/i],
  ['student', /\b(student|user)[ _-]?(id|no|nr|number|key|code)\b|matrikelnummer|num[ée]ro d['’][ée]tudiant|n[úu]mero de (estudiante|matr[íi]cula)|e-?mail|courriel|correo/i],
  ['isotopologue', /\b(isotopologue?|isotope|which gas|welches gas|quel gaz|qu[ée] gas)\b/i],
] as const; // prettier-ignore

/** Roles whose words may stand anywhere in a sentence give way to a quantity. */
export const sentenceRoles = 3;

/** Symbols and words of quantities; the order settles which of two that fit is meant. */
export const quantityWords: readonly (readonly [QuantityKey, RegExp])[] = [
  ['nu02', /^(nu_?02|ν̃?0?\(2|nu2)|overtone origin|origin of the (first )?overtone|obertonurspr|origine de l['’]harmonique/i],
  ['nu0', /^(nu_?0|nu_?tilde_?0|[νṽv]̃?_?0|ṽ_?0|ν̃_?0)$|band (origin|centre|center)|fundamental (vibration(al)? )?(wavenumber|frequency)|grundschwingung|bandenursprung|nulll(inie|ücke)|origine de (la )?bande|centre de (la )?bande|origen de (la )?banda|centro de (la )?banda/i],
  ['omegaExe', /^(omega|ω|w)_?e?_?x_?e$|anharmoni|anarmon/i],
  ['omegaE', /^(omega_?e?|ω_?e?|w_?e)$|harmonic (wavenumber|frequency)|harmonische|vibration(al)? (frequency|wavenumber)|schwingungs(frequenz|wellenzahl)|harmonique|armónic/i],
  ['alphaE', /^(alpha_?e?|α_?e?|a_?e)$|vibration.?rotation|rotation.?vibration|schwingungs-?rotations|coupling|kopplung|couplage|acoplamiento/i],
  ['B0', /^(b_?0|b''|b″|b₀|b_?v0)$|rotational constant.*(ground|lower|v ?= ?0)|rotationskonstante.*(grund|v ?= ?0)|constante (de rotation|rotationnelle|rotacional).*(fondamental|fundamental|v ?= ?0)/i],
  ['B1', /^(b_?1|b'|b′|b₁|b_?v1)$|rotational constant.*(excited|upper|v ?= ?1)|rotationskonstante.*(angeregt|v ?= ?1)|constante (de rotation|rotationnelle|rotacional).*(excit|v ?= ?1)/i],
  ['B2', /^(b_?2|b₂)$/i],
  ['Be', /^b(_?e)?$|equilibrium rotational|rotational constant|rotationskonstante|constante (de rotation|rotationnelle|rotacional)/i],
  ['De', /^(d_?e)$|dissociation energy|dissoziationsenergie|[ée]nergie de dissociation|energ[íi]a de disociaci[óo]n/i],
  ['D', /^(d|d_?j|d_?v|d_?cent|D̄|d_?bar)$|centrifugal|zentrifugal|centrifuge|centr[íi]fug/i],
  ['D0', /^d_?0$/i],
  ['r0', /^(r_?0|r₀)$|(bond length|bindungsl[äa]nge|longueur de liaison|longitud de enlace).*(v ?= ?0|ground|grund|fondamental|fundamental)/i],
  ['re', /^(r_?e|r|r_?eq)$|bond (length|distance)|internuclear|bindungsl[äa]nge|gleichgewichtsabstand|kernabstand|longueur de liaison|distance (de liaison|internucl)|longitud de enlace|distancia (de enlace|internuclear)/i],
  ['k', /^k(_?e)?$|force constant|kraftkonstante|constante de (force|fuerza)/i],
  ['I', /^i(_?e)?$|moment of inertia|tr[äa]gheitsmoment|moment d['’]inertie|momento de inercia/i],
  ['mu', /^(mu|μ)$|reduced mass|reduzierte masse|masse r[ée]duite|masa reducida/i],
]; // prettier-ignore
