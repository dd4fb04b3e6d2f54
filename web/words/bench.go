package words

import (
	"strings"

	"ratehouse/trial"
	"ratehouse/trial/balance"
)

// The adjuster's bench: rejects, and one note a movement.
var (
	BenchTitle       = say("Bench", "Établi", "Werktisch")
	BenchSub         = say("Movements that failed, and what to change", "Mouvements échoués, et ce qu’il faut changer", "Nicht bestandene Werke und was zu ändern ist")
	BenchBatches     = say("Batches with rejects", "Lots avec des refus", "Lose mit nicht bestandenen")
	BenchRejects     = plural("{n} reject", "{n} rejects", "{n} refusé", "{n} refusés", "{n} nicht bestanden", "{n} nicht bestanden")
	BenchRejectsOf   = say1("Rejects of batch {code}", "Refusés du lot {code}", "Nicht bestandene des Loses {code}")
	BenchNone        = say("Nothing for the bench", "Rien pour l’établi", "Nichts für den Werktisch")
	BenchNoneText    = say("Movements stand here as soon as they fail, with what regulating can do for them.", "Les mouvements figurent ici dès qu’ils échouent, avec ce qu’un réglage peut y faire.", "Hier stehen Werke, sobald sie nicht bestehen, mit dem, was Regulieren ausrichten kann.")
	BenchOutside     = say("Outside in", "Hors limites en", "Außerhalb in")
	BenchByRegulate  = say("Regulating alone, s/d", "Réglage seul, s/d", "Regulieren allein, s/d")
	BenchNotEnough   = say("not enough", "ne suffit pas", "reicht nicht")
	BenchOpenBatch   = say("Batch", "Lot", "Los")
	BenchNoteTitle   = say("Bench note", "Note d’établi", "Werktischnotiz").unsure(FR, DE)
	BenchNoteOpinion = say("Opinion, not part of the report", "Opinion, ne fait pas partie du rapport", "Meinung, nicht Teil des Prüfberichts")
	BenchNoteText    = say("For the adjuster. It comes from daily rates alone; what it says of causes is a guess in the order of common practice.", "Pour le régleur ou la régleuse. Elle vient des seules marches diurnes ; ce qu’elle dit des causes est une conjecture, dans l’ordre de la pratique courante.", "Für die Reglage. Sie stammt allein aus täglichen Gängen; was sie über Ursachen sagt, ist eine Vermutung in der Reihenfolge üblicher Praxis.")
	BenchAuthor      = say("Author", "Auteur", "Verfasst von")
	BenchAuthorIs    = say2("{name}, {role}", "{name}, {role}", "{name}, {role}")
	BenchMadeOn      = say("Made on", "Établie le", "Erstellt am")
	BenchRegulation  = say("What regulating can do", "Ce que peut le réglage", "Was Regulieren ausrichtet")
	BenchBeyond      = say("What it cannot mend", "Ce qu’il ne peut corriger", "Was es nicht behebt")
	BenchBeyondNone  = say("Nothing beyond regulating is outside.", "Rien n’est hors limites au-delà du réglage.", "Außer dem Regulieren ist nichts außerhalb.")
	BenchLook        = say("Where to look first", "Où regarder d’abord", "Wo zuerst nachzusehen ist")
	BenchValidity    = say("What this rests on", "Sur quoi cela repose", "Worauf das beruht")
	BenchResolution  = say2("Uncertainties (u) are those of the reading resolution alone, {step} s ({u} s a state): the true ones are greater as a rule.", "Les incertitudes (u) sont celles de la résolution du relevé seule, {step} s ({u} s par état) : les vraies sont en règle générale plus grandes.", "Die Unsicherheiten (u) sind die der Ableseauflösung allein, {step} s ({u} s je Stand): Die wahren sind in der Regel größer.")
	BenchAmplitude   = say("Amplitude over these days, if it was measured", "Amplitude pendant ces jours, si elle a été mesurée", "Amplitude an diesen Tagen, falls gemessen")
	BenchFrom        = say("Least, degrees", "La plus faible, degrés", "Kleinste, Grad")
	BenchTo          = say("Greatest, degrees", "La plus grande, degrés", "Größte, Grad")
	BenchConsider    = say("Take it into account", "En tenir compte", "Berücksichtigen")
	BenchDegrees     = say("Type whole degrees from 30 to 400, the least first.", "Saisissez des degrés entiers de 30 à 400, la plus faible d’abord.", "Geben Sie ganze Grad von 30 bis 400 ein, die kleinste zuerst.")
	BenchWasGiven    = say2("Amplitude as given: {from}° to {to}°.", "Amplitude indiquée : {from}° à {to}°.", "Amplitude wie angegeben: {from}° bis {to}°.")
)

