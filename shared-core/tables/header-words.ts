import type { QuantityKey } from '../units/types.ts';

/** Words by which a header names a role that is no quantity; English, German, French, Spanish. First match counts. */
export const roleWords = [
  ['student', /^(student|students?[ _-]?(id|no|nr|number|key)?|id|key|roster key|matr(ikel|iculation)[ _-]?(nummer|nr|number|no)?\.?|user(name)?|n[°ºo]\.?\s*(d['’])?[ée]tudiant.*|num[ée]ro (d['’])?[ée]tudiant|matr[ií]cula|kennung|clave|cl[ée])$/i],
  ['name', /^(full |last |first |family )?(name|nom|nombre|nachname|vorname|apellidos?|pr[ée]nom)s?( .*)?$/i],
  ['group', /^(group|pair|team|bench|gruppe|paar|groupe|bin[oô]me|grupo|pareja|partner)([ _-]?(no|nr|number|id))?\.?$/i],
  ['attempt', /^(attempt|try|version|versuch|essai|tentative|intento)([ _-]?(no|nr|number))?\.?$/i],
  ['received', /^(received|submitted( at| on)?|timestamp|time( received)?|date|handed in|eingang|abgabe(datum|zeit)?|abgegeben( am)?|re[çc]u( le)?|remis le|horodateur|recibido|entregado|marca temporal|fecha|zeitstempel)$/i],
  ['isotopologue', /^(isotopologue?|isotope|isotopolog|isotop[oó]logo|gas|gaz|species|molecule|mol[ée]cule|molek[üu]l|mol[ée]cula|esp[eè]ce)$/i],
  ['spectrum', /^(spectr(um|a)|spectr(um|a)? ?files?|files?( ?names?)?|data ?files?|raw ?files?|datei(name)?|rohdatei|spektrum|spektren|fichier|spectre|archivo|fichero|espectro)s?$/i],
  ['line-count', /^(number of lines|no\.? of lines|n lines|line[ _-]?count|lines used|anzahl (der )?linien|nombre de raies|n[úu]mero de l[íi]neas)$/i],
  ['comment', /^(comments?|remarks?|notes?|kommentar|bemerkung(en)?|commentaires?|remarques?|comentarios?|observaciones)$/i],
  ['quantity-name', /^(quantity|parameter|constant|gr[öo][ßs]+e|grandeur|magnitud)$/i],
  ['value', /^(value|wert|valeur|valor|result|ergebnis)$/i],
  ['unit', /^(units?|einheit|unit[ée]|unidad)$/i],
  ['uncertainty', /^(uncertainty|error|std|sigma|unsicherheit|incertitude|incertidumbre|\+\/-|±)$/i],
  ['branch', /^(branch|zweig|branche|rama)$/i],
  ['J', /^(j|j''|j″|j lower|j_lower|lower j)$/i],
  ['m', /^m$/],
  ['wavenumber', /^(wave ?numbers?|position|line position|ν̃|ν|nu|wellenzahl|nombre d['’]onde|n[úu]mero de onda)$/i],
] as const; // prettier-ignore

/** Symbols and words of quantities; the order settles which of two that fit is meant. */
export const quantityWords: readonly (readonly [QuantityKey, RegExp])[] = [
  ['nu02', /^(nu_?02|ν̃?0?\(2|nu2)|overtone origin|origin of the (first )?overtone|obertonurspr|origine de l['’]harmonique/i],
  ['nu0', /^(nu_?0|nu_?tilde_?0|[νṽv]̃?_?0|ṽ_?0|ν̃_?0)$|band (origin|centre|center)|bandenursprung|nulll(inie|ücke)|origine de (la )?bande|centre de (la )?bande|origen de (la )?banda|centro de (la )?banda/i],
  ['omegaExe', /^(omega_?e_?_?x_?e|ω_?ex_?e|ω_?e_?x_?e|we_?xe|w_?ex_?e)$|anharmoni|anarmon/i],
  ['omegaE', /^(omega_?e?|ω_?e?|w_?e)$|harmonic (wavenumber|frequency)|harmonische|harmonique|armónic/i],
  ['alphaE', /^(alpha_?e?|α_?e?|a_?e)$|vibration.?rotation|rotation.?vibration|coupling|kopplung|couplage|acoplamiento/i],
  ['B0', /^(b_?0|b''|b″|b₀|b_?v0)$|rotational constant.*(ground|lower|v ?= ?0)|rotationskonstante.*(grund|v ?= ?0)/i],
  ['B1', /^(b_?1|b'|b′|b₁|b_?v1)$|rotational constant.*(excited|upper|v ?= ?1)|rotationskonstante.*(angeregt|v ?= ?1)/i],
  ['B2', /^(b_?2|b₂)$/i],
  ['Be', /^b_?e$|equilibrium rotational|rotational constant|rotationskonstante|constante (de rotation|rotationnelle|rotacional)/i],
  ['De', /^(d_?e)$|dissociation energy|dissoziationsenergie|[ée]nergie de dissociation|energ[íi]a de disociaci[óo]n/i],
  ['D', /^(d|d_?j|d_?v|d_?cent|D̄|d_?bar)$|centrifugal|zentrifugal|centrifuge|centr[íi]fug/i],
  ['D0', /^d_?0$/i],
  ['r0', /^(r_?0|r₀)$|bond length.*(v ?= ?0|ground)/i],
  ['re', /^(r_?e|r|r_?eq)$|bond (length|distance)|internuclear|bindungsl[äa]nge|gleichgewichtsabstand|kernabstand|longueur de liaison|distance (de liaison|internucl)|longitud de enlace|distancia (de enlace|internuclear)/i],
  ['k', /^k(_?e)?$|force constant|kraftkonstante|constante de (force|fuerza)/i],
  ['I', /^i(_?e)?$|moment of inertia|tr[äa]gheitsmoment|moment d['’]inertie|momento de inercia/i],
  ['mu', /^(mu|μ)$|reduced mass|reduzierte masse|masse r[ée]duite|masa reducida/i],
]; // prettier-ignore
