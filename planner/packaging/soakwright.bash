# SPDX-License-Identifier: GPL-3.0-or-later
# bash completion for soakwright(1)
_soakwright() {
    local word=${COMP_WORDS[COMP_CWORD]} before=${COMP_WORDS[COMP_CWORD - 1]} options=""
    if [ "$COMP_CWORD" -eq 1 ]; then
        mapfile -t COMPREPLY < <(compgen -W "state sweep window triage import sheet packet verify grade load run look-back trend evidence cycle store help --version" -- "$word")
        return
    fi
    case $before in
        --store | --csv | --pdf | --xlsx | --write | --baseline | --own | --copy | --log | --password-file | --new-password-file)
            mapfile -t COMPREPLY < <(compgen -f -- "$word")
            return ;;
        --sheets | --templates)
            mapfile -t COMPREPLY < <(compgen -d -- "$word")
            return ;;
        --paper)
            mapfile -t COMPREPLY < <(compgen -W "a4 letter" -- "$word")
            return ;;
        --language | --second)
            mapfile -t COMPREPLY < <(compgen -W "en de pl pt" -- "$word")
            return ;;
    esac
    case ${COMP_WORDS[1]} in
        state) options="--wt --at --with --without --set --json" ;;
        sweep) options="--wt --from --to --with --without --set --json" ;;
        window) options="--wt --family --grade --kind --form --heat --cycle --furnace --store --setpoint --band-rule --date --set --json" ;;
        triage) options="--csv --store --furnace --threads --sheets --xlsx --band-rule --date --json" ;;
        sheet) options="--store --heat --cycle --furnace --pdf --xlsx --setpoint --paper --issue --language --second --record --templates --band-rule --date --json" ;;
        packet) options="--store --sheet --revision --pdf" ;;
        verify) options="--store --copy --json" ;;
        grade) options="--grade --cycle --furnace --store --samples --fresh --seed --threads --date --band-rule --json" ;;
        load) options="--heats --furnace --store --date --band-rule --json" ;;
        run) options="--heat --cycle --furnace --store --log --soak-start --soak-end --door --under --load-sensor --control-sensor --setpoint --date --band-rule --json" ;;
        look-back) options="--furnace --error --known --since --until --store --json" ;;
        trend) options="--store --elements --date --json" ;;
        evidence) options="--family --kind --write --baseline --own --weigh-own --json" ;;
        import) options="--store --preview --supplier --columns --by --why --undo --date --password-file --json" ;;
        cycle) options="history approve freeze unfreeze withdraw --store --revision --by --why --customer --date --password-file --json" ;;
        store) options="new check backup restore journal person roles --demo --roles --by --why --date --password-file --new-password-file --inactive --json" ;;
    esac
    mapfile -t COMPREPLY < <(compgen -W "$options" -- "$word")
}
complete -o filenames -F _soakwright soakwright