// Findings of a bench note.
var (
	findUndecided  = say1("{criteria}: not decided, nothing is said of it.", "{criteria} : non décidé, rien n’en est dit.", "{criteria}: nicht entschieden, dazu wird nichts gesagt.")
	findRoom       = say1("It passes as it is, and would with all rates shifted by {interval}.", "Il réussit tel quel, et encore avec toutes les marches décalées de {interval}.", "Es besteht, wie es ist, und auch mit allen Gängen verschoben um {interval}.")
	findRegulate   = say2("Regulating alone is enough: shift the rate by {interval}, best by {middle}. Plus gains.", "Le réglage seul suffit : décaler la marche de {interval}, au mieux de {middle}. Plus avance.", "Regulieren allein genügt: Gang um {interval} verschieben, am besten um {middle}. Plus geht vor.")
	findIndex      = say1("At the index: {interval} divisions.", "À la raquette : {interval} divisions.", "Am Rücker: {interval} Teilstriche.").unsure(DE)
	findScrews     = say1("At the timing screws: {interval} turns.", "Aux vis de réglage : {interval} tours.", "An den Regulierschrauben: {interval} Umdrehungen.")
	findOrgan      = say2("At the {organ}: {interval} units.", "À l’organe « {organ} » : {interval} unités.", "Am Organ „{organ}“: {interval} Einheiten.").unsure(FR, DE)
	findNoStep     = say("The calibre card does not say what a division or a turn does, or the interval is narrower than one can be told: in s/d only.", "La fiche du calibre ne dit pas ce que fait une division ou un tour, ou l’intervalle est trop étroit : en s/d seulement.", "Die Kaliberkarte sagt nicht, was ein Teilstrich oder eine Umdrehung bewirkt, oder das Intervall ist zu eng: nur in s/d.")
	findNotEnough  = say1("{criteria} would stay outside whatever the mean rate: regulating alone is not enough.", "{criteria} resterait hors limites quelle que soit la marche moyenne : le réglage seul ne suffit pas.", "{criteria} bliebe bei jedem mittleren Gang außerhalb: Regulieren allein genügt nicht.")
	findMeanToo    = say2("{criteria} is outside as well: once the rest is mended, shift by {interval}.", "{criteria} est aussi hors limites : une fois le reste corrigé, décaler de {interval}.", "{criteria} ist ebenfalls außerhalb: Ist das Übrige behoben, um {interval} verschieben.")
	findMeanInside = say("The mean rate is inside: what is outside has nothing to do with regulating.", "La marche moyenne est dans les limites : ce qui est hors limites ne tient pas au réglage.", "Der mittlere Gang ist innerhalb: Was außerhalb ist, hat mit Regulieren nichts zu tun.")

	findOneVariation = say4("{days}, {position}: the rate changed by {size}, where the other pairs change by {others} (median).", "{days}, {position} : la marche a varié de {size}, alors que les autres paires varient de {others} (médiane).", "{days}, {position}: Der Gang änderte sich um {size}, wo die anderen Paare sich um {others} ändern (Median).")
	findUnsteady     = say2("The rate is unsteady throughout: it changes by {mean} on average, by {most} at most.", "La marche est instable partout : elle varie de {mean} en moyenne, de {most} au plus.", "Der Gang ist durchweg unruhig: Er ändert sich im Mittel um {mean}, höchstens um {most}.")
	findAccessory    = say2("{days}: with the additional mechanism the rate differs by {value}.", "{days} : avec le mécanisme additionnel la marche diffère de {value}.", "{days}: Mit dem Zusatzmechanismus weicht der Gang um {value} ab.")
	findHangFlat     = say2("{criteria}, vertical less horizontal: {value}.", "{criteria}, différence plat-pendu : {value}.", "{criteria}, hängend weniger flach: {value}.")
	findFlatPair     = say1("Dial up less dial down: {value}.", "Cadran haut moins fond haut : {value}.", "Zifferblatt oben weniger unten: {value}.")
	findVertical     = say4("Vertical pattern of {size} (u {usize}): it gains most with the point at {direction}° down, clockwise from 12 as seen from the dial (u {uangle}°).", "Figure verticale de {size} (u {usize}) : avance la plus grande avec le point à {direction}° en bas, dans le sens horaire depuis 12 vu du cadran (u {uangle}°).", "Senkrechtes Muster von {size} (u {usize}): Es geht am meisten vor, wenn der Punkt bei {direction}° unten liegt, im Uhrzeigersinn von 12 vom Zifferblatt gesehen (u {uangle}°).").unsure(FR, DE)
	findFar          = say3("{days}, {position}, lies farthest from the mean: {value}.", "{days}, {position}, est le plus loin de la moyenne : {value}.", "{days}, {position}, liegt am weitesten vom Mittel: {value}.")
	findThermal      = say3("{criteria}: {value}, which is an error of compensation of {error}.", "{criteria} : {value}, soit une erreur de compensation de {error}.", "{criteria}: {value}, ein Kompensationsfehler von {error}.")
	findResumption   = say2("{criteria}: after cold and warm the rate came back {value} from where it was.", "{criteria} : après le froid et le chaud la marche est revenue à {value} de ce qu’elle était.", "{criteria}: Nach Kälte und Wärme kam der Gang um {value} daneben zurück.")

	findLookReading   = say1("{days}: look at the readings first; a wrong one would look the same.", "{days} : regarder d’abord les relevés ; une erreur donnerait la même image.", "{days}: zuerst die Ablesungen ansehen; eine falsche sähe genauso aus.")
	findLookDrive     = say("Amplitude, cleanliness and oil; then mainspring and winding.", "Amplitude, propreté et huile ; puis ressort moteur et remontage.", "Amplitude, Sauberkeit und Öl; dann Zugfeder und Aufzug.")
	findLookMagnetism = say("Magnetism; coils of the hairspring that touch.", "Aimantation ; spires du spiral qui se touchent.", "Magnetismus; Windungen der Spirale, die sich berühren.")
	findLookAccessory = say("What the additional mechanism takes from the amplitude.", "Ce que le mécanisme additionnel prend à l’amplitude.", "Was der Zusatzmechanismus an Amplitude nimmt.")
	findLookHeavy     = say1("Poise of the balance: if poise alone makes the pattern, its heavy side is at {direction}° from 12, seen from the dial.", "Équilibre du balancier : si la figure vient de l’équilibre seul, le côté lourd est à {direction}° de 12, vu du cadran.", "Gleichgewicht der Unruh: Macht allein die Unwucht das Muster, liegt die schwere Seite bei {direction}° von 12, vom Zifferblatt gesehen.")
	findLookPattern   = say("Hairspring centred and flat; then pivots; then poise.", "Spiral centré et plat ; puis pivots ; puis équilibre.", "Spirale zentrisch und flach; dann Zapfen; dann Gleichgewicht.")
	findLookPivots    = say1("Pivots and endshake, {position}.", "Pivots et ébats, {position}.", "Zapfen und Höhenluft, {position}.").unsure(FR, DE)
	findLookLoses     = say("It loses hanging: the amplitude falls; friction of the pivots, then the escapement.", "Retard au pendu : l’amplitude baisse ; frottement des pivots, puis échappement.", "Es geht hängend nach: Die Amplitude fällt; Reibung der Zapfen, dann die Hemmung.")
	findLookGains     = say("It gains hanging: play at the index pins, then the outer curve.", "Avance au pendu : jeu aux goupilles de raquette, puis courbe terminale.", "Es geht hängend vor: Spiel an den Rückerstiften, dann die Endkurve.").unsure(FR, DE)
	findLookSpring    = say("Hairspring and balance do not match: no index mends it.", "Spiral et balancier ne s’accordent pas : aucune raquette n’y remédie.", "Spirale und Unruh passen nicht zusammen: Kein Rücker behebt das.")
	findLookSettling  = say("What cold and warm left behind: collet, stud, oil.", "Ce que le froid et le chaud ont laissé : virole, piton, huile.", "Was Kälte und Wärme hinterlassen haben: Spiralrolle, Spiralklötzchen, Öl.")

	findOpinion       = say1("Means over a day each, {days}, through all amplitudes of the day: causes are guessed from them, never measured.", "Moyennes d’un jour chacune, {days}, à travers toutes les amplitudes du jour : les causes en sont devinées, jamais mesurées.", "Mittel über je einen Tag, {days}, durch alle Amplituden des Tages: Ursachen sind daraus vermutet, nie gemessen.")
	findNoAmplitude   = say("The amplitude is not known: no heavy side is named.", "L’amplitude n’est pas connue : aucun côté lourd n’est nommé.", "Die Amplitude ist nicht bekannt: Es wird keine schwere Seite genannt.")
	findAmplitudeWide = say("The amplitude given leaves open on which side the heavy side lies.", "L’amplitude indiquée laisse ouvert le côté lourd.", "Die angegebene Amplitude lässt offen, wo die schwere Seite liegt.")
	findNoClosure     = say("Three vertical positions: nothing tests whether the pattern is all there is.", "Trois positions verticales : rien ne vérifie que la figure explique tout.", "Drei senkrechte Lagen: Nichts prüft, ob das Muster alles ist.")
	findClosure       = say2("The four vertical positions do not close by {value} (2 u: {twice}): there is more than one cause.", "Les quatre positions verticales ne ferment pas, à {value} près (2 u : {twice}) : il y a plus d’une cause.", "Die vier senkrechten Lagen schließen um {value} nicht (2 u: {twice}): Es gibt mehr als eine Ursache.")
	findNoU           = say("No uncertainty is stated.", "Aucune incertitude n’est indiquée.", "Es ist keine Unsicherheit angegeben.")
	findMissing       = say1("{days} not read.", "{days} non relevés.", "{days} nicht abgelesen.")
	findDay           = say1("day {n}", "jour {n}", "Tag {n}")
	findDays          = say1("days {list}", "jours {list}", "Tage {list}")
)

// The regulating organs that calibre cards name.
const (
	organIndex  = "index"
	organScrews = "screws"
)

// BenchFinding says one finding of a bench note; what it does not know it says by its code.
func (p *Printer) BenchFinding(f balance.Finding) string {
	for _, say := range []func(balance.Finding) Text{p.findRegulation, p.findBeyond, p.findLook, p.findValidity} {
		if t := say(f); t != nil {
			return p.begin(p.Say(t))
		}
	}
	return string(f.Code)
}

// begin sets a capital at the beginning of a sentence that starts with a day.
func (p *Printer) begin(s string) string {
	for _, day := range []string{p.Say(findDay.With("")), p.Say(findDays.With(""))} {
		if strings.HasPrefix(s, day) {
			return strings.ToUpper(s[:1]) + s[1:]
		}
	}
	return s
}

func (p *Printer) findRegulation(f balance.Finding) Text {
	of := Raw(strings.Join(f.Symbols, ", "))
	switch f.Code {
	case balance.Undecided:
		return findUndecided.With(of)
	case balance.Room:
		return findRoom.With(p.shifts(f.Values))
	case balance.Regulate:
		return findRegulate.With(p.shifts(f.Values), p.perDay(f.Values[2], true))
	case balance.Units:
		return p.organ(f)
	case balance.NoStep:
		return findNoStep
	case balance.NotEnough:
		return findNotEnough.With(of)
	case balance.MeanAsWell:
		return findMeanToo.With(of, p.shifts(f.Values))
	case balance.MeanIsInside:
		return findMeanInside
	}
	return nil
}

func (p *Printer) organ(f balance.Finding) Text {
	units := Raw(p.Needed(f.Values[0].Exact(), f.Values[1].Exact()))
	switch f.Organ {
	case organIndex:
		return findIndex.With(units)
	case organScrews:
		return findScrews.With(units)
	}
	return findOrgan.With(Raw(f.Organ), units)
}

func (p *Printer) findBeyond(f balance.Finding) Text {
	of, days, at := Raw(strings.Join(f.Symbols, ", ")), p.dayNames(f.Days), PositionTerm(string(f.Position))
	switch v := f.Values; f.Code {
	case balance.OneVariation:
		return findOneVariation.With(days, at, p.perDay(v[0], false), p.perDay(v[1], false))
	case balance.Unsteady:
		return findUnsteady.With(p.perDay(v[0], false), p.perDay(v[1], false))
	case balance.Accessory:
		return findAccessory.With(days, p.perDay(v[0], true))
	case balance.HangFlat:
		return findHangFlat.With(of, p.perDay(v[0], true))
	case balance.FlatPair:
		return findFlatPair.With(p.perDay(v[0], true))
	case balance.Vertical:
		return findVertical.With(p.perDay(v[0], false), p.perDay(v[2], false), p.degrees(v[1]), Raw(p.Magnitude(v[3].String(), 1)))
	case balance.FarPosition:
		return findFar.With(days, at, p.perDay(v[0], true))
	case balance.Thermal:
		return findThermal.With(of, Raw(p.Unit(p.Signed(v[0].String(), 3), p.Say(UnitPerDegree))), Raw(p.Unit(p.Signed(v[1].String(), 1), "10⁻⁶/°C")))
	case balance.Resumption:
		return findResumption.With(of, p.perDay(v[0], true))
	}
	return nil
}

func (p *Printer) findLook(f balance.Finding) Text {
	switch f.Code {
	case balance.LookReading:
		return findLookReading.With(p.dayNames(f.Days))
	case balance.LookDrive:
		return findLookDrive
	case balance.LookMagnetism:
		return findLookMagnetism
	case balance.LookAccessory:
		return findLookAccessory
	case balance.LookHeavy:
		return findLookHeavy.With(p.degrees(f.Values[0]))
	case balance.LookPattern:
		return findLookPattern
	case balance.LookPivots:
		return findLookPivots.With(PositionTerm(string(f.Position)))
	case balance.LookHang:
		if f.Values[0] < 0 {
			return findLookLoses
		}
		return findLookGains
	case balance.LookSpring:
		return findLookSpring
	case balance.LookSettling:
		return findLookSettling
	}
	return nil
}

func (p *Printer) findValidity(f balance.Finding) Text {
	switch f.Code {
	case balance.Opinion:
		return findOpinion.With(Days.With(int(f.Values[0] / 1000)))
	case balance.NoAmplitude:
		return findNoAmplitude
	case balance.AmplitudeWide:
		return findAmplitudeWide
	case balance.NoClosure:
		return findNoClosure
	case balance.ClosureOpen:
		return findClosure.With(p.perDay(f.Values[0], true), p.perDay(f.Values[1], false))
	case balance.NoUncertainty:
		return findNoU
	case balance.DaysMissing:
		return findMissing.With(p.dayNames(f.Days))
	}
	return nil
}

// shifts is an interval of shifts, drawn inwards so that every one shown serves.
func (p *Printer) shifts(v []trial.Milli) Text {
	return Raw(p.Unit(p.Needed(v[0].Exact(), v[1].Exact()), p.Say(UnitSecondsPerDay)))
}

func (p *Printer) perDay(m trial.Milli, sign bool) Text {
	return Raw(p.Unit(p.Number(m.String(), 2, sign), p.Say(UnitSecondsPerDay)))
}

func (p *Printer) degrees(m trial.Milli) Text { return Raw(p.Magnitude(m.String(), 0)) }

// dayNames lists programme days with the word before them.
func (p *Printer) dayNames(days []int) Text {
	if len(days) == 1 {
		return findDay.With(days[0])
	}
	return findDays.With(p.days(days))
}
